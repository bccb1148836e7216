#include "sim/theory/theory.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "sim/theory/line_totals.h"
#include "sim/theory/metrics.h"

namespace lacuna {

namespace {

/// Beyond these an answer would take longer than about ten seconds.
constexpr std::uint32_t longest_line = 1000;
constexpr double most_integrals = 1e6;

/// One possible effect of a question.
struct Effect {
    Truth truth;
    double value, chance;
};

/// `bends`: where an integrand over effects may bend.
std::vector<Effect> effects_of(const Field& field, std::vector<double> bends) {
    // The truth of a question jumps at +-negligible, and its sign at zero.
    bends.insert(bends.end(), {-field.negligible, 0.0, field.negligible});
    std::vector<Effect> effects;
    const auto add = [&](const Distribution& distribution, double share, bool real) {
        if (share <= 0.0) return;
        for (const Node& node : quadrature(distribution, 120, bends)) {
            Truth truth = Truth::null;
            if (real && std::fabs(node.x) > field.negligible)
                truth = node.x > 0.0 ? Truth::real : Truth::real_negative;
            effects.push_back({truth, node.x, share * node.weight});
        }
    };
    add(field.effect, field.true_rate, true);
    add(field.null_effect, 1.0 - field.true_rate, false);
    return effects;
}

/// Mean and variance of the number of lines that a lab of this kind runs: its draw rounded to nearest,
/// none if negative.
struct Moments {
    double mean = 0.0, variance = 0.0;
};
Moments lines_of(const LabKind& kind) {
    const IntegerDistribution lines = rounded(kind.lines, false);
    double first = 0.0, second = 0.0;
    for (std::size_t i = 0; i < lines.chance.size(); ++i) {
        const auto count = static_cast<double>(std::max(0L, lines.first + static_cast<long>(i)));
        first += lines.chance[i] * count;
        second += lines.chance[i] * count * count;
    }
    return {first, std::max(0.0, second - first * first)};
}

/// True when lines are never more than questions, which spreads them over questions one by one; "never"
/// up to nine standard deviations of their total.
bool one_line_a_question(const Science& science) {
    double mean = 0.0, square = 0.0, share = 0.0;
    for (const LabKind& kind : science.labs) {
        const Moments lines = lines_of(kind);
        share += kind.share;
        mean += kind.share * lines.mean;
        square += kind.share * (lines.variance + lines.mean * lines.mean);
    }
    mean /= share;
    const double variance = std::max(0.0, square / share - mean * mean);
    const auto labs = static_cast<double>(science.field.labs);
    // 1e-6 forgives the rounding of a variance that is zero.
    return labs * mean + 9.0 * std::sqrt(labs * variance) <= static_cast<double>(science.field.questions) + 1e-6;
}

void add_question(const LineTotals& line, const Effect& effect, double weight, std::array<ScopeTotals, 3>& totals) {
    const double orientation = effect.value < 0.0 ? -1.0 : 1.0;
    const std::size_t real = effect.truth != Truth::null;
    for (std::size_t s = 0; s < totals.size(); ++s) {
        for (std::size_t c = 0; c < line.studies[s].size(); ++c) {
            Total& total = totals[s].studies[static_cast<std::size_t>(effect.truth)][c];
            const Sums& sums = line.studies[s][c];
            total.sums.add({sums.studies, orientation * sums.estimate, sums.abs_estimate}, weight);
            total.abs_effect += weight * sums.studies * std::fabs(effect.value);
        }
        for (std::size_t c = 0; c < 3; ++c) totals[s].manuscripts[real][c] += weight * line.manuscripts[s][c];
        totals[s].established[real] += weight * line.established[s];
    }
}

/// Why the law of a study is not worked out here; empty where it is.
std::string beyond_reach(const Science& science) {
    const Design& design = science.design;
    const bool of_means = design.test == Test::two_means || design.test == Test::paired_means ||
                          design.test == Test::one_mean || design.test == Test::known_variance;
    if (!of_means) return "they are worked out for designs of one or two means only";
    if (design.welch) return "the degrees of freedom of Welch's test depend on the data";
    if (design.looks.count > 1) return "studies have interim looks";
    if (design.equivalence.tested()) return "equivalence is tested";
    for (const LabKind& kind : science.labs) {
        if (kind.size.for_each_question()) return "sizes are planned for each question";
        if (kind.practices.any()) return "labs use practices that bend analyses";
    }
    return "";
}

}  // namespace

Theory expectations(const Regime& regime) {
    const Science& science = regime.science;
    if (const std::string why = beyond_reach(science); !why.empty()) return {{}, why};
    const PublicationChance chance(regime.rules);
    std::array<ScopeTotals, 3> totals{};
    double integrals = 0.0;
    for (const LabKind& kind : science.labs) {
        const double lines = kind.share * lines_of(kind).mean;
        if (lines == 0.0) continue;
        if (kind.studies.longest() > longest_line) {
            return {{}, fmt::format("lab \"{}\" may run lines of more than {} studies", kind.name, longest_line)};
        }
        const StudyLaw law(science, kind, chance.cuts_two(), chance.cuts_one());
        const std::vector<Effect> effects = effects_of(science.field, law.bends());
        integrals += static_cast<double>(law.integrals()) * static_cast<double>(effects.size());
        if (integrals > most_integrals) {
            return {{}, "there are too many combinations of effect, study size and p step to go through"};
        }
        for (const Effect& effect : effects) {
            const LineTotals line = line_totals(kind.studies, regime.rules.writing.unit, science.design.findings,
                                                chance, law.cells(effect.value));
            add_question(line, effect, lines * effect.chance, totals);
        }
    }
    return {metrics(totals, science.design.findings, one_line_a_question(science)), ""};
}

}  // namespace lacuna
