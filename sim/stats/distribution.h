// A distribution as a value: what `{ family = ..., ... }` in a config means.
#pragma once

#include <cmath>
#include <limits>
#include <vector>

namespace lacuna {

enum class Family { fixed, normal, half_normal, lognormal, gamma, beta, uniform, poisson, discrete };

inline constexpr double infinity = std::numeric_limits<double>::infinity();

/// Parameters by family, in the order (first, second):
///   fixed (value), normal (mean, sd), half_normal (sd: that of the unfolded normal),
///   lognormal (median, sdlog), gamma (mean, shape), beta (mean, concentration = a + b),
///   uniform (low, high), poisson (mean), discrete (values, weights).
/// `min` and `max` truncate: the distribution conditional on min <= x <= max. With `clamp` a draw
/// outside moves to the nearer bound instead.
struct Distribution {
    Family family = Family::fixed;
    double first = 0.0;
    double second = 0.0;
    double min = -infinity;
    double max = infinity;
    bool clamp = false;
    std::vector<double> values;   // discrete only
    std::vector<double> weights;  // discrete only; need not sum to 1

    static Distribution fixed(double value) {
        Distribution distribution;
        distribution.first = value;
        return distribution;
    }
    bool operator==(const Distribution&) const = default;
};

/// True when every draw is the same number.
bool is_constant(const Distribution& distribution);

/// P(X <= x), with truncation or clamping applied. Exact (Boost.Math).
double cdf(const Distribution& distribution, double x);

/// Smallest x with P(X <= x) >= p, 0 <= p <= 1, with truncation or clamping applied.
double quantile(const Distribution& distribution, double p);

/// Mean, with truncation or clamping applied (closed form or adaptive quadrature, relative 1e-10).
double mean(const Distribution& distribution);

/// The chance that the untruncated distribution falls in [min, max]; 1 when clamped.
double mass_inside(const Distribution& distribution);

/// A weighted point; a list of them stands for a distribution under an integral.
struct Node {
    double x;
    double weight;
};

/// Nodes and weights (summing to 1) such that sums over them integrate smooth functions against the
/// distribution: exact for fixed, discrete and Poisson; otherwise Gauss-Legendre pieces in the normal
/// score of x (about `count` nodes when unbounded, fewer when truncated). With `clamp` the atoms at the
/// bounds are nodes. `breaks`: points where the integrand jumps or bends; no piece runs across one.
std::vector<Node> quadrature(const Distribution& distribution, int count = 200,
                             const std::vector<double>& breaks = {});

/// P(round(X) = n) for every n with positive chance, `down` meaning floor instead of nearest
/// (halves up). Support is cut where the tail beyond holds less than 2^-60. Throws InputError when
/// it would hold more than `most` integers.
struct IntegerDistribution {
    long first = 0;  // the integer of chance[0]
    std::vector<double> chance;
};
IntegerDistribution rounded(const Distribution& distribution, bool down, std::size_t most = 1u << 22);

}  // namespace lacuna
