#include "sim/stats/partitioned_t.h"

#include "sim/base/fault.h"
#include "sim/stats/chi_expectation.h"
#include "sim/stats/normal.h"

namespace lacuna {

namespace {

/// The normal at one end of a part: both tails, each with its digits, and the density.
struct At {
    double z, lower, upper, density;
};

At at(double end, double s, double noncentrality) {
    if (std::isinf(end)) return {end, end > 0.0 ? 1.0 : 0.0, end > 0.0 ? 0.0 : 1.0, 0.0};
    const double z = end * s - noncentrality;
    const double tail = normal_lower(-std::fabs(z));
    return {z, z < 0.0 ? tail : 1.0 - tail, z < 0.0 ? 1.0 - tail : tail, normal_density(z)};
}

}  // namespace

PartitionedT::PartitionedT(std::vector<double> ends, double df) : ends_(std::move(ends)), df_(df) {
    if (!(df > 1.0)) throw Defect("PartitionedT needs more than 1 degree of freedom");
    if (std::isinf(df)) {
        scales_ = {{1.0, 1.0}};
    } else if (!chi_pieces_depend(df, ends_)) {
        scales_ = chi_nodes(df, chi_pieces(df, 0.0, ends_));
    }
}

std::vector<TruncatedT> PartitionedT::operator()(double noncentrality) const {
    std::vector<TruncatedT> parts(ends_.size() - 1, {0.0, 0.0});
    const auto add = [&](const std::vector<Node>& scales) {
        for (const auto& [s, weight] : scales) {
            At low = at(ends_[0], s, noncentrality);
            for (std::size_t p = 0; p < parts.size(); ++p) {
                const At high = at(ends_[p + 1], s, noncentrality);
                const bool above = low.z + high.z > 0.0;
                const double chance = above ? low.upper - high.upper : high.lower - low.lower;
                parts[p].chance += weight * chance;
                parts[p].first += weight * (noncentrality * chance + low.density - high.density) / s;
                low = high;
            }
        }
    };
    if (scales_.empty())
        add(chi_nodes(df_, chi_pieces(df_, noncentrality, ends_)));
    else
        add(scales_);
    return parts;
}

}  // namespace lacuna
