// Every config in broken/ with the whole list of its faults. What is expected stands in comments at the
// end of the file, or in a .expect file where the text cannot hold a comment: lines `set: KEY=VALUE` for
// --set, and `expect: ` (in .expect files: plain) lines with the faults in order.
#include <algorithm>
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <string>
#include <vector>

#include "sim/config/load.h"

namespace {

namespace fs = std::filesystem;

struct Expected {
    std::vector<lacuna::Override> overrides;
    std::vector<std::string> faults;
};

std::string file_text(const fs::path& path) {
    std::ifstream file(path, std::ios::binary);
    std::ostringstream text;
    text << file.rdbuf();
    return text.str();
}

bool strip(std::string& line, const std::string& prefix) {
    if (line.compare(0, prefix.size(), prefix) != 0) return false;
    line.erase(0, prefix.size());
    return true;
}

lacuna::Override override_of(std::string text) {
    const std::size_t escape = text.find("\\n");
    if (escape != std::string::npos) text.replace(escape, 2, "\n");
    const std::size_t equals = text.find('=');
    return {text.substr(0, equals), text.substr(equals + 1)};
}

Expected expected_of(fs::path path) {
    const fs::path sidecar = fs::path(path).replace_extension(".expect");
    const bool has_sidecar = fs::exists(sidecar);
    std::istringstream lines(file_text(has_sidecar ? sidecar : path));
    Expected expected;
    for (std::string line; std::getline(lines, line);) {
        if (!has_sidecar && !strip(line, "# ")) continue;
        if (strip(line, "set: "))
            expected.overrides.push_back(override_of(line));
        else if (has_sidecar || strip(line, "expect: "))
            expected.faults.push_back(line);
    }
    return expected;
}

std::vector<std::string> faults_of(const fs::path& path, const std::vector<lacuna::Override>& overrides) {
    std::vector<std::string> faults;
    try {
        lacuna::load_scenario(path.string(), overrides);
    } catch (const lacuna::InputError& error) {
        for (const lacuna::Fault& fault : error.faults()) {
            std::string text = to_string(fault);
            if (strip(text, path.string())) text = "<file>" + text;
            faults.push_back(text);
        }
    }
    return faults;
}

}  // namespace

TEST_CASE("every broken config is refused with all of its faults and no others") {
    std::vector<fs::path> paths;
    for (const auto& entry : fs::directory_iterator(LACUNA_REFERENCE "/../unit/config/broken")) {
        if (entry.path().extension() == ".toml") paths.push_back(entry.path());
    }
    std::sort(paths.begin(), paths.end());
    CHECK(paths.size() >= 75);
    for (const fs::path& path : paths) {
        INFO(path.filename().string());
        const Expected expected = expected_of(path);
        CHECK_FALSE(expected.faults.empty());
        CHECK(faults_of(path, expected.overrides) == expected.faults);
    }
}
