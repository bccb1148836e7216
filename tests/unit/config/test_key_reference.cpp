#include <catch2/catch.hpp>
#include <fstream>
#include <iterator>

#include "sim/config/key_reference.h"

using namespace lacuna;

TEST_CASE("README.md lists the keys as the program knows them", "[config]") {
    std::ifstream in(std::string(LACUNA_CONFIGS) + "/../README.md");
    const std::string page{std::istreambuf_iterator<char>(in), {}};
    // To make it again: replace the block by what key_reference() returns.
    CHECK(page.find("```\n" + key_reference() + "```") != std::string::npos);
}
