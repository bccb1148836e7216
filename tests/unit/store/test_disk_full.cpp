// A disk without room, a limit on file sizes, a directory that refuses: one message, nothing left
// behind, and no crash when HDF5 closes. Every attempt runs in a process of its own, through its exit.
#include <sys/mount.h>
#include <sys/resource.h>
#include <sys/wait.h>

#include <catch2/catch.hpp>
#include <csignal>

#include "tests/unit/store/sample_outcome.h"

using namespace lacuna;
using namespace lacuna::sample_outcome;

namespace {

constexpr std::size_t many_rows = 200'000;  // about 3 MB

/// Where the writer said what of a run that could not be written.
struct Attempt {
    int status = 0;
    bool early = false;  // told before all rows had been handed over
    std::string message;
};

/// Writes `rows` to `path` in a child that leaves by exit(), and with it by HDF5's own cleaning up.
Attempt attempt(const std::string& path, std::size_t count, bool compress, rlim_t largest_file) {
    int channel[2];
    if (::pipe(channel) != 0) throw RunError("no pipe");
    const pid_t child = ::fork();
    if (child == 0) {
        for (const int signal : {SIGSEGV, SIGBUS, SIGABRT, SIGFPE}) ::signal(signal, SIG_DFL);  // not Catch's
        ::signal(SIGXFSZ, SIG_IGN);                                                             // as main() does
        const rlimit limit{largest_file, largest_file};
        ::setrlimit(RLIMIT_FSIZE, &limit);
        std::string message;
        bool early = true;
        try {
            OutcomeWriter writer(path, true, facts(), {spec()}, compress, serial);
            for (std::size_t first = 0; first < count; first += 10'000)
                writer.append("studies", rows(first, 10'000));
            early = false;
            writer.finish(true, 3, 3);
        } catch (const std::exception& error) {
            message = error.what();
        }
        const bool told =
            ::write(channel[1], message.data(), message.size()) == static_cast<ssize_t>(message.size());
        std::exit(!told ? 99 : message.empty() ? 0 : early ? 1 : 2);
    }
    ::close(channel[1]);
    Attempt result;
    char buffer[4096];
    for (ssize_t got; (got = ::read(channel[0], buffer, sizeof buffer)) > 0;)
        result.message.append(buffer, static_cast<std::size_t>(got));
    ::close(channel[0]);
    ::waitpid(child, &result.status, 0);
    result.early = WIFEXITED(result.status) && WEXITSTATUS(result.status) == 1;
    return result;
}

bool failed_cleanly(const Attempt& result) {
    return WIFEXITED(result.status) && (WEXITSTATUS(result.status) == 1 || WEXITSTATUS(result.status) == 2);
}

std::size_t files_in(const fs::path& folder) {
    return static_cast<std::size_t>(std::distance(fs::directory_iterator(folder), {}));
}

/// A file system of a given size at `path`, while it lives.
struct SmallDisk {
    std::string path;
    bool mounted;
    SmallDisk(std::string at, std::size_t bytes)
        : path(std::move(at)),
          mounted(::mount("tmpfs", path.c_str(), "tmpfs", 0, ("size=" + std::to_string(bytes)).c_str()) == 0) {}
    SmallDisk(const SmallDisk&) = delete;
    SmallDisk& operator=(const SmallDisk&) = delete;
    ~SmallDisk() {
        if (mounted) ::umount(path.c_str());
    }
};

}  // namespace

TEST_CASE("A full disk is one message, and leaves what was there", "[store]") {
    const Folder folder;
    const std::string place = folder / "disk";
    fs::create_directories(place);
    for (const std::size_t kilobytes : {4, 16, 40, 64, 100, 160, 256, 400, 600, 1000}) {
        const SmallDisk disk(place, kilobytes * 1024);
        if (!disk.mounted) {
            WARN("not run: mounting a small file system needs root");
            return;
        }
        for (const bool compress : {true, false}) {
            INFO(kilobytes << " kB, compressed: " << compress);
            std::ofstream(place + "/out.h5") << "earlier";
            const Attempt result = attempt(place + "/out.h5", many_rows, compress, RLIM_INFINITY);
            INFO(result.message);
            CHECK(failed_cleanly(result));
            CHECK_THAT(result.message,
                       Catch::Contains("disk full") && Catch::Contains(place) && Catch::Contains("free space"));
            CHECK(bytes_of(place + "/out.h5") == "earlier");
            CHECK(files_in(place) == 1);
        }
    }
}

TEST_CASE("A file that just fits is written", "[store]") {
    const Folder folder;
    const std::string place = folder / "disk";
    fs::create_directories(place);
    write(folder / "out.h5", many_rows, many_rows);
    const std::size_t page = 4096;
    const std::size_t bytes = (fs::file_size(folder / "out.h5") + page - 1) / page * page;
    const SmallDisk disk(place, bytes + page);
    if (!disk.mounted) {
        WARN("not run: mounting a small file system needs root");
        return;
    }
    CHECK(attempt(place + "/out.h5", many_rows, true, RLIM_INFINITY).message.empty());
    CHECK(payload_digest(OutcomeReader(place + "/out.h5")) == payload_digest(OutcomeReader(folder / "out.h5")));
}

TEST_CASE("A limit on file sizes is one message", "[store]") {
    const Folder folder;
    for (const rlim_t limit :
         {rlim_t{0}, rlim_t{100}, rlim_t{5000}, rlim_t{70'000}, rlim_t{300'000}, rlim_t{600'000}}) {
        INFO(limit << " bytes");
        const Attempt result = attempt(folder / "out.h5", many_rows, true, limit);
        INFO(result.message);
        CHECK(failed_cleanly(result));
        CHECK_THAT(result.message, Catch::Contains("ulimit -f"));
        CHECK(result.early);
        CHECK(files_in(folder.path) == 0);
    }
}
