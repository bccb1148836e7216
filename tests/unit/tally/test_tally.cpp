#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/random/kernels.h"
#include "sim/base/fault.h"
#include "sim/tally/tally.h"

using namespace lacuna;

namespace {

constexpr EffectScale scale{2.0};

struct Columns {
    std::vector<std::uint8_t> truth, claim, kind, status;
    std::vector<double> estimate, effect;
    std::vector<std::uint32_t> participants;

    StudyColumns view() const {
        return {truth.size(),    truth.data(),  claim.data(),       kind.data(),
                estimate.data(), effect.data(), participants.data()};
    }
};

/// `count` invented studies of two lab kinds with every combination of codes.
Columns invented(std::size_t count) {
    Columns c;
    for (std::uint32_t i = 0; i < count; ++i) {
        Stream stream({4}, {0, Purpose::study_data, 0, 0}, i);
        const double u = stream.uniform();
        c.truth.push_back(static_cast<std::uint8_t>(stream() % 3));
        c.claim.push_back(static_cast<std::uint8_t>(stream() % 3));
        c.kind.push_back(static_cast<std::uint8_t>(stream() % 2));
        c.status.push_back(static_cast<std::uint8_t>(stream() % 3));
        const double size = 0.1 + u;
        c.effect.push_back(c.truth.back() == 0 ? 0.0 : c.truth.back() == 1 ? size : -size);
        c.estimate.push_back(4 * stream.uniform() - 2);
        c.participants.push_back(2 + stream() % 100);
    }
    return c;
}

double sum_where(const Columns& c, const std::vector<double>& what, auto keep) {
    double sum = 0.0;
    for (std::size_t s = 0; s < c.truth.size(); ++s) sum += keep(s) ? what[s] : 0.0;
    return sum;
}

}  // namespace

TEST_CASE("A tally's row holds the counts and sums of a plain loop", "[tally]") {
    const Columns c = invented(10007);
    StudyFacts facts;
    make_study_facts(c.view(), scale, facts);
    Tally tally(2, Findings::either, scale);
    tally.add_studies(facts, c.status.data());
    const std::vector<double> row = tally.row();
    const Layout layout(2);
    REQUIRE(row.size() == layout.size());
    const std::vector<double> ones(c.truth.size(), 1.0);
    const std::vector<double> people(c.participants.begin(), c.participants.end());
    std::vector<double> oriented, absolute, effect;
    for (std::size_t s = 0; s < c.truth.size(); ++s) {
        oriented.push_back(c.effect[s] < 0 ? -c.estimate[s] : c.estimate[s]);
        absolute.push_back(std::fabs(c.estimate[s]));
        effect.push_back(std::fabs(c.effect[s]));
    }
    for (std::size_t kind = 0; kind < 2; ++kind) {
        for (std::size_t scope = 0; scope < 3; ++scope) {
            const auto in = [&](std::size_t s) { return c.kind[s] == kind && c.status[s] >= scope; };
            CHECK(row[layout.participants(kind, Scope(scope))] == sum_where(c, people, in));
            for (std::size_t claim = 0; claim < 4; ++claim) {
                for (std::size_t truth = 0; truth < 3; ++truth) {
                    CHECK(row[layout.studies(kind, Scope(scope), Truth(truth), Claim(claim))] ==
                          sum_where(c, ones, [&](std::size_t s) {
                              return in(s) && c.truth[s] == truth && c.claim[s] == claim;
                          }));
                }
                const auto real = [&](std::size_t s) { return in(s) && c.truth[s] != 0 && c.claim[s] == claim; };
                const auto sum = [&](Sum what) { return row[layout.sum(kind, Scope(scope), Claim(claim), what)]; };
                // Each study is rounded to a unit of 2^-29: half a unit times the number of studies at most.
                const double rounding = 0.5 * scale.unit() * sum_where(c, ones, real) + 1e-9;
                CHECK(std::fabs(sum(Sum::estimate) - sum_where(c, oriented, real)) <= rounding);
                CHECK(std::fabs(sum(Sum::abs_estimate) - sum_where(c, absolute, real)) <= rounding);
                CHECK(std::fabs(sum(Sum::abs_effect) - sum_where(c, effect, real)) <= rounding);
            }
        }
    }
}

TEST_CASE("The binned median is within half a bin of the sorted one", "[tally]") {
    const Columns c = invented(20011);
    StudyFacts facts;
    make_study_facts(c.view(), scale, facts);
    Tally tally(2, Findings::either, scale);
    tally.add_studies(facts, c.status.data());
    const std::vector<double> row = tally.row();
    const Layout layout(2);
    for (std::size_t scope = 0; scope < 3; ++scope) {
        for (const bool findings : {true, false}) {
            std::vector<double> ratios;
            for (std::size_t s = 0; s < c.truth.size(); ++s) {
                if (c.truth[s] == 0 || c.status[s] < scope || (findings && c.claim[s] == 0)) continue;
                ratios.push_back((c.effect[s] < 0 ? -c.estimate[s] : c.estimate[s]) / std::fabs(c.effect[s]));
            }
            const auto middle = ratios.begin() + static_cast<std::ptrdiff_t>(ratios.size() / 2);
            std::nth_element(ratios.begin(), middle, ratios.end());
            const double got = row[layout.median(Scope(scope), findings ? Median::findings : Median::reports)];
            // A bin spans 1/64 of its lower edge's octave; around zero, 2^-7.
            CHECK(std::fabs(got - *middle) < std::max(std::fabs(*middle) / 64, 0x1p-7));
        }
    }
}

TEST_CASE("Bins are ordered and hold their ratios", "[tally]") {
    for (std::size_t b = 0; b < ratio_bins::count; ++b) {
        REQUIRE(ratio_bins::lower_edge(b) < ratio_bins::lower_edge(b + 1));
    }
    Columns c;
    std::vector<double> ratios{0.0,  -0.0, 1e-9, -1e-9, 0.0078125, -0.0078125, 0.5, 1.0,
                               -1.0, 1.01, 77.0, -77.0, 4000.0,    1e9,        -1e9};
    while (ratios.size() % 8 != 3) ratios.push_back(2.5);  // some by vectors, some by the scalar tail
    for (const double r : ratios) {
        c.truth.push_back(1);
        c.claim.push_back(1);
        c.effect.push_back(0.25);
        c.estimate.push_back(0.25 * r);
        c.participants.push_back(2);
    }
    StudyFacts facts;
    make_study_facts({c.truth.size(), c.truth.data(), c.claim.data(), nullptr, c.estimate.data(), c.effect.data(),
                      c.participants.data()},
                     scale, facts);
    for (std::size_t i = 0; i < ratios.size(); ++i) {
        const std::size_t bin = facts.bin[i];
        INFO(ratios[i] << " in bin " << bin);
        if (std::fabs(ratios[i]) < 4096) {
            CHECK(ratio_bins::lower_edge(bin) <= ratios[i]);
            CHECK(ratios[i] <= ratio_bins::lower_edge(bin + 1));
        } else {
            CHECK(bin == (ratios[i] > 0 ? ratio_bins::count - 1 : 0));
        }
    }
}

TEST_CASE("Parts of a tally merge to the whole, and an empty one has no median", "[tally]") {
    const Columns c = invented(5000);
    StudyFacts facts;
    make_study_facts(c.view(), scale, facts);
    Tally whole(2, Findings::predicted, scale), part(2, Findings::predicted, scale),
        sum(2, Findings::predicted, scale);
    whole.add_studies(facts, c.status.data());
    whole.add_studies(facts, c.status.data());
    part.add_studies(facts, c.status.data());
    sum.merge(part);
    sum.merge(part);
    const auto a = whole.row();
    const auto b = sum.row();
    for (std::size_t i = 0; i < a.size(); ++i) CHECK((a[i] == b[i] || (std::isnan(a[i]) && std::isnan(b[i]))));
    sum.clear();
    const auto empty = sum.row();
    const Layout layout(2);
    CHECK(std::isnan(empty[layout.median(Scope::published, Median::findings)]));
    CHECK(empty[layout.participants(0, Scope::conducted)] == 0.0);
}

TEST_CASE("A majority is more than half of a question's studies, scope by scope", "[tally]") {
    Tally tally(1, Findings::either, scale);
    QuestionCount q;
    q.studies[2] = 2;  // published, one of them a finding
    q.findings[2] = 1;
    q.studies[0] = 1;  // unwritten finding
    q.findings[0] = 1;
    q.real = true;
    tally.add_questions(0, 1, {q});
    const auto row = tally.row();
    const Layout layout(1);
    CHECK(row[layout.questions(Scope::published, true, Standing::any_finding)] == 1);
    CHECK(row[layout.questions(Scope::published, true, Standing::majority)] == 0);
    CHECK(row[layout.questions(Scope::conducted, true, Standing::majority)] == 1);
    CHECK(row[layout.questions(Scope::conducted, false, Standing::studied)] == 0);
}

TEST_CASE("Questions whose studies come in parts count once all are in, in any order of merging", "[tally]") {
    QuestionCount some, rest, none;
    some.real = rest.real = none.real = true;
    some.studies[2] = 2;
    some.findings[2] = 2;
    rest.studies[2] = 3;  // 2 of 5 find: no majority, though the first part has one
    const auto tally_of = [&](std::vector<const QuestionCount*> parts) {
        Tally tally(1, Findings::either, scale);
        for (const QuestionCount* part : parts) tally.add_questions(32, 3, {*part});
        return tally;
    };
    const Layout layout(1);
    Tally a = tally_of({&some});
    CHECK_THROWS_AS(a.row(), Defect);
    a.merge(tally_of({&none, &rest}));
    CHECK(a.row()[layout.questions(Scope::published, true, Standing::any_finding)] == 1);
    CHECK(a.row()[layout.questions(Scope::published, true, Standing::majority)] == 0);
    Tally b = tally_of({&rest, &some, &none});
    CHECK(b.row()[layout.questions(Scope::published, true, Standing::majority)] == 0);
    CHECK(b.row()[layout.questions(Scope::published, true, Standing::studied)] == 1);
}

TEST_CASE("Sums do not depend on how studies are divided among statuses, or on their order", "[tally]") {
    Columns c = invented(9001);
    const auto row_of = [&](const Columns& its) {
        StudyFacts facts;
        make_study_facts(its.view(), scale, facts);
        Tally tally(2, Findings::either, scale);
        tally.add_studies(facts, its.status.data());
        return tally.row();
    };
    const auto before = row_of(c);
    Columns other = c;
    for (std::size_t s = 0; s < other.status.size(); ++s) other.status[s] = static_cast<std::uint8_t>(s % 3);
    const auto after = row_of(other);
    std::reverse(c.truth.begin(), c.truth.end());
    std::reverse(c.claim.begin(), c.claim.end());
    std::reverse(c.kind.begin(), c.kind.end());
    std::reverse(c.status.begin(), c.status.end());
    std::reverse(c.estimate.begin(), c.estimate.end());
    std::reverse(c.effect.begin(), c.effect.end());
    std::reverse(c.participants.begin(), c.participants.end());
    const auto reversed = row_of(c);
    CHECK(reversed == before);
    const Layout layout(2);
    for (std::size_t kind = 0; kind < 2; ++kind) {
        for (std::size_t claim = 0; claim < 4; ++claim) {
            for (const Sum what : {Sum::estimate, Sum::abs_estimate, Sum::abs_effect}) {
                const std::size_t at = layout.sum(kind, Scope::conducted, Claim(claim), what);
                CHECK(before[at] == after[at]);
            }
        }
    }
}
