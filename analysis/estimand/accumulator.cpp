#include "analysis/estimand/accumulator.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <utility>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

/// sum of (x_i - r b_i)(y_i - s c_i) from the co-moments of (x, b) with (y, c), the residuals having
/// mean 0. One expression for variances and covariances, so that equal inputs cancel exactly.
double residual_product(double xy, double xc, double by, double bc, double r, double s) {
    return xy - s * xc - r * by + r * s * bc;
}

double own_product(const RatioMoments& m) {
    const double r = m.a / m.b;
    return residual_product(m.aa, m.ab, m.ab, m.bb, r, r);
}

std::optional<double> standard_error(double variance_sum, std::uint64_t n) {
    if (n < 2) return std::nullopt;
    const auto count = static_cast<double>(n);
    return std::sqrt(std::max(0.0, variance_sum) * (count / (count - 1.0)));
}

/// The next literature's pair, with the pair of the first regime; `before`: literatures so far.
struct Pair {
    double a, b;
};

struct Deviation {
    double a, b;
};

Deviation deviation(const RatioMoments& m, Pair pair) { return {pair.a - m.mean_a, pair.b - m.mean_b}; }

/// `first`: the first regime's deviations from its means before this literature.
void update(RatioMoments& m, Pair pair, Deviation first, double before) {
    const Deviation d = deviation(m, pair);
    const double weight = before / (before + 1.0);
    m.aa += weight * (d.a * d.a);
    m.ab += weight * (d.a * d.b);
    m.bb += weight * (d.b * d.b);
    m.a_a0 += weight * (d.a * first.a);
    m.a_b0 += weight * (d.a * first.b);
    m.b_a0 += weight * (d.b * first.a);
    m.b_b0 += weight * (d.b * first.b);
    m.mean_a += d.a / (before + 1.0);
    m.mean_b += d.b / (before + 1.0);
    m.a += pair.a;
    m.b += pair.b;
    m.entered += pair.b != 0.0;
}

std::optional<Spread> difference_spread(const SpreadSample& one, const SpreadSample& other) {
    std::vector<double> values = one.values();
    for (std::size_t i = 0; i < values.size(); ++i) values[i] -= other.values()[i];
    return spread_of(std::move(values));
}

}  // namespace

Estimate ratio(const RatioMoments& m) {
    if (m.b == 0.0) return {std::nullopt, std::nullopt, m.entered};
    return {m.a / m.b, standard_error(own_product(m) / (m.b * m.b), m.entered), m.entered};
}

Estimate ratio_difference(const RatioMoments& m, const RatioMoments& first) {
    const std::uint64_t n = std::min(m.entered, first.entered);
    if (m.b == 0.0 || first.b == 0.0) return {std::nullopt, std::nullopt, n};
    const double r = m.a / m.b, r0 = first.a / first.b;
    const double cross = residual_product(m.a_a0, m.a_b0, m.b_a0, m.b_b0, r, r0);
    const double variance =
        own_product(m) / (m.b * m.b) - 2.0 * (cross / (m.b * first.b)) + own_product(first) / (first.b * first.b);
    return {r - r0, standard_error(variance, n), n};
}

Accumulator::Accumulator(std::vector<Estimands> by_regime) : by_regime_(std::move(by_regime)) {
    if (by_regime_.empty()) throw Defect("Accumulator: no regimes");
    for (const Estimands& estimands : by_regime_) {
        if (estimands.size() != by_regime_.front().size()) throw Defect("Accumulator: regimes differ in estimands");
    }
    cells_.resize(by_regime_.front().size() * by_regime_.size());
}

void Accumulator::add(const std::vector<std::vector<double>>& rows) {
    if (rows.size() != regimes()) throw Defect("Accumulator: a literature needs one row per regime");
    const auto before = static_cast<double>(literatures_);
    for (std::size_t e = 0; e < by_regime_.front().size(); ++e) {
        Deviation first{};
        for (std::size_t r = 0; r < regimes(); ++r) {
            const Estimand& estimand = by_regime_[r][e];
            const Pair pair{estimand.numerator(rows[r]), estimand.denominator(rows[r])};
            Cell& to = cells_[e * regimes() + r];
            if (r == 0) first = deviation(to.moments, pair);
            update(to.moments, pair, first, before);
            to.sample.add(pair.b != 0.0 ? pair.a / pair.b : std::numeric_limits<double>::quiet_NaN());
        }
    }
    ++literatures_;
}

std::vector<Result> Accumulator::results() const {
    std::vector<Result> results;
    for (std::size_t e = 0; e < by_regime_.front().size(); ++e) {
        const Estimand& estimand = by_regime_.front()[e];
        for (std::size_t r = 0; r < regimes(); ++r) {
            const Cell& from = cell(e, r);
            results.push_back({estimand.metric, estimand.scope, estimand.stratum, r, ratio(from.moments),
                               spread_of(from.sample.values())});
        }
    }
    return results;
}

std::vector<PairedDifference> Accumulator::differences() const {
    std::vector<PairedDifference> differences;
    for (std::size_t e = 0; e < by_regime_.front().size(); ++e) {
        const Estimand& estimand = by_regime_.front()[e];
        for (std::size_t r = 1; r < regimes(); ++r) {
            const Cell &one = cell(e, r), &first = cell(e, 0);
            differences.push_back({estimand.metric, estimand.scope, estimand.stratum, r, 0,
                                   ratio_difference(one.moments, first.moments),
                                   difference_spread(one.sample, first.sample)});
        }
    }
    return differences;
}

}  // namespace lacuna
