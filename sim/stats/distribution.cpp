#include "sim/stats/distribution.h"

#include <algorithm>

#include "sim/stats/untruncated.h"

namespace lacuna {

namespace {

bool is_bounded(const Distribution& d) { return d.min > -infinity || d.max < infinity; }

}  // namespace

bool is_constant(const Distribution& distribution) {
    const Distribution d = untruncated::without_degeneracy(distribution);
    if (d.family == Family::fixed || d.min == d.max) return true;
    return quantile(d, 0.0) == quantile(d, 1.0);
}

double mass_inside(const Distribution& distribution) {
    if (distribution.clamp || !is_bounded(distribution)) return 1.0;
    return untruncated::mass_between(untruncated::without_degeneracy(distribution), distribution.min,
                                     distribution.max);
}

double cdf(const Distribution& distribution, double x) {
    const Distribution d = untruncated::without_degeneracy(distribution);
    if (x < d.min) return 0.0;
    if (x >= d.max) return 1.0;
    if (d.clamp || !is_bounded(d)) return untruncated::lower(d, x);
    return std::min(1.0, untruncated::mass_between(d, d.min, x) / mass_inside(d));
}

double quantile(const Distribution& distribution, double p) {
    const Distribution d = untruncated::without_degeneracy(distribution);
    if (d.clamp || !is_bounded(d)) return std::clamp(untruncated::quantile(d, p), d.min, d.max);
    const double mass = mass_inside(d);
    const double before = untruncated::below(d, d.min);
    const double at = before + p * mass;
    if (at <= 0.5) return std::clamp(untruncated::quantile(d, at), d.min, d.max);
    const double beyond = untruncated::upper(d, d.max) + (1.0 - p) * mass;
    return std::clamp(untruncated::upper_quantile(d, beyond), d.min, d.max);
}

}  // namespace lacuna
