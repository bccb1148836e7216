// Several independent groups of equal size: the F test of their means; the effect is Cohen's f, the standard
// deviation of the groups' means (divisor g) over that within groups (Cohen 1988, chapter 8).
#pragma once

#include "sim/design/tails.h"
#include "sim/design/test_plan.h"

namespace lacuna::several_means {

inline constexpr std::uint32_t smallest_n = 2;  // per group

/// df_effect = g - 1, df = g (n - 1), noncentrality = sqrt(g n): its square times f^2 is that of F. The critical
/// value is left at infinity.
TestPlan plan(std::uint32_t n, std::uint32_t groups);

/// Upper critical value of the central F.
double critical(double df_effect, double df, double alpha);

/// Chance of F > critical at f; it has no direction, so all of it is in the predicted one. By the noncentral F
/// (Boost.Math's), to 1e-10.
Tails tails(double critical, std::uint32_t groups, std::uint32_t n, double f);

/// f as a study reports it: sqrt(df_effect F / N) (Cohen 1988, eq. 8.2.19 solved for f; from memory).
double effect_of(double statistic, double df_effect, double participants);

/// Its standard error by the delta method from the variance of the noncentral F (Johnson, Kotz & Balakrishnan
/// 1995, eq. 30.4b) at the estimate; infinite for df of 4 or less and at f = 0. Common practice, no source.
double standard_error(double f, double df_effect, double df, double participants);

/// F below which a study is equivalent: the alpha quantile of F at f = bound (Wellek 2010, Testing Statistical
/// Hypotheses of Equivalence, section 7.2; from memory).
double equivalence_critical(std::uint32_t groups, std::uint32_t n, double bound, double alpha);

}  // namespace lacuna::several_means
