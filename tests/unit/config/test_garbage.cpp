// Texts that no one wrote: they must be refused, never crash.
#include <catch2/catch.hpp>
#include <fstream>
#include <random>
#include <sstream>
#include <string>

#include "sim/config/load.h"

namespace {

/// The faults of a text, or none where it is a good config.
std::vector<lacuna::Fault> faults_of(const std::string& text) {
    try {
        lacuna::parse_scenario(text, "text", {});
    } catch (const lacuna::InputError& error) {
        return error.faults();
    }
    return {};
}

std::string first_message(const std::string& text) {
    const std::vector<lacuna::Fault> faults = faults_of(text);
    return faults.empty() ? "" : faults.front().message;
}

std::string repeated(const std::string& unit, std::size_t count) {
    std::string text;
    text.reserve(unit.size() * count);
    for (std::size_t i = 0; i < count; ++i) text += unit;
    return text;
}

std::string random_text(std::size_t size, char low, char high) {
    std::mt19937 random(1);
    std::string text(size, ' ');
    for (char& c : text)
        c = static_cast<char>(low + static_cast<int>(random() % static_cast<unsigned>(high - low + 1)));
    return text;
}

std::string demo() {
    std::ifstream file(LACUNA_CONFIGS "/biostimulant-trials.toml");
    std::ostringstream text;
    text << file.rdbuf();
    return text.str();
}

}  // namespace

TEST_CASE("10 MB of garbage is refused by its size, and less by its content") {
    CHECK(first_message(random_text(10'000'000, -128, 127)) == "is larger than 4 MB, which no config is");
    CHECK(first_message(std::string(10'000'000, '[')) == "is larger than 4 MB, which no config is");
    CHECK(faults_of(random_text(4'000'000, -128, 127)).size() == 1);
    CHECK(faults_of(random_text(4'000'000, ' ', '~')).size() == 1);
}

TEST_CASE("depth is limited before anything recurses") {
    CHECK(first_message("a = " + std::string(10000, '[')) == "values are nested deeper than 32");
    CHECK(first_message("a = " + repeated("{ b = ", 10000)) == "values are nested deeper than 32");
    CHECK(first_message("a" + repeated(".a", 10000) + " = 1") == "a dotted key has more than 32 parts");
    CHECK(first_message("a" + repeated(" . a", 10000) + " = 1") == "a dotted key has more than 32 parts");
    CHECK(first_message("[a" + repeated(".\"a\"", 10000) + "]") == "a dotted key has more than 32 parts");
    CHECK(first_message("[[regime]]\nname = \"A\"\nset = { \"field" + repeated(".a", 10000) + "\" = 1 }")
              .find("is not a path of keys") != std::string::npos);
}

TEST_CASE("a million faults are reported in time, the first 200 of them by name") {
    std::string text = "[field]\n";
    for (int i = 0; i < 200000; ++i) text += "k" + std::to_string(i) + "=1\n";
    const std::vector<lacuna::Fault> faults = faults_of(text);
    REQUIRE(faults.size() == 201);
    CHECK(faults.front().place.line == 2);
    CHECK(faults.back().message == "has 199800 more faults");
    CHECK(first_message(repeated("[[regime]]\n", 100000)) == "must hold at most 256 regimes");
}

TEST_CASE("the demo cut off anywhere, or with any byte changed, is read or refused") {
    const std::string good = demo();
    REQUIRE(faults_of(good).empty());
    std::size_t refused = 0;
    for (std::size_t cut = 0; cut < good.size(); cut += 3) refused += !faults_of(good.substr(0, cut)).empty();
    std::mt19937 random(2);
    for (int i = 0; i < 2000; ++i) {
        std::string text = good;
        const unsigned edits = 1 + static_cast<unsigned>(random() % 3);
        for (unsigned edit = 0; edit < edits; ++edit) {
            const std::size_t at = random() % text.size();
            static const std::string alphabet = "[]{}&=.,\"'#\n\r\t 0e-_xτ\xff";
            if (random() % 2)
                text[at] = alphabet[random() % alphabet.size()];
            else
                text.insert(at, 1, alphabet[random() % alphabet.size()]);
        }
        refused += !faults_of(text).empty();
    }
    CHECK(refused > 1000);
}
