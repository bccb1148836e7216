// The law of a family before truncation or clamping: tails and quantiles by Boost.Math. `min`, `max`
// and `clamp` of the distribution are not looked at.
#pragma once

#include "sim/stats/distribution.h"

namespace lacuna::untruncated {

/// True for families of separate points.
bool has_atoms(Family family);

/// The same law without degenerate parameters: a spread of zero becomes Family::fixed.
Distribution without_degeneracy(const Distribution& distribution);

// All below need a distribution without degeneracy.

/// P(X <= x), P(X < x) and P(X > x), each with the digits of its own tail.
double lower(const Distribution& distribution, double x);
double below(const Distribution& distribution, double x);
double upper(const Distribution& distribution, double x);

/// P(a <= X <= b), from whichever tails keep the digits.
double mass_between(const Distribution& distribution, double a, double b);

/// Smallest x with P(X <= x) >= p, and smallest x with P(X > x) <= q. The ends of the support for 0 and 1.
double quantile(const Distribution& distribution, double p);
double upper_quantile(const Distribution& distribution, double q);

double mean(const Distribution& distribution);

}  // namespace lacuna::untruncated
