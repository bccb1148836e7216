#include "sim/sequential/score_density.h"

#include <algorithm>
#include <boost/math/quadrature/gauss.hpp>
#include <cmath>

namespace lacuna {

namespace {

/// Gauss-Legendre points on (low, high), 20 in each piece of at most `step`.
template <class F>
void for_each_point(double low, double high, double step, F f) {
    using Rule = boost::math::quadrature::gauss<double, 20>;
    const int pieces = std::max(1, static_cast<int>(std::ceil((high - low) / step)));
    const double half = 0.5 * (high - low) / pieces;
    for (int piece = 0; piece < pieces; ++piece) {
        const double middle = low + (2 * piece + 1) * half;
        for (std::size_t i = 0; i < Rule::abscissa().size(); ++i) {
            for (const double side : {-1.0, 1.0}) f(middle + side * half * Rule::abscissa()[i], half * Rule::weights()[i]);
        }
    }
}

}  // namespace

double ScoreDensity::above(double t, double bound, double drift) const {
    const double step = t - information_, scale = M_SQRT1_2 / std::sqrt(step);
    double sum = 0.0;
    for (const Point& from : points_) sum += from.mass * 0.5 * std::erfc((bound - from.score - drift * step) * scale);
    return sum;
}

double ScoreDensity::below(double t, double bound, double drift) const {
    const double step = t - information_, scale = M_SQRT1_2 / std::sqrt(step);
    double sum = 0.0;
    for (const Point& from : points_) sum += from.mass * 0.5 * std::erfc((from.score + drift * step - bound) * scale);
    return sum;
}

void ScoreDensity::add_interval(double t, double low, double high, double drift, std::vector<Point>& next) const {
    constexpr double far = 9.5;  // standard deviations, beyond which nothing is followed
    const double step = t - information_, sd = std::sqrt(step);
    low = std::fmax(low, drift * t - far * std::sqrt(t));
    high = std::fmin(high, drift * t + far * std::sqrt(t));
    if (!(low < high)) return;
    for_each_point(low, high, 3.2 * sd, [&](double score, double weight) {
        double density = 0.0;
        for (const Point& from : points_) {
            const double z = (score - from.score - drift * step) / sd;
            density += from.mass * std::exp(-0.5 * z * z);
        }
        next.push_back({score, weight * density / (sd * std::sqrt(2.0 * M_PI))});
    });
}

void ScoreDensity::advance(double t, double low, double high, double drift) {
    std::vector<Point> next;
    add_interval(t, low, high, drift, next);
    points_ = std::move(next);
    information_ = t;
}

void ScoreDensity::advance_around(double t, double low, double inner_low, double inner_high, double high, double drift) {
    std::vector<Point> next;
    add_interval(t, low, inner_low, drift, next);
    add_interval(t, inner_high, high, drift, next);
    points_ = std::move(next);
    information_ = t;
}

}  // namespace lacuna
