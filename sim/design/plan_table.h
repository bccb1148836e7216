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
    /// Of designs whose least effects fall smoothly with n, exact at every n up to 64; beyond, e(n) sqrt(n) is
    /// interpolated in 1 / n through exact values at some n of each octave, to a relative error of 1e-10 or better.
    /// Of the others (two proportions, allocations that are no whole number) exact at every n.
    /// Sizes end where one suffices for `least_planned`, the least absolute effect that is planned for.
    PlanTable(const Design& design, double target_power, std::uint32_t most, double least_planned = 0.0);

    std::uint32_t first() const { return first_; }
    std::uint32_t most() const { return first_ + static_cast<std::uint32_t>(up_.least_effect.size()) - 1; }

    /// Position of n(effect) in first .. most. A study is planned for the direction that it expects, so the sign
    /// matters with two proportions only, and not in one-sided tests.
    std::uint32_t position(double effect) const {
        return (effect < 0.0 && !down_.least_effect.empty() ? down_ : up_).position(effect);
    }

    /// The least effect above 0 for which `n` or a smaller size suffices.
    double least_effect(std::uint32_t n) const { return up_.least_effect[n - first_]; }

private:
    struct Direction {
        std::vector<double> least_effect;  // per n, for that n or a smaller one: not ascending
        std::vector<std::uint32_t> start;  // where to begin looking, by inverse squared effect
        double starts_per_inverse = 0.0;

        void make_starts();
        std::uint32_t position(double effect) const;
    };
    Direction direction(const Design& design, double target, std::uint32_t most, double least_planned, double sign) const;

    std::uint32_t first_;
    Direction up_, down_;
};

/// The noncentrality at which a study of n observations has exactly this power, which must exceed alpha.
/// For designs of one or two means with Student's or the z test.
double noncentrality_of_power(const Design& design, std::uint32_t n, double power);

}  // namespace lacuna
