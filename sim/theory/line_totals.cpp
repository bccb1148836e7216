#include "sim/theory/line_totals.h"

#include <cmath>

#include "sim/theory/line_ends.h"

namespace lacuna {

namespace {

/// A study's part in its manuscript: it finds (in one of two directions), or it does not.
enum Part : std::size_t { finds, finds_reversed, finds_nothing };

Part part_of(Claim claim, Findings findings) {
    if (!is_finding(claim, findings)) return finds_nothing;
    return claim == Claim::positive ? finds : finds_reversed;
}

/// The law of a study over results that stay at or below a pair of levels, by part and claim.
struct Law {
    std::array<double, 3> chance{};
    std::array<std::array<Sums, 4>, 3> sums{};
};

Law law_up_to(const std::vector<Cell>& cells, Findings findings, std::size_t level_two, std::size_t level_one) {
    Law law;
    for (const Cell& cell : cells) {
        if (cell.level_two > level_two || cell.level_one > level_one) continue;
        const Part part = part_of(cell.claim, findings);
        law.chance[part] += cell.sums.studies;
        law.sums[part][static_cast<std::size_t>(cell.claim)].add(cell.sums);
    }
    return law;
}

/// Expected numbers of manuscripts of a class, and of the studies in them by part.
struct Counts {
    double manuscripts = 0.0;
    std::array<double, 3> parts{};

    void add(double how_many, std::array<double, 3> of_parts) {
        manuscripts += how_many;
        for (std::size_t p = 0; p < parts.size(); ++p) parts[p] += of_parts[p];
    }
};
using ClassCounts = std::array<Counts, 3>;

/// Adds lines that end so, `direction` the chance that a finding points as predicted. All of a line's
/// findings share a direction with chance direction^n + (1 - direction)^n.
void add_end(const LineEnd& end, double direction, ClassCounts& counts) {
    auto& [supportive, mixed, null] = counts;
    const double w = end.weight, f = end.findings, others = end.studies - end.findings;
    if (end.findings == 0) {
        null.add(w, {0.0, 0.0, w * others});
    } else if (end.findings < end.studies) {
        mixed.add(w, {w * f * direction, w * f * (1.0 - direction), w * others});
    } else {
        const double agree = std::pow(direction, f), against = std::pow(1.0 - direction, f);
        supportive.add(w * (agree + against), {w * f * agree, w * f * against, 0.0});
        mixed.add(w * (1.0 - agree - against),
                  {w * f * (direction - agree), w * f * (1.0 - direction - against), 0.0});
    }
}

enum class Ends { all, with_findings, without_findings };

ClassCounts class_counts(const LineRule& rule, const Law& finding, const Law& missing, Ends which) {
    const double find = finding.chance[finds] + finding.chance[finds_reversed];
    const double direction = find > 0.0 ? finding.chance[finds] / find : 1.0;
    ClassCounts counts{};
    for (const LineEnd& end : line_ends(rule, find, missing.chance[finds_nothing])) {
        if (which == Ends::with_findings && end.findings == 0) continue;
        if (which == Ends::without_findings && end.findings > 0) continue;
        add_end(end, direction, counts);
    }
    return counts;
}

/// What manuscripts hold, and how many there are of each class.
struct Held {
    std::array<Sums, 4>& studies;
    std::array<double, 3>& manuscripts;
};

Held held(LineTotals& totals, Scope scope) {
    const auto s = static_cast<std::size_t>(scope);
    return {totals.studies[s], totals.manuscripts[s]};
}

/// Adds manuscripts, each class times its factor; a study has the mean result of its part of the law.
void add_counts(const Law& law, const ClassCounts& counts, const std::array<double, 3>& factor, bool all_parts,
                Held to) {
    for (std::size_t c = 0; c < factor.size(); ++c) {
        to.manuscripts[c] += factor[c] * counts[c].manuscripts;
        for (const Part part : {finds, finds_reversed, finds_nothing}) {
            const double count = factor[c] * counts[c].parts[part];
            if (count == 0.0 || (part == finds_nothing && !all_parts)) continue;
            for (std::size_t k = 0; k < 4; ++k) to.studies[k].add(law.sums[part][k], count / law.chance[part]);
        }
    }
}

/// Adds the manuscripts whose best levels are at most the law's, each class times its factor. `whole` is
/// the law without that limit: it holds for studies that a manuscript leaves out.
void add_manuscripts(const LineRule& rule, Unit unit, const Law& law, const Law& whole,
                     const std::array<double, 3>& factor, Held to) {
    if (unit == Unit::line) {
        add_counts(law, class_counts(rule, law, law, Ends::all), factor, true, to);
    } else {
        add_counts(law, class_counts(rule, law, whole, Ends::with_findings), factor, false, to);
        add_counts(law, class_counts(rule, law, law, Ends::without_findings), factor, true, to);
    }
}

/// Lines, or what they find, as manuscripts.
void add_lines(const LineRule& rule, Unit unit, Findings findings, const PublicationChance& chance,
               const std::vector<Cell>& cells, LineTotals& totals) {
    const std::size_t top_two = chance.cuts_two().size(), top_one = chance.cuts_one().size();
    const Law whole = law_up_to(cells, findings, top_two, top_one);
    const ClassCounts all = class_counts(rule, whole, whole, Ends::all);
    std::array<double, 3> written{};
    for (std::size_t c = 0; c < 3; ++c) {
        written[c] = chance.written(ManuscriptClass(c));
        totals.manuscripts[std::size_t(Scope::conducted)][c] = all[c].manuscripts;
    }
    add_manuscripts(rule, unit, whole, whole, written, held(totals, Scope::written));
    // The best p of several studies: P(best level <= L) is a product over studies, P(best level = L) is
    // not, so the chance g(L) is summed by parts: g at the best level = sum over L >= best of
    // (g(L) - g(L + 1)), with g = 0 past the top; likewise for the second kind of level.
    const auto g = [&](std::size_t c, std::size_t two, std::size_t one) {
        return two > top_two || one > top_one ? 0.0 : written[c] * chance.published(ManuscriptClass(c), two, one);
    };
    for (std::size_t two = 0; two <= top_two; ++two) {
        for (std::size_t one = 0; one <= top_one; ++one) {
            std::array<double, 3> factor{};
            for (std::size_t c = 0; c < 3; ++c) {
                factor[c] = (g(c, two, one) - g(c, two + 1, one)) - (g(c, two, one + 1) - g(c, two + 1, one + 1));
            }
            if (factor == std::array<double, 3>{}) continue;
            add_manuscripts(rule, unit, law_up_to(cells, findings, two, one), whole, factor,
                            held(totals, Scope::published));
        }
    }
    for (std::size_t s = 0; s < 3; ++s) totals.established[s] = totals.manuscripts[s][0] + totals.manuscripts[s][1];
}

/// Chance that a line has a study that finds and comes through, each with chance `share` of those that find.
double any_comes_through(const LineRule& rule, double find, double miss, double share) {
    double none = 0.0;
    for (const LineEnd& end : line_ends(rule, find * (1.0 - share), miss)) none += end.weight;
    return 1.0 - none;
}

/// Every study a manuscript. Over a line's studies, however long it grows, sums are the expected number of
/// studies times the expectation for one (Wald's identity).
void add_studies(const LineRule& rule, Findings findings, const PublicationChance& chance,
                 const std::vector<Cell>& cells, double studies, LineTotals& totals) {
    double find = 0.0, miss = 0.0;
    std::array<double, 3> finding{};  // by scope: chance that a study finds and is in it
    for (const Cell& cell : cells) {
        const bool found = is_finding(cell.claim, findings);
        const ManuscriptClass its_class = found ? ManuscriptClass::supportive : ManuscriptClass::null;
        const double written = chance.written(its_class);
        const double share[3] = {1.0, written,
                                 written * chance.published(its_class, cell.level_two, cell.level_one)};
        (found ? find : miss) += cell.sums.studies;
        for (std::size_t s = 0; s < 3; ++s) {
            if (Scope(s) != Scope::conducted) {
                totals.studies[s][static_cast<std::size_t>(cell.claim)].add(cell.sums, studies * share[s]);
            }
            totals.manuscripts[s][static_cast<std::size_t>(its_class)] += studies * share[s] * cell.sums.studies;
            if (found) finding[s] += share[s] * cell.sums.studies;
        }
    }
    for (std::size_t s = 0; s < 3 && find > 0.0; ++s) {
        totals.established[s] = any_comes_through(rule, find, miss, finding[s] / find);
    }
}

double expected_studies(const LineRule& rule, const Law& law) {
    double studies = 0.0;
    for (const LineEnd& end :
         line_ends(rule, law.chance[finds] + law.chance[finds_reversed], law.chance[finds_nothing])) {
        studies += end.weight * end.studies;
    }
    return studies;
}

}  // namespace

LineTotals line_totals(const LineRule& rule, Unit unit, Findings findings, const PublicationChance& chance,
                       const std::vector<Cell>& cells) {
    LineTotals totals{};
    const Law whole = law_up_to(cells, findings, chance.cuts_two().size(), chance.cuts_one().size());
    const double studies = expected_studies(rule, whole);
    for (const Cell& cell : cells) {
        totals.studies[std::size_t(Scope::conducted)][static_cast<std::size_t>(cell.claim)].add(cell.sums, studies);
    }
    if (unit == Unit::study)
        add_studies(rule, findings, chance, cells, studies, totals);
    else
        add_lines(rule, unit, findings, chance, cells, totals);
    return totals;
}

}  // namespace lacuna
