#include "sim/config/limits.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <set>

#include "sim/config/size_rules.h"
#include "sim/config/support.h"

namespace lacuna {

namespace {

constexpr double most_studies = 0x1p32;  // in a literature: its bins of ratios count in 32 bits
constexpr double most_rows = 0x1p31;     // row numbers in the outcome file are 32-bit
constexpr std::size_t most_cuts = 255;   // levels of p are stored as bytes

double lines_per_lab(const std::vector<LabKind>& labs) {
    double lines = 0.0;
    for (const LabKind& lab : labs) lines += lab.share * mean(lab.lines);
    return lines;
}

double studies_per_lab(const std::vector<LabKind>& labs) {
    double studies = 0.0;
    for (const LabKind& lab : labs) studies += lab.share * mean(lab.lines) * lab.studies.longest();
    return studies;
}

/// Different values of p at which some journal's chance changes, over all regimes: manuscripts of regimes
/// with the same science share their levels.
std::size_t count_cuts(const std::vector<Regime>& regimes) {
    std::set<std::pair<int, double>> cuts;
    for (const Regime& regime : regimes) {
        for (const Journal& journal : regime.rules.journals) {
            for (const double step : journal.accept.steps) cuts.emplace(journal.accept.sides, step);
        }
    }
    return cuts.size();
}

class Limits {
public:
    explicit Limits(const ConfigNode& root) : root_(root) {}

    void demand(bool holds, const char* key, std::string message, std::string remedy) {
        if (holds) return;
        faults_.push_back({nearest_node(root_, key).place, key, std::move(message), std::move(remedy)});
    }
    std::vector<Fault> take() { return std::move(faults_); }

private:
    const ConfigNode& root_;
    std::vector<Fault> faults_;
};

/// Whether exactly 0 is drawn with a chance.
bool may_be_zero(const Distribution& effect) {
    if (effect.clamp && (effect.min == 0.0 || effect.max == 0.0)) return true;
    if (effect.family == Family::fixed) return effect.first == 0.0;
    if (effect.family == Family::poisson) return lowest_draw(effect) <= 0.0;
    for (std::size_t i = 0; effect.family == Family::discrete && i < effect.values.size(); ++i) {
        if (effect.values[i] == 0.0 && effect.weights[i] > 0.0) return true;
    }
    return false;
}

/// Effects that the design's scale knows, and that sizes can be planned for.
void demand_possible_effects(const Science& science, Limits& limits) {
    const Test test = science.design.test;
    const auto possible = [&](const Distribution& effect) {
        // Where the scale has an end that no draw may reach, bounds count; else what is drawn in practice.
        const bool bounded = test == Test::correlation;
        const double low = test == Test::two_proportions ? practical_lowest_draw(effect) : lowest_draw(effect);
        const double high = bounded ? highest_draw(effect) : practical_highest_draw(effect);
        return can_be_effect(test, low) && can_be_effect(test, high);
    };
    limits.demand(possible(science.field.effect), "field.effect", effect_limits(test), "bound it with min and max");
    limits.demand(possible(science.field.null_effect), "field.null_effect", effect_limits(test),
                  "bound it with min and max");
    const auto follows_truth = [](const LabKind& lab) { return lab.size.for_each_question() && lab.size.effect.is_true; };
    const bool never = lowest_draw(science.field.effect) == 0.0 && highest_draw(science.field.effect) == 0.0;
    const auto scaled_by_truth = [](const LabKind& lab) {
        return lab.size.kind == SizePlan::Kind::exact_power && lab.size.effect.is_true;
    };
    limits.demand(never || !may_be_zero(science.field.effect) ||
                      std::none_of(science.labs.begin(), science.labs.end(), scaled_by_truth),
                  "field.effect", "may be exactly 0, where no noise gives the exact power that is asked for",
                  "leave 0 out of its values");
    const auto hopes_too_much = [&](const LabKind& lab) {
        return follows_truth(lab) && lab.size.optimism_of_truth() * highest_draw(science.field.effect) >= 1.0;
    };
    limits.demand(test != Test::correlation ||
                      std::none_of(science.labs.begin(), science.labs.end(), hopes_too_much),
                  "field.effect", "times the optimism of a size plan is a correlation of 1 or more",
                  "lower the optimism, or bound the effects with max");
    limits.demand(!never || std::none_of(science.labs.begin(), science.labs.end(), follows_truth), "field.effect",
                  "is 0, and sizes are planned for true effects: no n gives power for no effect",
                  "plan for a number instead of \"true\"");
}

}  // namespace

std::vector<Fault> limit_faults(const Document& document, const ConfigNode& root) {
    const Field& field = document.science.field;
    const double labs = static_cast<double>(field.labs);
    const double lines = labs * lines_per_lab(document.science.labs);
    const double studies = labs * studies_per_lab(document.science.labs);
    const bool rows_kept = document.store.detail != Detail::literatures;
    Limits limits(root);
    demand_possible_effects(document.science, limits);
    limits.demand(
        studies < most_studies, "field.labs",
        fmt::format("one literature would hold up to {:.3g} studies; the most is {:.3g}", studies, most_studies),
        "lower field.labs, lab.lines or the length of lines, and simulate more literatures");
    limits.demand(
        !rows_kept || static_cast<double>(field.questions) < most_rows, "field.questions",
        fmt::format("store.detail = \"{}\" holds at most 2147483647 questions", word_for(document.store.detail)),
        "use store.detail = \"literatures\"");
    limits.demand(!rows_kept || lines < most_rows, "field.labs",
                  fmt::format("store.detail = \"{}\" holds at most 2147483647 lines, here about {:.3g}",
                              word_for(document.store.detail), lines),
                  "use store.detail = \"literatures\"");
    return limits.take();
}

std::vector<Fault> limit_faults(const Scenario& scenario, const ConfigNode& root) {
    Limits limits(root);
    limits.demand(count_cuts(scenario.regimes) <= most_cuts, "journal",
                  fmt::format("the steps of all journals hold more than {} different values of p", most_cuts),
                  "use fewer steps");
    const std::vector<LabKind>& first = scenario.regimes.front().science.labs;
    for (const Regime& regime : scenario.regimes) {
        const auto same_name = [](const LabKind& a, const LabKind& b) { return a.name == b.name; };
        const std::vector<LabKind>& labs = regime.science.labs;
        limits.demand(std::equal(labs.begin(), labs.end(), first.begin(), first.end(), same_name), "regime",
                      fmt::format("regime \"{}\" has other kinds of labs than the first", regime.name),
                      "give all regimes the same kinds; a share of 0 takes one out");
    }
    return limits.take();
}

}  // namespace lacuna
