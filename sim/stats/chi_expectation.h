// Expectations over S = sqrt(chi-squared_df / df), the standard deviation of a sample over its true
// value: what turns integrals over the normal into integrals over Student's t.
#pragma once

#include <array>
#include <span>
#include <vector>

#include "sim/stats/distribution.h"

namespace lacuna {

/// Ends of the pieces that E[f(S)] is integrated over, in chi = S sqrt(df). What lies outside holds less
/// than 1e-17. `bounds` are the c of functions Phi(noncentrality - c S), which step at
/// S = noncentrality / c over a width of 1 / |c|: where that is narrow, the pieces are narrow too.
std::vector<double> chi_pieces(double df, double noncentrality, std::span<const double> bounds);

/// True when the pieces depend on the noncentrality.
bool chi_pieces_depend(double df, std::span<const double> bounds);

/// Values of S and their weights, which sum to 1: Gauss-Legendre, 20 points a piece, df finite and 1 or
/// more. The weights are divided by their own sum, so that the density needs no constant.
std::vector<Node> chi_nodes(double df, const std::vector<double>& pieces);

/// E[f(S)] for a function that returns a std::array<double, K>.
template <std::size_t K, class Function>
std::array<double, K> chi_expectation(double df, const std::vector<double>& pieces, Function f) {
    std::array<double, K> sums{};
    for (const auto& [s, weight] : chi_nodes(df, pieces)) {
        const std::array<double, K> value = f(s);
        for (std::size_t k = 0; k < K; ++k) sums[k] += weight * value[k];
    }
    return sums;
}

}  // namespace lacuna
