#include <catch2/catch.hpp>

#include "analysis/cli/progress_line.h"

using namespace lacuna;

TEST_CASE("progress says share, literatures, rate and time left", "[progress]") {
    CHECK(progress_text({168, 400, 42'000'000, 1e8}, 3.0) ==
          " 42 %  168 of 400 literatures  14.0 M studies/s  0:05 left");
    CHECK(progress_text({0, 1, 0, 1e8}, 0.0) == "  0 %  0 of 1 literatures  0 M studies/s  unknown left");
    CHECK(progress_text({1, 10, 1000, 3'600'001'000.0}, 0.001) ==
          "  0 %  1 of 10 literatures  1.00 M studies/s  1:00:00 left");
}

TEST_CASE("the line appears at most five times a second and is erased", "[progress]") {
    double now = 0.0;
    std::vector<std::string> written;
    ProgressLine line(
        true, true, [&] { return now; }, [&](const std::string& text) { written.push_back(text); });
    for (int i = 1; i <= 1000; ++i) {
        now = i * 0.001;
        line.update({1, 2, 3, 4.0});
    }
    CHECK(written.size() >= 4);
    CHECK(written.size() <= 5);
    line.erase();
    CHECK(written.back() == "\r\x1b[K");
    const std::size_t count = written.size();
    line.erase();
    CHECK(written.size() == count);
}

TEST_CASE("no escape sequences off a terminal, and nothing when not shown", "[progress]") {
    double now = 0.0;
    std::string written;
    const auto clock = [&] { return now; };
    const auto write = [&](const std::string& text) { written += text; };
    ProgressLine hidden(false, true, clock, write);
    ProgressLine log(true, false, clock, write);
    now = 10.0;
    hidden.update({1, 2, 3, 4.0});
    hidden.erase();
    CHECK(written.empty());
    log.update({1, 2, 3, 4.0});
    log.erase();
    CHECK(written.find('\x1b') == std::string::npos);
    CHECK(written.back() == '\n');
}
