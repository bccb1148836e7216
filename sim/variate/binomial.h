// Binomial variates by inversion: one uniform each, exact up to the rounding of the uniform.
#pragma once

#include <cstddef>
#include <cstdint>

namespace lacuna {

/// x[i] = a binomial(n[i], p[i]) count from the uniform u[i] in [0, 1). n up to 10^7, p in [0, 1].
///
/// With p' = min(p, 1 - p): where n p' <= 64, the smallest x whose distribution function exceeds u, searched
/// from 0 by vector kernels; else outcomes are searched outward from the mode m in the order m, m + 1, m - 1,
/// m + 2, ..., and the one at which their chances first exceed u is taken. For p > 1/2 x counts failures, and
/// is subtracted from n. The result is a function of (n, p, u) alone.
void binomials(const std::uint32_t* n, const double* p, const double* u, std::size_t count, std::uint32_t* x);

/// P(X = x), by Loader's saddle-point expansion (Loader 2000, "Fast and accurate computation of binomial
/// probabilities"); relative error 1e-13 or better.
double binomial_chance(std::uint32_t n, double p, std::uint32_t x);

}  // namespace lacuna
