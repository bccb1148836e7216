#include <algorithm>
#include <string>

#include "sim/base/fault.h"
#include "sim/stats/atoms.h"
#include "sim/stats/untruncated.h"

namespace lacuna {

namespace {

constexpr double tail = 0x1p-61;  // of each side

double to_integer(double x, bool down) { return std::floor(down ? x : x + 0.5); }

void require_room(double first, double last, std::size_t most) {
    if (last - first < static_cast<double>(most) && std::fabs(first) < 0x1p52 && std::fabs(last) < 0x1p52) return;
    Fault fault;
    fault.message = "the distribution spreads over more than " + std::to_string(most) + " whole numbers";
    fault.remedy = "give it a smaller spread, or bounds (min, max)";
    throw InputError(std::move(fault));
}

IntegerDistribution round_nodes(const std::vector<Node>& nodes, bool down, std::size_t most) {
    const double first = to_integer(nodes.front().x, down);
    const double last = to_integer(nodes.back().x, down);
    require_room(first, last, most);
    IntegerDistribution result{static_cast<long>(first), std::vector<double>(std::size_t(last - first) + 1)};
    for (const Node& node : nodes) result.chance[std::size_t(to_integer(node.x, down) - first)] += node.weight;
    return result;
}

/// Adds to `chance` the masses of a continuous law between consecutive integers' bounds, each a
/// difference of the tails that are small there.
void add_masses(const Distribution& d, double first, bool down, std::vector<double>& chance) {
    const double offset = down ? 0.0 : 0.5;
    const double median = untruncated::quantile(d, 0.5);
    const auto bound = [&](std::size_t i) {
        return std::clamp(first + static_cast<double>(i) - offset, d.min, d.max);
    };
    double from = bound(0);
    double at = from < median ? untruncated::lower(d, from) : untruncated::upper(d, from);
    for (std::size_t i = 0; i < chance.size(); ++i) {
        const double to = bound(i + 1);
        const bool crosses = from < median && to >= median;
        const double next = to < median ? untruncated::lower(d, to) : untruncated::upper(d, to);
        chance[i] += crosses ? 1.0 - at - next : std::fabs(next - at);
        from = to;
        at = next;
    }
}

}  // namespace

IntegerDistribution rounded(const Distribution& distribution, bool down, std::size_t most) {
    const Distribution d = untruncated::without_degeneracy(distribution);
    if (untruncated::has_atoms(d.family)) return round_nodes(atoms(d), down, most);
    if (d.min == d.max) return round_nodes({{d.min, 1.0}}, down, most);
    const double first = to_integer(quantile(d, tail), down);
    const double mass = mass_inside(d);
    const double beyond = (d.clamp ? 0.0 : untruncated::upper(d, d.max)) + tail * mass;
    const double last = to_integer(std::clamp(untruncated::upper_quantile(d, beyond), d.min, d.max), down);
    require_room(first, last, most);
    IntegerDistribution result{static_cast<long>(first), std::vector<double>(std::size_t(last - first) + 1)};
    add_masses(d, first, down, result.chance);
    if (d.clamp) {  // atoms; a bound so far out that no integer of the support reaches it has no mass
        const auto at = [&](double bound) {
            return std::size_t(std::clamp(to_integer(bound, down), first, last) - first);
        };
        if (d.min > -infinity) result.chance[at(d.min)] += untruncated::lower(d, d.min);
        if (d.max < infinity) result.chance[at(d.max)] += untruncated::upper(d, d.max);
    }
    double total = 0.0;
    for (const double chance : result.chance) total += chance;
    for (double& chance : result.chance) chance /= total;
    return result;
}

}  // namespace lacuna
