#include <algorithm>
#include <boost/math/quadrature/gauss.hpp>

#include "sim/base/fault.h"
#include "sim/stats/atoms.h"
#include "sim/stats/distribution.h"
#include "sim/stats/normal.h"
#include "sim/stats/untruncated.h"

namespace lacuna {

namespace {

// Nodes are laid in normal scores z, with x = quantile(Phi(z)): every family here is smooth in z,
// singular densities and long tails included, where x and the quantile scale are not.
constexpr double reach = 10.5;  // beyond which a tail holds less than 1e-25

/// The normal score of x: Phi(z) = P(X <= x).
double score(const Distribution& d, double x) {
    const double low = untruncated::lower(d, x);
    if (low <= 0.0) return -infinity;
    const double high = untruncated::upper(d, x);
    if (high <= 0.0) return infinity;
    return low < 0.5 ? -normal_critical(low) : normal_critical(high);
}

double at_score(const Distribution& d, double z) {
    return z < 0.0 ? untruncated::quantile(d, normal_lower(z)) : untruncated::upper_quantile(d, normal_lower(-z));
}

/// Gauss-Legendre of 20 points on each of `pieces` equal parts of z in [from, to].
void add_scores(const Distribution& d, double from, double to, int pieces, std::vector<Node>& nodes) {
    using Rule = boost::math::quadrature::gauss<double, 20>;
    const double half = 0.5 * (to - from) / pieces;
    for (int p = 0; p < pieces; ++p) {
        const double middle = from + (2 * p + 1) * half;
        for (std::size_t i = 0; i < Rule::abscissa().size(); ++i) {
            for (const double side : {-1.0, 1.0}) {
                const double z = middle + side * half * Rule::abscissa()[i];
                nodes.push_back({at_score(d, z), half * Rule::weights()[i] * normal_density(z)});
            }
        }
    }
}

/// Cuts [from, to] where phi has fallen by a factor 1e-24 from its highest value inside.
void shorten(double& from, double& to) {
    const double high = from > 0.0 ? std::hypot(from, reach) : reach;
    const double low = to < 0.0 ? -std::hypot(to, reach) : -reach;
    from = std::max(from, low);
    to = std::min(to, high);
}

/// Nodes of a continuous distribution within its bounds, cut at `breaks`; weights are masses.
std::vector<Node> continuous_nodes(const Distribution& d, int count, const std::vector<double>& breaks) {
    std::vector<double> ends{score(d, d.min), score(d, d.max)};
    shorten(ends[0], ends[1]);
    const double low = ends[0], high = ends[1];
    for (const double x : breaks) {
        const double z = score(d, x);
        if (z > low && z < high) ends.push_back(z);
    }
    std::sort(ends.begin(), ends.end());
    const double piece = 2.0 * reach / std::max(1.0, std::round(count / 20.0));
    std::vector<Node> nodes;
    for (std::size_t e = 0; e + 1 < ends.size(); ++e) {
        const double length = ends[e + 1] - ends[e];
        if (length > 0.0) add_scores(d, ends[e], ends[e + 1], static_cast<int>(std::ceil(length / piece)), nodes);
    }
    return nodes;
}

}  // namespace

std::vector<Node> quadrature(const Distribution& distribution, int count, const std::vector<double>& breaks) {
    const Distribution d = untruncated::without_degeneracy(distribution);
    if (untruncated::has_atoms(d.family)) return atoms(d);
    if (d.min == d.max) return {{d.min, 1.0}};
    std::vector<Node> nodes = continuous_nodes(d, count, breaks);
    if (d.clamp) {
        nodes.push_back({d.min, d.min > -infinity ? untruncated::lower(d, d.min) : 0.0});
        nodes.push_back({d.max, d.max < infinity ? untruncated::upper(d, d.max) : 0.0});
    }
    settle(nodes);
    if (nodes.empty()) throw Defect("a distribution without any mass inside its bounds");
    for (Node& node : nodes) node.x = std::clamp(node.x, d.min, d.max);
    return nodes;
}

double mean(const Distribution& distribution) {
    const Distribution d = untruncated::without_degeneracy(distribution);
    if (d.min == -infinity && d.max == infinity) return untruncated::mean(d);
    double sum = 0.0;
    for (const Node& node : quadrature(d, 400)) sum += node.weight * node.x;
    return sum;
}

}  // namespace lacuna
