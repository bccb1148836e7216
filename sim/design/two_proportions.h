// Two independent groups with a yes or no each: the score test (pooled z); the effect is the log odds ratio of
// the first group (treated) to the second (control, at the base rate).
#pragma once

#include "sim/design/tails.h"
#include "sim/design/test_plan.h"

namespace lacuna::two_proportions {

inline constexpr std::uint32_t smallest_n = 2;  // per group

/// df infinite; noncentrality: sqrt(p (1 - p) n1 n2 / (n1 + n2)), what z moves by per unit of a small effect.
/// The critical value is left at infinity.
TestPlan plan(StudySize size, double base_rate);

/// Rate of the treated.
double rate(double base_rate, double effect);

/// z = (x1 / n1 - x2 / n2) / sqrt(p (1 - p) (1 / n1 + 1 / n2)), p the rate of both together; 0 when that is 0 or 1.
double statistic(std::uint32_t x1, std::uint32_t n1, std::uint32_t x2, std::uint32_t n2);

/// Log odds ratio and its standard error (Woolf 1955, Annals of Human Genetics 19:251); when a cell is empty 1/2
/// is added to all four (Haldane 1956, ibid. 20:309).
struct LogOddsRatio {
    double estimate, standard_error;
    bool corrected;
};
LogOddsRatio log_odds_ratio(std::uint32_t x1, std::uint32_t n1, std::uint32_t x2, std::uint32_t n2);

/// Chances of z > critical and, with two sides, z < -critical, by going through both binomials; outcomes of less
/// than 1e-17 each are left out.
Tails tails(double critical, std::uint32_t n1, std::uint32_t n2, double base_rate, double effect, int sides);

/// The smallest n1 (n2 next to allocation times that) with this power. Power is saw-toothed in n: sizes are gone
/// through one by one from where the normal approximation falls short of the target by more than the teeth can
/// bridge (0.8 / sqrt(n p q) + 4 / (n p q), at most 0.25; found by going through grids, no proof). 0 where none up to 10^7 has it.
std::uint32_t planned_n(double base_rate, double effect, double power, double critical, int sides, double allocation);

/// The size of the second group.
std::uint32_t other_size(std::uint32_t n, double allocation);

/// Log odds ratio of a study whose control has its expected count (not rounded) and whose z is this.
double estimate_at(double z, std::uint32_t n1, std::uint32_t n2, double base_rate);

/// Woolf's standard error where the control has its expected count and the log odds ratio is this.
double standard_error_at(double estimate, std::uint32_t n1, std::uint32_t n2, double base_rate);

}  // namespace lacuna::two_proportions
