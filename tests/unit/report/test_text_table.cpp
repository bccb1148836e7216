#include <algorithm>
#include <catch2/catch.hpp>
#include <sstream>

#include "analysis/report/text_table.h"

using namespace lacuna;

namespace {

std::vector<std::string> lines(const std::string& text) {
    std::vector<std::string> all;
    std::istringstream stream(text);
    for (std::string line; std::getline(stream, line);) all.push_back(line);
    return all;
}

}  // namespace

TEST_CASE("columns are aligned by characters, not bytes", "[report]") {
    const auto text = lines(render({{"metric", "value"}, {{"a", "–"}, {"long metric", "0.3 ± 0.1\n0.1 to 0.5"}}}));
    REQUIRE(text.size() == 5);
    CHECK(text[0] == "metric       value");
    CHECK(text[1] == "-----------------------");
    CHECK(text[2] == "a            –");
    CHECK(text[3] == "long metric  0.3 ± 0.1");
    CHECK(text[4] == "             0.1 to 0.5");
}

TEST_CASE("tables with many columns are cut into several of at most 100 columns", "[report]") {
    TextTable table;
    table.header = {"metric"};
    for (const char* metric : {"false_discovery_rate", "power", "type1_error"}) {
        table.rows.push_back(std::vector<std::string>{metric});
    }
    for (int r = 0; r < 12; ++r) {
        table.header.push_back("regime with a long name of its own " + std::to_string(r));
        for (auto& row : table.rows) row.push_back("0.3127 ± 0.0012");
    }
    const std::string text = render(table);
    for (const std::string& line : lines(text)) CHECK(shown_width(line) <= text_width);
    // Every regime's number appears once as the last word of its header.
    for (int r = 0; r < 12; ++r) CHECK(text.find(' ' + std::to_string(r)) != std::string::npos);
    CHECK(std::count(text.begin(), text.end(), '-') > 100);
}

TEST_CASE("control characters in names cannot reach the terminal", "[report]") {
    const std::string text = render({{"metric", "\x1b[31mred\x7f"}, {{"a", "b"}}});
    CHECK(text.find('\x1b') == std::string::npos);
    CHECK(text.find("?[31mred?") != std::string::npos);
}

TEST_CASE("text is broken at spaces, and long words are cut", "[report]") {
    CHECK(broken("results blind everywhere", 13) == std::vector<std::string>{"results blind", "everywhere"});
    CHECK(broken("abcdefgh", 3) == std::vector<std::string>{"abc", "def", "gh"});
    CHECK(broken("", 3) == std::vector<std::string>{""});
}
