#include "sim/literature/prepared.h"

#include <algorithm>
#include <cmath>

namespace lacuna {

namespace {

std::vector<Cut> as_cuts(const Cuts& cuts) {
    std::vector<Cut> all;
    for (const double p : cuts.two_sided) all.push_back({p, 2});
    for (const double p : cuts.one_sided) all.push_back({p, 1});
    return all;
}

/// The power of 2 next to the larger of: a large effect of the field, the largest standard error.
EffectScale scale_of(const Science& science, const TestTable& table) {
    double largest = std::fabs(quantile(science.field.null_effect, 0.999));
    for (const double p : {0.001, 0.5, 0.999})
        largest = std::fmax(largest, std::fabs(quantile(science.field.effect, p)));
    for (const double noncentrality : table.noncentrality) largest = std::fmax(largest, 1.0 / noncentrality);
    return {std::exp2(std::ceil(std::log2(largest)))};
}

}  // namespace

PreparedScience::PreparedScience(const Science& its, const Cuts& cuts, bool lines_are_stored)
    : science(its),
      table(test_table(its, as_cuts(cuts))),
      effect(its.field.effect),
      null_effect(its.field.null_effect),
      who_matters(its.labs.size() > 1 || lines_are_stored) {
    for (const LabKind& kind : its.labs) {
        lab_lines.emplace_back(kind.lines);
        longest_line = std::max(longest_line, kind.studies.longest());
    }
    scale = scale_of(its, table);
    for (std::size_t c = 0; c < table.cut_critical.size(); ++c) {
        (c < cuts.two_sided.size() ? cuts_two : cuts_one).push_back(c);
    }
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
