#include "sim/literature/prepared.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "sim/base/fault.h"
#include "sim/stats/student_t.h"

namespace lacuna {

namespace {

std::vector<Cut> as_cuts(const Cuts& cuts) {
    std::vector<Cut> all;
    for (const double p : cuts.two_sided) all.push_back({p, 2});
    for (const double p : cuts.one_sided) all.push_back({p, 1});
    return all;
}

/// The largest absolute value of a distribution but for a chance of about 1e-16.
double farthest(const Distribution& distribution) {
    return std::fmax(std::fabs(quantile(distribution, 0x1p-53)), std::fabs(quantile(distribution, 1.0 - 0x1p-53)));
}

/// The finest scale on which no effect and no estimate is cut off: their farthest values are 2^21 of it or
/// less. An estimate is (effect + deviation + Z / m) / S with S the sample's standard deviation over the
/// true one; chances below 1e-16 are left out of each, and 1 / S is at most about Student's quantile.
EffectScale scale_of(const Science& science, const TestTable& table) {
    const Field& field = science.field;
    if (science.design.test == Test::correlation) return {0x1p-21};     // at most 1
    if (science.design.test == Test::two_proportions) return {0x1p-15};  // at most 2 log(2 n + 1), n < 2^24
    const double normal = t_critical(infinity, 1e-16);
    const double m = *std::min_element(table.noncentrality.begin(), table.noncentrality.end());
    const double df = *std::min_element(table.df.begin(), table.df.end());
    const double effect = std::fmax(farthest(field.effect), farthest(field.null_effect));
    double unit = 1.0;  // of effects planned for
    for (const LabKind& lab : science.labs) {
        if (lab.size.kind != SizePlan::Kind::exact_power) continue;
        const PlanningEffect& planned = lab.size.effect;
        unit = std::fmax(unit, planned.is_true ? planned.optimism * farthest(field.effect) : std::fabs(planned.value));
    }
    const double groups = science.design.test == Test::several_means ? std::sqrt(science.design.groups) : 0.0;
    const double numerator = effect + normal * field.heterogeneity + (normal + groups) * unit / m;
    const double most = numerator * t_critical(df, 1e-16);
    return {std::exp2(std::ceil(std::log2(most)) - 21.0)};
}

/// Sums are good to 2^-14 or better of the effects only if a typical effect is that many units.
void refuse_wide_range(const Field& field, EffectScale scale) {
    double typical = std::fabs(mean(field.effect));
    for (const double p : {0.25, 0.75}) typical = std::fmax(typical, std::fabs(quantile(field.effect, p)));
    if (typical == 0.0 || typical >= 0x1p14 * scale.unit()) return;
    Fault fault;
    fault.key = "field.effect";
    fault.message = fmt::format("typical effects of {:.3g} would be lost in sums that must hold values of up to {:.3g}",
                                typical, scale.unit() * most_units);
    fault.remedy = "bound the effects with min and max, or lower their spread or the heterogeneity";
    throw InputError(std::move(fault));
}

}  // namespace

PreparedScience::PreparedScience(const Science& its, const Cuts& cuts, bool labs_stored)
    : science(its),
      table(test_table(its, as_cuts(cuts))),
      effect(its.field.effect),
      null_effect(its.field.null_effect),
      labs_are_stored(labs_stored) {
    for (const LabKind& kind : its.labs) {
        lab_lines.emplace_back(kind.lines);
        longest_line = std::max(longest_line, kind.studies.longest());
    }
    scale = scale_of(its, table);
    refuse_wide_range(its.field, scale);
    for (std::size_t c = 0; c < table.cut_critical.size(); ++c) {
        (c < cuts.two_sided.size() ? cuts_two : cuts_one).push_back(c);
    }
}

bool PreparedScience::plans_for_questions() const {
    return std::any_of(science.labs.begin(), science.labs.end(),
                       [](const LabKind& lab) { return lab.size.for_each_question(); });
}

bool PreparedScience::plans_for_truth() const {
    return std::any_of(science.labs.begin(), science.labs.end(),
                       [](const LabKind& lab) { return lab.size.for_each_question() && lab.size.effect.is_true; });
}

bool PreparedScience::has_practices() const {
    return std::any_of(science.labs.begin(), science.labs.end(), [](const LabKind& lab) { return lab.practices.any(); });
}

std::size_t PreparedScenario::kind_code(const std::string& name) const {
    return static_cast<std::size_t>(std::find(kind_names.begin(), kind_names.end(), name) - kind_names.begin());
}

PreparedScenario::PreparedScenario(const Scenario& scenario)
    : groups(group_by_science(scenario.regimes)), kind_names(all_kind_names(scenario)) {
    const std::vector<std::string> journals = all_journal_names(scenario);
    for (const Regime& regime : scenario.regimes) {
        journal_codes.push_back({0});
        for (const Journal& journal : regime.rules.journals) {
            const auto found = std::find(journals.begin(), journals.end(), journal.name);
            journal_codes.back().push_back(static_cast<std::uint8_t>(found - journals.begin()));
        }
    }
    for (std::size_t s = 0; s < groups.firsts.size(); ++s) {
        std::vector<const Rules*> its_rules;
        for (std::size_t r = 0; r < scenario.regimes.size(); ++r) {
            if (groups.science_of[r] == s) its_rules.push_back(&scenario.regimes[r].rules);
        }
        sciences.emplace_back(scenario.regimes[groups.firsts[s]].science, collect_cuts(its_rules),
                              scenario.store.detail != Detail::literatures);
    }
    for (std::size_t r = 0; r < scenario.regimes.size(); ++r) {
        std::vector<const Rules*> its_rules;
        for (std::size_t other = 0; other < scenario.regimes.size(); ++other) {
            if (groups.science_of[other] == groups.science_of[r])
                its_rules.push_back(&scenario.regimes[other].rules);
        }
        rules.push_back(prepare(scenario.regimes[r].rules, scenario.regimes[r].science.design.findings,
                                collect_cuts(its_rules)));
    }
}

}  // namespace lacuna
