#include "sim/stats/atoms.h"

#include <algorithm>
#include <boost/math/distributions/poisson.hpp>

#include "sim/base/fault.h"
#include "sim/stats/untruncated.h"

namespace lacuna {

namespace {

constexpr double tail = 0x1p-60;

std::vector<Node> untruncated_atoms(const Distribution& d) {
    std::vector<Node> nodes;
    if (d.family == Family::fixed) nodes.push_back({d.first, 1.0});
    for (std::size_t i = 0; d.family == Family::discrete && i < d.values.size(); ++i) {
        nodes.push_back({d.values[i], d.weights[i]});
    }
    if (d.family != Family::poisson) return nodes;
    // Truncation may leave a far tail only, so the cut is relative to the mass inside.
    const double cut = tail * std::max(mass_inside(d), 0x1p-900);
    double low = untruncated::quantile(d, cut);
    double high = untruncated::upper_quantile(d, cut);
    if (!d.clamp) {
        low = std::max(low, std::ceil(d.min));
        high = std::min(high, std::floor(d.max));
    }
    const boost::math::poisson_distribution<double> law(d.first);
    for (double x = low; x <= high; x += 1.0) nodes.push_back({x, boost::math::pdf(law, x)});
    return nodes;
}

}  // namespace

void settle(std::vector<Node>& nodes) {
    std::sort(nodes.begin(), nodes.end(), [](const Node& a, const Node& b) { return a.x < b.x; });
    std::vector<Node> merged;
    double total = 0.0;
    for (const Node& node : nodes) {
        if (!(node.weight > 0.0)) continue;
        total += node.weight;
        if (!merged.empty() && merged.back().x == node.x)
            merged.back().weight += node.weight;
        else
            merged.push_back(node);
    }
    for (Node& node : merged) node.weight /= total;
    nodes = std::move(merged);
}

std::vector<Node> atoms(const Distribution& d) {
    std::vector<Node> nodes = untruncated_atoms(d);
    if (d.clamp) {
        for (Node& node : nodes) node.x = std::clamp(node.x, d.min, d.max);
    } else {
        std::erase_if(nodes, [&](const Node& node) { return node.x < d.min || node.x > d.max; });
    }
    settle(nodes);
    if (nodes.empty()) throw Defect("a distribution without any mass inside its bounds");
    return nodes;
}

}  // namespace lacuna
