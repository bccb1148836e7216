// The scenario: plain values with visible defaults. Parsing (sim/config) only fills them in.
// `Science` is everything that decides which studies are conducted; `Rules` is everything that
// decides what becomes of them. Regimes with equal science share their conducted studies.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "sim/model/claim.h"
#include "sim/stats/distribution.h"

namespace lacuna {

/// [run]
struct Run {
    std::uint64_t seed = 1;          // 0 .. 2^63-1 in a config (TOML integers are signed)
    std::uint64_t literatures = 100; // 1 .. 2^32-1

    bool operator==(const Run&) const = default;
};

/// [field]
struct Field {
    std::uint64_t questions = 1000;
    std::uint64_t labs = 100;
    double true_rate = 0.5;                              // chance that a question is real
    Distribution effect = Distribution::fixed(0.5);      // of real questions, on the design's scale
    Distribution null_effect = Distribution::fixed(0.0); // of the others
    double heterogeneity = 0.0;                          // SD of a study's true effect around its question's
    double negligible = 0.0;                             // |effect| at or below counts as null

    bool operator==(const Field&) const = default;
};

enum class Test : std::uint8_t {
    two_means,
    paired_means,
    one_mean,
    correlation,
    two_proportions,
    known_variance,
    several_means
};
enum class EffectEstimate : std::uint8_t { d, g };

/// The effect that a size is planned for.
struct PlanningEffect {
    bool is_true = false;    // the question's own effect, times `optimism`; else `value`
    double value = 0.5;
    double optimism = 1.0;

    bool operator==(const PlanningEffect&) const = default;
};

/// How many observations a study takes (per group; of the first group where groups differ).
struct SizePlan {
    enum class Kind : std::uint8_t {
        fixed,
        distribution,
        power,       // the smallest n that has the power
        exact_power  // n observations, with noise such that the power is exactly this
    };
    Kind kind = Kind::fixed;
    std::uint32_t n = 20;         // fixed
    Distribution distribution;    // distribution
    bool round_down = false;      // distribution: floor instead of nearest (halves up)
    double power = 0.8;           // power, exact_power: two-sided tests count both tails
    PlanningEffect effect;        // power, exact_power
    std::uint32_t most = 10000;   // power for true effects: no study is larger

    double optimism_of_truth() const { return effect.is_true ? effect.optimism : 1.0; }
    bool for_each_question() const {
        return kind == Kind::exact_power || (kind == Kind::power && effect.is_true);
    }

    bool operator==(const SizePlan&) const = default;
};

/// Two one-sided tests after a result that is not significant: is the effect within -bound .. bound?
struct Equivalence {
    double bound = 0.0;   // on the design's effect scale; 0: not tested
    double alpha = 0.05;  // of each
    bool tested() const { return bound > 0.0; }

    bool operator==(const Equivalence&) const = default;
};

/// Interim looks at the data.
struct Looks {
    enum class Boundary : std::uint8_t {
        pocock,
        obrien_fleming,
        spending_pocock,         // Lan & DeMets, with the shape of Pocock's
        spending_obrien_fleming  // Lan & DeMets, with the shape of O'Brien & Fleming's
    };
    std::uint32_t count = 1;  // looks, the last included; 1: none before the end
    Boundary boundary = Boundary::obrien_fleming;
    double futility = -infinity;  // z below which (in absolute value if two-sided) an interim look stops

    bool operator==(const Looks&) const = default;
};

/// [design]
struct Design {
    Test test = Test::two_means;
    double alpha = 0.05;
    int sides = 2;                                 // 1: significant only in the predicted direction
    Findings findings = Findings::either;
    EffectEstimate estimate = EffectEstimate::d;   // what studies of means report
    SizePlan size;
    bool welch = false;                            // two-means: Welch's test instead of Student's
    double allocation = 1.0;                       // designs of two groups: n2 / n1
    std::uint32_t groups = 3;                      // several-means
    double base_rate = 0.5;                        // two-proportions: rate of the second (control) group
    Equivalence equivalence{};
    Looks looks{};

    bool operator==(const Design&) const = default;
};

/// How many studies a line holds.
struct LineRule {
    enum class Kind : std::uint8_t {
        fixed,           // `count` studies
        until_positive,  // stops after the first finding, at most `limit` studies
        until_failures   // stops after `failures` studies that do not find, at most `limit` studies
    };
    Kind kind = Kind::fixed;
    std::uint32_t count = 1;
    std::uint32_t failures = 1;
    std::uint32_t limit = 1;

    std::uint32_t longest() const { return kind == Kind::fixed ? count : limit; }
    bool operator==(const LineRule&) const = default;
};

/// Testing after every batch, and stopping when significant, without a correction for the looks.
struct OptionalStopping {
    bool used = false;
    double chance = 0.0;                  // that a study is run so
    bool relative = false;                // sizes are multiples of the planned n
    double start = 0, batch = 0, limit = 0;  // per group: at the first look, more at each, at the last

    bool operator==(const OptionalStopping&) const = default;
};

/// What bends a kind's analyses.
struct Practices {
    OptionalStopping optional_stopping;

    bool any() const { return optional_stopping.used && optional_stopping.chance > 0.0; }
    bool operator==(const Practices&) const = default;
};

/// [[lab]]: a kind of lab.
struct LabKind {
    std::string name = "lab";
    double share = 1.0;                               // chance that a lab is of this kind
    Distribution lines = Distribution::fixed(1.0);    // lines a lab runs, rounded to nearest
    LineRule studies;
    SizePlan size;                                    // the design's, unless the kind has its own
    Practices practices{};

    bool operator==(const LabKind&) const = default;
};

/// Everything upstream of the manuscript.
struct Science {
    Field field;
    Design design;
    std::vector<LabKind> labs;

    bool operator==(const Science&) const = default;
};

enum class Unit : std::uint8_t {
    study,    // every study is a manuscript
    line,     // every line is one manuscript
    findings  // a line's manuscript holds only the studies that find; a line without any, all of them
};

/// [writing]: chance that a manuscript is written up, by class.
struct Writing {
    Unit unit = Unit::study;
    double supportive = 1.0, mixed = 1.0, null = 1.0;

    bool operator==(const Writing&) const = default;
};

/// A journal's acceptance chance.
struct Acceptance {
    enum class Kind : std::uint8_t { by_class, by_p };
    Kind kind = Kind::by_class;
    double supportive = 1.0, mixed = 1.0, null = 1.0;  // by_class
    // by_p: the manuscript's smallest p; chance[i] holds for p below steps[i] (ascending), the last
    // of the steps.size()+1 chances for p at or above the last step.
    std::vector<double> steps;
    std::vector<double> chance;
    int sides = 2;  // 1: p of the one-sided test in the predicted direction

    bool operator==(const Acceptance&) const = default;
};

/// [[journal]]
struct Journal {
    std::string name = "journal";
    Acceptance accept;
    double results_blind = 0.0;        // share of submissions judged before results are seen
    double results_blind_chance = 1.0; // acceptance chance of those; default: the highest of `accept`

    bool operator==(const Journal&) const = default;
};

/// [submission]
struct Submission {
    std::uint32_t attempts = 1;  // journals tried in the order of the config before giving up

    bool operator==(const Submission&) const = default;
};

/// Everything from the manuscript on. With no journal, whatever is written is published.
struct Rules {
    Writing writing;
    std::vector<Journal> journals;
    Submission submission;

    bool operator==(const Rules&) const = default;
};

/// [[regime]]: one set of publication rules.
struct Regime {
    std::string name;
    Science science;
    Rules rules;

    bool operator==(const Regime&) const = default;
};

enum class Detail : std::uint8_t { literatures, manuscripts, studies };

/// [store]
struct StorePlan {
    Detail detail = Detail::literatures;
    bool compress = true;

    bool operator==(const StorePlan&) const = default;
};

/// A config, resolved: every default filled in, every regime spelled out (at least one).
struct Scenario {
    std::string title;
    Run run;
    std::vector<Regime> regimes;
    StorePlan store;

    bool operator==(const Scenario&) const = default;
};

}  // namespace lacuna
