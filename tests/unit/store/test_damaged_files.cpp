#include <sys/wait.h>

#include <catch2/catch.hpp>
#include <csignal>

#include "tests/unit/store/sample_outcome.h"

using namespace lacuna;
using namespace lacuna::sample_outcome;

TEST_CASE("Files that are no outcome files get one clear message", "[store]") {
    const Folder folder;
    CHECK_THAT(message_of(folder / "missing.h5"), Catch::Contains("no such file"));
    std::ofstream(folder / "text.h5") << "not a table\n";
    CHECK_THAT(message_of(folder / "text.h5"), Catch::Contains("is not an HDF5 file"));
    std::ofstream(folder / "empty.h5");
    CHECK_THAT(message_of(folder / "empty.h5"), Catch::Contains("is not an HDF5 file"));
    CHECK_THAT(message_of(folder.path.string()), Catch::Contains("is not a file"));
    write(folder / "whole.h5", 100000, 100000);
    const std::string whole = bytes_of(folder / "whole.h5");
    for (const double share : {0.02, 0.3, 0.7, 0.99}) {
        std::ofstream(folder / "cut.h5", std::ios::binary)
            << whole.substr(0, static_cast<std::size_t>(share * static_cast<double>(whole.size())));
        CHECK_FALSE(message_of(folder / "cut.h5").empty());
    }
}

TEST_CASE("Flipped bits end in a message or in values, never in a dead reader's caller", "[store]") {
    const Folder folder;
    write(folder / "good.h5", 3000, 3000);
    const std::string good = bytes_of(folder / "good.h5");
    int signalled = 0;
    for (std::size_t trial = 0; trial < 60; ++trial) {
        std::string bad = good;
        // Half of the flips in the metadata at the front, half anywhere.
        const std::size_t at = trial * 2654435761u % (trial % 2 == 0 ? 4096 : bad.size());
        bad[at] = static_cast<char>(bad[at] ^ (1 << trial % 8));
        std::ofstream(folder / "bad.h5", std::ios::binary) << bad;
        const pid_t child = ::fork();  // the library itself may crash on damaged files (1 in 1000)
        if (child == 0) {
            ::alarm(20);
            for (const int signal : {SIGSEGV, SIGBUS, SIGABRT, SIGFPE}) ::signal(signal, SIG_DFL);  // not Catch's
            message_of(folder / "bad.h5");
            ::_exit(0);
        }
        int status = 0;
        ::waitpid(child, &status, 0);
        signalled += !WIFEXITED(status);
    }
    CHECK(signalled <= 2);
}
