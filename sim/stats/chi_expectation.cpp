#include "sim/stats/chi_expectation.h"

#include <algorithm>
#include <boost/math/quadrature/gauss.hpp>
#include <boost/math/special_functions/log1p.hpp>
#include <cmath>
#include <limits>

namespace lacuna {

namespace {

/// Log density of chi = sqrt(chi-squared_df), up to a constant, as a function that keeps its digits for
/// large df: relative to the mode, (df - 1) (log(1 + u) - u - u^2 / 2) with u = chi / mode - 1.
class ChiLogDensity {
public:
    explicit ChiLogDensity(double df) : power_(df - 1.0), mode_(std::sqrt(std::max(df - 1.0, 0.0))) {}
    double operator()(double chi) const {
        if (mode_ == 0.0) return -0.5 * chi * chi;
        const double u = (chi - mode_) / mode_;
        if (u <= -1.0) return -std::numeric_limits<double>::infinity();  // pieces may begin a rounding from 0
        return power_ * (boost::math::log1pmx(u) - 0.5 * u * u);
    }

private:
    double power_, mode_;
};

/// How far from its mode the density of chi is followed: to exp(-42) of its height. Towards zero it
/// falls faster than exp(-t^2) at distance t; away from it, more slowly where df is small.
constexpr double reach_down = 6.5;

double reach_up(double df) {
    const ChiLogDensity log_density(df);
    const double mode = std::sqrt(df - 1.0);
    double reach = reach_down;
    while (log_density(mode + reach) - log_density(mode) > -42.0) reach += 0.25;
    return reach;
}

/// True where Phi(noncentrality - c S) steps more sharply than the density of chi.
bool is_sharp(double c, double root) { return std::isfinite(c) && std::fabs(c) > root; }

}  // namespace

bool chi_pieces_depend(double df, std::span<const double> bounds) {
    return std::any_of(bounds.begin(), bounds.end(), [&](double c) { return is_sharp(c, std::sqrt(df)); });
}

std::vector<double> chi_pieces(double df, double noncentrality, std::span<const double> bounds) {
    constexpr double step = 3.2;  // in units of the narrowest normal curve inside a piece
    const double root = std::sqrt(df);
    const double mode = std::sqrt(df - 1.0);
    const double low = std::max(0.0, mode - reach_down);
    const double high = mode + reach_up(df);
    std::vector<double> pieces;
    const int count = static_cast<int>(std::ceil((high - low) / step));
    for (int i = 0; i <= count; ++i) pieces.push_back(low + (high - low) * i / count);
    for (const double c : bounds) {
        if (!is_sharp(c, root)) continue;
        const double width = root / std::fabs(c);
        for (int k = -3; k <= 3; ++k) {
            const double at = noncentrality * root / c + k * step * width;
            if (at > low && at < high) pieces.push_back(at);
        }
    }
    std::sort(pieces.begin(), pieces.end());
    return pieces;
}

std::vector<Node> chi_nodes(double df, const std::vector<double>& pieces) {
    using Rule = boost::math::quadrature::gauss<double, 20>;
    const ChiLogDensity log_density(df);
    const double root = std::sqrt(df);
    std::vector<Node> nodes;
    nodes.reserve(20 * pieces.size());
    double total = 0.0;
    for (std::size_t p = 0; p + 1 < pieces.size(); ++p) {
        const double middle = 0.5 * (pieces[p] + pieces[p + 1]);
        const double half = 0.5 * (pieces[p + 1] - pieces[p]);
        for (std::size_t i = 0; i < Rule::abscissa().size(); ++i) {
            for (const double side : {-1.0, 1.0}) {
                const double chi = middle + side * half * Rule::abscissa()[i];
                nodes.push_back({chi / root, half * Rule::weights()[i] * std::exp(log_density(chi))});
                total += nodes.back().weight;
            }
        }
    }
    for (Node& node : nodes) node.weight /= total;
    return nodes;
}

}  // namespace lacuna
