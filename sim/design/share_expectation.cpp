#include "sim/design/share_expectation.h"

#include <algorithm>
#include <array>
#include <boost/math/quadrature/gauss_kronrod.hpp>
#include <cmath>
#include <limits>
#include <numbers>
#include <vector>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

constexpr double right_angle = 0.5 * std::numbers::pi;

/// Log density of the angle relative to its mode, keeping its digits for large df: the cosine's and the
/// sine's parts cancel to first order, so both are taken relative to the mode.
class AngleLogDensity {
public:
    AngleLogDensity(double df_cosine, double df_sine)
        : cosine_power_(df_cosine - 1.0),
          sine_power_(df_sine - 1.0),
          mode_(std::atan2(std::sqrt(sine_power_), std::sqrt(cosine_power_))) {}
    double mode() const { return mode_; }
    double power() const { return cosine_power_ + sine_power_; }
    double operator()(double angle) const {
        const double step = angle - mode_, half = std::sin(0.5 * step);
        const double bend = -2.0 * half * half, lean = std::sin(step);
        double log_density = 0.0;
        if (cosine_power_ > 0.0)
            log_density += cosine_power_ * std::log1p(bend - std::sqrt(sine_power_ / cosine_power_) * lean);
        if (sine_power_ > 0.0)
            log_density += sine_power_ * std::log1p(bend + std::sqrt(cosine_power_ / sine_power_) * lean);
        return std::isnan(log_density) ? -std::numeric_limits<double>::infinity() : log_density;
    }

private:
    double cosine_power_, sine_power_, mode_;
};

/// Where the density has fallen to exp(-42) of its height between the mode and `end`, or `end`.
double edge(const AngleLogDensity& log_density, double end) {
    constexpr double lowest = -42.0;
    if (log_density(end) > lowest) return end;
    double inside = log_density.mode(), outside = end;
    for (int i = 0; i < 60 && std::fabs(outside - inside) > 0.01 * std::fabs(outside - log_density.mode()); ++i) {
        const double middle = 0.5 * (inside + outside);
        (log_density(middle) > lowest ? inside : outside) = middle;
    }
    return outside;
}

/// An interval of angles. In a bent piece, angle = to - (to - from) u^2 with u from 0 to 1 is integrated
/// over u, in which a square root at `to` is smooth; [low, high] is the part of its u.
struct Piece {
    double from, to;
    bool bent;
    double low, high;
};

struct Sums {
    double mass, value;        // of the density, and of the density times f: 31 points
    double mass_doubt, doubt;  // their differences from 15 points
};

Sums integrate(const Piece& piece, const AngleLogDensity& log_density, const AngleFunction& f) {
    using Kronrod = boost::math::quadrature::gauss_kronrod<double, 31>;
    using Gauss = boost::math::quadrature::gauss<double, 15>;
    constexpr std::size_t count = 31;
    const auto& nodes = Kronrod::abscissa();
    const double middle = 0.5 * (piece.low + piece.high), half = 0.5 * (piece.high - piece.low);
    std::array<double, count> angles, densities, values;
    const double length = piece.to - piece.from;
    for (std::size_t i = 0; i < count; ++i) {
        const double u = i < 16 ? middle - half * nodes[i] : middle + half * nodes[i - 15];
        angles[i] = piece.bent ? piece.to - length * u * u : piece.from + length * u;
        densities[i] = std::exp(log_density(angles[i])) * half * length * (piece.bent ? 2.0 * u : 1.0);
    }
    f(angles, values);
    Sums sums{};
    double gauss_mass = 0.0, gauss_value = 0.0;
    for (std::size_t i = 0; i < count; ++i) {
        const std::size_t k = i < 16 ? i : i - 15;
        const double fine = densities[i] * Kronrod::weights()[k];
        sums.mass += fine;
        sums.value += fine * values[i];
        if (k % 2 != 0) continue;  // Gauss's nodes are every second one of Kronrod's, from the middle on
        const double coarse = densities[i] * Gauss::weights()[k / 2];
        gauss_mass += coarse;
        gauss_value += coarse * values[i];
    }
    sums.mass_doubt = std::fabs(sums.mass - gauss_mass);
    sums.doubt = std::fabs(sums.value - gauss_value);
    return sums;
}

/// Pieces of a few standard deviations of the density, the ones that end at `root` bent.
std::vector<Piece> first_pieces(const AngleLogDensity& log_density, std::optional<double> root) {
    const double low = edge(log_density, 0.0), high = edge(log_density, right_angle);
    std::vector<double> ends{low};
    if (root && *root > low && *root < high) ends.push_back(*root);
    ends.push_back(high);
    const double widest = 2.8 / std::sqrt(1.0 + log_density.power());  // four standard deviations
    std::vector<Piece> pieces;
    for (std::size_t e = 0; e + 1 < ends.size(); ++e) {
        const double length = ends[e + 1] - ends[e];
        const int count = std::max(1, static_cast<int>(std::ceil(length / widest)));
        for (int i = 0; i < count; ++i) {
            const double from = ends[e] + length * i / count;
            const double to = i + 1 == count ? ends[e + 1] : ends[e] + length * (i + 1) / count;
            pieces.push_back({from, to, root && to == *root, 0.0, 1.0});
        }
    }
    return pieces;
}

}  // namespace

double share_expectation(double df_cosine, double df_sine, const AngleFunction& f, std::optional<double> root) {
    if (!(df_cosine >= 1.0 && df_sine >= 1.0)) throw Defect("shares need 1 degree of freedom or more on each side");
    // The 31-point sum is far better than its difference from 15 points: about (200 difference)^1.5
    // (Piessens et al. 1983, QUADPACK), which makes this 1e-13.
    constexpr double doubt_allowed = 1e-11, shortest = 1e-9;
    const AngleLogDensity log_density(df_cosine, df_sine);
    std::vector<Piece> open = first_pieces(log_density, root);
    double rough = 0.0;
    std::vector<Sums> of_open;
    for (const Piece& piece : open) {
        of_open.push_back(integrate(piece, log_density, f));
        rough += of_open.back().mass;
    }
    double mass = 0.0, value = 0.0;
    while (!open.empty()) {
        const Piece piece = open.back();
        const Sums sums = of_open.back();
        open.pop_back();
        of_open.pop_back();
        if (std::max(sums.doubt, sums.mass_doubt) <= doubt_allowed * rough || piece.high - piece.low < shortest) {
            mass += sums.mass;
            value += sums.value;
            continue;
        }
        const double middle = 0.5 * (piece.low + piece.high);
        for (const auto& [a, b] : {std::pair{piece.low, middle}, std::pair{middle, piece.high}}) {
            open.push_back({piece.from, piece.to, piece.bent, a, b});
            of_open.push_back(integrate(open.back(), log_density, f));
        }
    }
    return value / mass;
}

}  // namespace lacuna
