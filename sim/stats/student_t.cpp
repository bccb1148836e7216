#include "sim/stats/student_t.h"

#include <array>
#include <boost/math/distributions/normal.hpp>
#include <boost/math/distributions/students_t.hpp>
#include <boost/math/special_functions/gamma.hpp>
#include <cmath>
#include <limits>

#include "sim/base/fault.h"
#include "sim/stats/chi_expectation.h"
#include "sim/stats/normal.h"

namespace lacuna {

namespace {

/// Chance and partial mean of Z + delta on (a, b], in units of S: the integrand over S when a and b are
/// multiplied by S. E[delta + Z; a < delta + Z <= b] = delta P + phi(a - delta) - phi(b - delta).
std::array<double, 2> normal_part(double a, double b, double delta) {
    const double chance = normal_between(a - delta, b - delta);
    return {chance, delta * chance + normal_density(a - delta) - normal_density(b - delta)};
}

/// c * s with infinite c kept infinite.
double scaled(double c, double s) { return std::isinf(c) ? c : c * s; }

void require_df(double df) {
    if (!(df >= 1.0)) throw Defect("Student's t needs 1 degree of freedom or more");
}

}  // namespace

double normal_critical(double tail) {
    return boost::math::quantile(boost::math::complement(boost::math::normal_distribution<double>(), tail));
}

double small_sample_correction(double df) {
    if (!(df > 1.0)) throw Defect("the small-sample correction needs more than 1 degree of freedom");
    if (std::isinf(df)) return 1.0;
    return 1.0 / (std::sqrt(0.5 * df) * boost::math::tgamma_delta_ratio(0.5 * (df - 1.0), 0.5));
}

double t_critical(double df, double tail) {
    require_df(df);
    if (tail <= 0.0) return std::numeric_limits<double>::infinity();
    if (tail >= 1.0) return -std::numeric_limits<double>::infinity();
    if (std::isinf(df)) return normal_critical(tail);
    return boost::math::quantile(boost::math::complement(boost::math::students_t_distribution<double>(df), tail));
}

double noncentral_t_upper(double c, double df, double noncentrality) {
    require_df(df);
    if (std::isinf(c)) return c < 0.0 ? 1.0 : 0.0;
    if (std::isinf(df)) return normal_lower(noncentrality - c);
    const std::array<double, 1> bounds{c};
    return chi_expectation<1>(df, chi_pieces(df, noncentrality, bounds), [&](double s) {
        return std::array<double, 1>{normal_lower(noncentrality - c * s)};
    })[0];
}

double noncentral_t_lower(double c, double df, double noncentrality) {
    return noncentral_t_upper(-c, df, -noncentrality);
}

TruncatedT noncentral_t_between(double a, double b, double df, double noncentrality) {
    require_df(df);
    if (!(a < b)) return {0.0, 0.0};
    const bool whole = std::isinf(a) && std::isinf(b);
    if (std::isinf(df)) {
        const auto [chance, first] = normal_part(a, b, noncentrality);
        return {chance, first};
    }
    if (df <= 1.0 && (std::isinf(a) || std::isinf(b))) {
        const double undefined = std::numeric_limits<double>::quiet_NaN();
        return {noncentral_t_upper(a, df, noncentrality) - noncentral_t_upper(b, df, noncentrality), undefined};
    }
    if (whole) return {1.0, noncentrality / small_sample_correction(df)};
    const std::array<double, 2> bounds{a, b};
    const auto [chance, first] = chi_expectation<2>(df, chi_pieces(df, noncentrality, bounds), [&](double s) {
        const auto [p, m] = normal_part(scaled(a, s), scaled(b, s), noncentrality);
        return std::array<double, 2>{p, m / s};
    });
    return {chance, first};
}

}  // namespace lacuna
