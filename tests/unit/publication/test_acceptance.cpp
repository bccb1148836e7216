#include <catch2/catch.hpp>

#include "sim/publication/acceptance.h"
#include "sim/publication/manuscripts.h"

using namespace lacuna;

TEST_CASE("A p rule's chance at a level is that of the step its p falls in", "[publication]") {
    Acceptance accept;
    accept.kind = Acceptance::Kind::by_p;
    accept.steps = {0.01, 0.05};
    accept.chance = {0.9, 0.6, 0.1};
    // Other rules of the run count levels over further cuts.
    const std::vector<double> cuts{0.001, 0.01, 0.02, 0.05, 0.3};
    const AcceptanceTable table = acceptance_table(accept, cuts);
    REQUIRE(table.chance.size() == 6);
    const auto chance_of = [&](double p) {
        std::size_t level = 0;
        for (const double cut : cuts) level += p < cut;
        return table.chance[level].p();
    };
    CHECK(chance_of(0.0005) == 0.9);
    CHECK(chance_of(0.005) == 0.9);
    CHECK(chance_of(0.01) == 0.6);
    CHECK(chance_of(0.015) == 0.6);
    CHECK(chance_of(0.04) == 0.6);
    CHECK(chance_of(0.05) == 0.1);
    CHECK(chance_of(0.2) == 0.1);
    CHECK(chance_of(0.9) == 0.1);
    CHECK(highest_chance(accept) == 0.9);
}

TEST_CASE("A line is supportive when all its studies find in one direction", "[publication]") {
    const auto either = [](unsigned n, unsigned up, unsigned down) {
        return class_of_line(n, up, down, Findings::either);
    };
    CHECK(either(1, 1, 0) == ManuscriptClass::supportive);
    CHECK(either(3, 3, 0) == ManuscriptClass::supportive);
    CHECK(either(3, 0, 3) == ManuscriptClass::supportive);
    CHECK(either(3, 2, 0) == ManuscriptClass::mixed);
    CHECK(either(2, 1, 1) == ManuscriptClass::mixed);
    CHECK(either(3, 0, 1) == ManuscriptClass::mixed);
    CHECK(either(4, 0, 0) == ManuscriptClass::null);
    const auto predicted = [](unsigned n, unsigned up, unsigned down) {
        return class_of_line(n, up, down, Findings::predicted);
    };
    CHECK(predicted(3, 0, 3) == ManuscriptClass::null);
    CHECK(predicted(3, 2, 1) == ManuscriptClass::mixed);
    CHECK(predicted(2, 2, 0) == ManuscriptClass::supportive);
}

TEST_CASE("Journal streams are told apart by name, whatever their place", "[publication]") {
    // FNV-1a test values of the algorithm's authors: "" and "a" (isthe.com/chongo/tech/comp/fnv, from memory).
    CHECK(journal_index("") == 0x811C9DC5u);
    CHECK(journal_index("a") == 0xE40C292Cu);
    CHECK(journal_index("foobar") == 0xBF9CF968u);
}
