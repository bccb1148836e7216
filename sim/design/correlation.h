// Pearson's correlation of bivariate normal pairs, tested by t = r sqrt(n - 2) / sqrt(1 - r^2).
#pragma once

#include "sim/design/tails.h"
#include "sim/design/test_plan.h"

namespace lacuna::correlation {

inline constexpr std::uint32_t smallest_n = 4;  // pairs

/// df = n - 2; noncentrality: sqrt(n - 1), what t moves by per unit of a small rho. No correction. The critical
/// value is left at infinity.
TestPlan plan(StudySize size);

/// P(T > t) at the correlation rho, -1 < rho < 1; and that of T > critical with, in a two-sided test, T < -critical.
/// Exact, to 1e-10: one integral of a central t tail (see the derivation beside it; the law of T is that of
/// Johnson, Kotz & Balakrishnan 1995, Continuous Univariate Distributions 2, ch. 32).
double upper(double t, std::uint32_t n, double rho);
Tails tails(double critical, std::uint32_t n, double rho, int sides);

/// r = t / sqrt(t^2 + df).
double r_of_t(double t, double df);

/// Standard error of r: (1 - r^2) / sqrt(n - 1) (large-sample; Pearson & Filon 1898, Phil. Trans. R. Soc. A 191;
/// cited from memory).
double standard_error(double r, std::uint32_t n);

/// |t| below which a study is equivalent: both one-sided tests of |rho| >= bound reject at alpha, by the exact
/// distribution of r at the bound. Zero or negative where n is too small ever to claim it.
double equivalence_critical_t(std::uint32_t n, double bound, double alpha);

}  // namespace lacuna::correlation
