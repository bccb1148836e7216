// What is worked out once per science before any literature is simulated.
#pragma once

#include <string>
#include <vector>

#include "sim/design/test_table.h"
#include "sim/model/schema.h"
#include "sim/publication/chain.h"
#include "sim/tally/study_facts.h"
#include "sim/variate/sampler.h"

namespace lacuna {

struct PreparedScience {
    Science science;
    TestTable table;
    Sampler effect, null_effect;
    std::vector<Sampler> lab_lines;               // per kind
    std::vector<std::size_t> cuts_two, cuts_one;  // in table.cut_critical, by sidedness
    EffectScale scale;                            // of effects and estimates
    std::uint32_t longest_line = 0;               // studies, over the kinds
    bool labs_are_stored;               // so that it must be known which lab runs a line

    /// Whether some kind plans its sizes for each question, and for the questions' true effects.
    bool plans_for_questions() const;
    bool plans_for_truth() const;

    /// Whether some kind of labs bends its analyses; whether some study has several looks at its data.
    bool has_practices() const;
    bool has_looks() const { return science.design.looks.count > 1 || has_practices(); }

    /// Whether it must be known which kind of lab runs a line, or even which lab.
    bool who_matters() const { return labs_are_stored || science.labs.size() > 1; }

    PreparedScience(const Science& its, const Cuts& cuts, bool labs_stored);
};

/// A scenario, ready to run: its sciences, and each regime's rules.
struct PreparedScenario {
    ScienceGroups groups;
    std::vector<PreparedScience> sciences;
    std::vector<PreparedRules> rules;  // per regime

    // Codes of the enumerations in the detail tables.
    std::vector<std::string> kind_names;                   // of all sciences
    std::vector<std::vector<std::uint8_t>> journal_codes;  // [regime][journal tried, from 1; 0: none]

    std::size_t kind_code(const std::string& name) const;
    explicit PreparedScenario(const Scenario& scenario);
};

}  // namespace lacuna
