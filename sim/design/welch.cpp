#include "sim/design/welch.h"

#include <boost/math/quadrature/gauss.hpp>
#include <cmath>

#include "sim/stats/student_t.h"

namespace lacuna {

CriticalCurve::CriticalCurve(double alpha, int sides, double least, double most) {
    constexpr std::size_t terms = 30;
    const double low = 1.0 / most, high = 1.0 / least;
    middle_ = 0.5 * (low + high);
    stretch_ = high > low ? 2.0 / (high - low) : 0.0;
    std::vector<double> value(terms);
    for (std::size_t j = 0; j < terms; ++j) {
        const double x = std::cos(M_PI * (static_cast<double>(j) + 0.5) / terms);
        const double at = stretch_ > 0.0 ? middle_ + x / stretch_ : middle_;
        value[j] = t_critical(1.0 / at, alpha / sides);
    }
    coefficient_.assign(terms, 0.0);
    for (std::size_t k = 0; k < terms; ++k) {
        for (std::size_t j = 0; j < terms; ++j) {
            coefficient_[k] += value[j] * std::cos(M_PI * static_cast<double>(k) * (static_cast<double>(j) + 0.5) / terms);
        }
        coefficient_[k] *= (k == 0 ? 1.0 : 2.0) / terms;
    }
    // What is left is rounding.
    while (coefficient_.size() > 1 && std::fabs(coefficient_.back()) < 1e-15 * std::fabs(coefficient_[0])) coefficient_.pop_back();
}

namespace welch {

namespace {

/// f averaged over B, beta(a, b) distributed, by Gauss-Legendre pieces in the angle phi with B = sin^2 phi: its
/// density is smooth there for the a, b >= 1 that occur, and narrow for large ones.
template <class F>
Tails beta_average(double a, double b, F f) {
    // Mode and width of log density (2 a - 1) log sin + (2 b - 1) log cos.
    const double p = 2.0 * a - 1.0, q = 2.0 * b - 1.0;
    const double mode = std::atan2(std::sqrt(p), std::sqrt(q));
    const double width = 1.0 / std::sqrt(2.0 * (p + q));
    const double low = std::fmax(0.0, mode - 13.0 * width), high = std::fmin(M_PI_2, mode + 13.0 * width);
    const auto log_density = [&](double phi) {
        return p * std::log(std::sin(phi) / std::sin(mode)) + q * std::log(std::cos(phi) / std::cos(mode));
    };
    using Rule = boost::math::quadrature::gauss<double, 20>;
    constexpr int pieces = 8;
    double weight = 0.0;
    Tails sum{0.0, 0.0};
    for (int piece = 0; piece < pieces; ++piece) {
        const double half = 0.5 * (high - low) / pieces, middle = low + (2 * piece + 1) * half;
        for (std::size_t i = 0; i < Rule::abscissa().size(); ++i) {
            for (const double side : {-1.0, 1.0}) {
                const double phi = middle + side * half * Rule::abscissa()[i];
                const double w = Rule::weights()[i] * std::exp(log_density(phi));
                if (w < 1e-18) continue;
                const double s = std::sin(phi);
                const Tails value = f(s * s);
                weight += w;
                sum.predicted += w * value.predicted;
                sum.reversed += w * value.reversed;
            }
        }
    }
    return {sum.predicted / weight, sum.reversed / weight};
}

}  // namespace

Tails tails(double alpha, int sides, std::uint32_t n1, std::uint32_t n2, double d) {
    const double a = n1 - 1.0, b = n2 - 1.0, df = a + b;
    const double w1 = 1.0 / n1, w2 = 1.0 / n2, m = 1.0 / std::sqrt(w1 + w2);
    const CriticalCurve critical(alpha, sides, std::fmin(a, b), df);
    // With U = chi-squared_{n1-1} / (sum of both), V1 = U df S^2 / a and V2 = (1 - U) df S^2 / b, S^2 the pooled
    // variance; Welch's statistic is Student's over `ratio`.
    return beta_average(0.5 * a, 0.5 * b, [&](double u) {
        const double v1 = w1 * u * df / a, v2 = w2 * (1.0 - u) * df / b;
        const double ratio = std::sqrt((v1 + v2) / (w1 + w2));
        const double c = critical((v1 + v2) * (v1 + v2) / (v1 * v1 / a + v2 * v2 / b)) * ratio;
        return Tails{noncentral_t_upper(c, df, d * m), sides == 2 ? noncentral_t_lower(-c, df, d * m) : 0.0};
    });
}

}  // namespace welch

}  // namespace lacuna
