// Every estimand on one small literature whose rates can be counted on paper.
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>
#include <set>
#include <tuple>

#include "tests/unit/estimand/row_builder.h"

using namespace lacuna;

namespace {

constexpr double nan = std::numeric_limits<double>::quiet_NaN();

/// 20 null questions: 17 inconclusive, 2 positive, 1 reversed. 10 real: 6 positive, 3 inconclusive, and
/// 1 reversed. 4 real_negative: 1 positive, 2 reversed, 1 inconclusive. Published: all positives but one
/// (null), both reversed of real_negative, the reversed null, and 4 inconclusive (3 null, 1 real).
RowBuilder paper_literature() {
    RowBuilder row;
    const auto fill = [&](Scope scope, Truth truth, double inconclusive, double positive, double reversed) {
        row.studies(scope, truth, Claim::inconclusive, inconclusive)
            .studies(scope, truth, Claim::positive, positive)
            .studies(scope, truth, Claim::reversed, reversed);
    };
    fill(Scope::conducted, Truth::null, 17, 2, 1);
    fill(Scope::conducted, Truth::real, 3, 6, 1);
    fill(Scope::conducted, Truth::real_negative, 1, 1, 2);
    fill(Scope::published, Truth::null, 3, 1, 1);
    fill(Scope::published, Truth::real, 1, 6, 0);
    fill(Scope::published, Truth::real_negative, 0, 1, 2);
    row.sums(Scope::conducted, Claim::positive, 4.2, 5.4, 3.5)
        .sums(Scope::conducted, Claim::reversed, 0.9, 2.1, 1.5);
    row.sums(Scope::conducted, Claim::inconclusive, 0.6, 1.0, 2.0);
    row.sums(Scope::published, Claim::positive, 4.2, 5.4, 3.5)
        .sums(Scope::published, Claim::reversed, 1.5, 1.5, 1.0);
    row.sums(Scope::published, Claim::inconclusive, 0.3, 0.3, 0.5);
    row.participants(Scope::conducted, 1360).participants(Scope::published, 600);
    row.manuscripts(Scope::conducted, false, ManuscriptClass::supportive, 2)
        .manuscripts(Scope::conducted, true, ManuscriptClass::supportive, 7)
        .manuscripts(Scope::conducted, false, ManuscriptClass::mixed, 1)
        .manuscripts(Scope::conducted, true, ManuscriptClass::mixed, 2)
        .manuscripts(Scope::conducted, false, ManuscriptClass::null, 8)
        .manuscripts(Scope::published, false, ManuscriptClass::supportive, 2)
        .manuscripts(Scope::published, true, ManuscriptClass::supportive, 6)
        .manuscripts(Scope::published, true, ManuscriptClass::mixed, 1)
        .manuscripts(Scope::published, false, ManuscriptClass::null, 2);
    row.questions(Scope::published, false, Standing::any_finding, 2)
        .questions(Scope::published, true, Standing::any_finding, 8)
        .questions(Scope::published, false, Standing::majority, 1)
        .questions(Scope::published, true, Standing::majority, 7);
    row.median(Scope::conducted, Median::findings, nan).median(Scope::published, Median::findings, 1.3);
    row.median(Scope::conducted, Median::reports, 0.8).median(Scope::published, Median::reports, nan);
    return row;
}

std::vector<Result> results_of(const RowBuilder& row, Findings findings) {
    Accumulator accumulator({all_estimands({"lab"}, findings)});
    accumulator.add({row.row()});
    return accumulator.results();
}

struct Expected {
    const char* metric;
    Scope scope;
    const char* stratum;
    double value;
};

void check(const std::vector<Result>& results, const std::vector<Expected>& expected) {
    for (const Expected& e : expected) {
        INFO(e.metric << " " << scope_names[static_cast<std::size_t>(e.scope)] << " " << e.stratum);
        const Result result = find_result(results, e.metric, e.scope, e.stratum);
        REQUIRE(result.estimate.value);
        CHECK(*result.estimate.value == Approx(e.value).epsilon(1e-14));
        CHECK(!result.estimate.mcse);
        CHECK(result.estimate.n == 1);
    }
}

}  // namespace

TEST_CASE("estimands where positive and reversed claims are findings, counted by hand", "[estimand]") {
    const auto c = Scope::conducted, p = Scope::published;
    check(results_of(paper_literature(), Findings::either),
          {{"false_discovery_rate", c, "all", 3.0 / 13},
           {"false_discovery_rate", p, "all", 2.0 / 11},
           {"false_discovery_rate_manuscripts", c, "all", 3.0 / 12},
           {"false_discovery_rate_manuscripts", p, "all", 2.0 / 9},
           {"false_discovery_rate_questions", p, "all", 2.0 / 10},
           {"false_discovery_rate_questions_majority", p, "all", 1.0 / 8},
           {"wrong_sign_rate", c, "all", 2.0 / 10},
           {"wrong_sign_rate", p, "all", 1.0 / 9},
           {"false_nonfinding_rate", c, "all", 4.0 / 21},
           {"false_nonfinding_rate", p, "all", 1.0 / 4},
           {"effect_inflation", c, "all", 5.1 / 5.0},
           {"effect_inflation", p, "all", 5.7 / 4.5},
           {"effect_bias", c, "all", 0.1 / 10},
           {"effect_bias", p, "all", 1.2 / 9},
           {"effect_inflation_median", p, "all", 1.3},
           {"exaggeration_ratio", c, "all", 7.5 / 5.0},
           {"effect_inflation_reports", c, "all", 5.7 / 7.0},
           {"effect_bias_reports", c, "all", -1.3 / 14},
           {"effect_inflation_median_reports", c, "all", 0.8},
           {"positive_share", c, "all", 13.0 / 34},
           {"positive_share", p, "all", 11.0 / 15},
           {"type1_error", c, "all", 3.0 / 20},
           {"type1_error", p, "all", 2.0 / 5},
           {"power", c, "all", 10.0 / 14},
           {"power", p, "all", 9.0 / 10},
           {"publication_rate", p, "all", 15.0 / 34},
           {"publication_rate", p, "claim=positive", 8.0 / 9},
           {"publication_rate", p, "claim=reversed", 3.0 / 4},
           {"publication_rate", p, "claim=inconclusive", 4.0 / 21},
           {"publication_rate", p, "class=supportive", 8.0 / 9},
           {"publication_rate", p, "class=mixed", 1.0 / 3},
           {"publication_rate", p, "class=null", 2.0 / 8},
           {"missing_share", p, "all", 19.0 / 34},
           {"missing_share", p, "claim=positive", 1.0 / 9},
           {"missing_share", p, "claim=inconclusive", 17.0 / 21},
           {"participants", c, "all", 1360},
           {"participants", p, "all", 600},
           {"participants_unpublished", p, "all", 760},
           {"participants_per_true_discovery", p, "all", 1360.0 / 9}});
}

TEST_CASE("estimands where only positive claims are findings, counted by hand", "[estimand]") {
    const auto c = Scope::conducted, p = Scope::published;
    check(results_of(paper_literature(), Findings::predicted),
          {{"false_discovery_rate", c, "all", 2.0 / 9},
           {"false_discovery_rate", p, "all", 1.0 / 8},
           {"wrong_sign_rate", c, "all", 1.0 / 7},
           {"wrong_sign_rate", p, "all", 1.0 / 7},
           {"false_nonfinding_rate", c, "all", 7.0 / 25},
           {"false_nonfinding_rate", p, "all", 3.0 / 7},
           {"effect_inflation", c, "all", 4.2 / 3.5},
           {"exaggeration_ratio", p, "all", 5.4 / 3.5},
           {"positive_share", c, "all", 9.0 / 34},
           {"type1_error", c, "all", 2.0 / 20},
           {"power", c, "all", 7.0 / 14},
           {"participants_per_true_discovery", p, "all", 1360.0 / 7}});
}

TEST_CASE("a rate with an empty denominator is missing, not zero", "[estimand]") {
    const auto results = results_of(paper_literature(), Findings::either);
    for (const auto& [metric, scope, stratum] :
         {std::tuple{"publication_rate", Scope::published, "claim=equivalent"},
          std::tuple{"missing_share", Scope::published, "claim=equivalent"},
          std::tuple{"effect_inflation_median", Scope::conducted, "all"},
          std::tuple{"effect_inflation_median_reports", Scope::published, "all"}}) {
        const Result result = find_result(results, metric, scope, stratum);
        INFO(metric);
        CHECK(!result.estimate.value);
        CHECK(!result.estimate.mcse);
        CHECK(!result.spread);
        CHECK(result.estimate.n == 0);
    }
    // A literature in which nothing was done at all: every ratio is missing, participants are 0.
    for (const Result& result : results_of(RowBuilder(), Findings::either)) {
        if (result.metric.starts_with("effect_inflation_median")) continue;
        const bool mean = result.metric == "participants" || result.metric == "participants_unpublished";
        INFO(result.metric);
        CHECK(result.estimate.value.has_value() == mean);
    }
}

TEST_CASE("lab kinds are strata of their own and add up to all", "[estimand]") {
    RowBuilder row(2);
    row.studies(Scope::published, Truth::null, Claim::positive, 3, 0)
        .studies(Scope::published, Truth::real, Claim::positive, 1, 0)
        .studies(Scope::published, Truth::null, Claim::positive, 1, 1)
        .studies(Scope::published, Truth::real, Claim::positive, 5, 1);
    Accumulator accumulator({all_estimands({"routine", "careful"}, Findings::either)});
    accumulator.add({row.row()});
    const auto results = accumulator.results();
    const auto value = [&](const std::string& stratum) {
        return *find_result(results, "false_discovery_rate", Scope::published, stratum).estimate.value;
    };
    CHECK(value("lab=routine") == 3.0 / 4);
    CHECK(value("lab=careful") == 1.0 / 6);
    CHECK(value("all") == 4.0 / 10);
}

TEST_CASE("no metric, scope and stratum is listed twice, and regimes agree on the list", "[estimand]") {
    const Estimands either = all_estimands({"a", "b"}, Findings::either);
    const Estimands predicted = all_estimands({"a", "b"}, Findings::predicted);
    REQUIRE(either.size() == predicted.size());
    std::set<std::tuple<std::string, Scope, std::string>> seen;
    for (std::size_t e = 0; e < either.size(); ++e) {
        CHECK(seen.emplace(either[e].metric, either[e].scope, either[e].stratum).second);
        CHECK(either[e].metric == predicted[e].metric);
        CHECK(either[e].scope == predicted[e].scope);
        CHECK(either[e].stratum == predicted[e].stratum);
    }
}
