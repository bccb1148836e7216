// The planned size as a function of the effect: what sizes that follow each question's effect come from.
#pragma once

#include <cstdint>
#include <vector>

#include "sim/model/scenario.h"

namespace lacuna {

/// n(effect) = the smallest n in first .. most whose power at `effect` reaches the target, `most` where none
/// does; by the effects at which each n begins to suffice. A table is made once, a look-up takes no power.
class PlanTable {
public:
    /// Exact at every n up to `exact_up_to`; beyond, e(n) sqrt(n) is interpolated in 1 / n through exact
    /// values at some n of each octave, to a relative error of 1e-10 or better. (With an allocation that
    /// no interpolation fits, every n is exact.)
    PlanTable(const Design& design, double target_power, std::uint32_t most);

    std::uint32_t first() const { return first_; }
    std::uint32_t most() const { return first_ + static_cast<std::uint32_t>(least_effect_.size()) - 1; }

    /// Position of n(effect) in first .. most. The sign of an effect does not matter: a study is planned for
    /// the direction that it expects.
    std::uint32_t position(double effect) const;

    /// The least effect for which `n` suffices.
    double least_effect(std::uint32_t n) const { return least_effect_[n - first_]; }

private:
    std::uint32_t first_;
    std::vector<double> least_effect_;  // per n, descending
    std::vector<std::uint32_t> start_;  // where to begin looking, by inverse squared effect
    double starts_per_inverse_ = 0.0;
};

/// The noncentrality at which a study of n observations has exactly this power, which must exceed alpha.
/// For designs of one or two means with Student's or the z test.
double noncentrality_of_power(const Design& design, std::uint32_t n, double power);

}  // namespace lacuna
