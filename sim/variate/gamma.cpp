#include "sim/variate/gamma.h"

#include <boost/random/normal_distribution.hpp>
#include <cmath>

namespace lacuna {

GammaShape gamma_shape(double shape) {
    const double d = shape - 1.0 / 3.0;
    return {d, 1.0 / (3.0 * std::sqrt(d))};
}

bool gamma_accepts(GammaShape shape, double x, double u) {
    const double root = 1.0 + shape.c * x;
    if (root <= 0.0) return false;
    const double v = root * root * root;
    return std::log(u) < 0.5 * x * x + shape.d * (1.0 - v + std::log(v));
}

double gamma_normal(Stream& stream, GammaShape shape) {
    boost::random::normal_distribution<double> normal;
    for (;;) {
        const double x = normal(stream);
        const double u = stream.uniform();
        if (gamma_accepts(shape, x, u)) return x;
    }
}

namespace {

double gamma_of_shape_one_or_more(Stream& stream, double shape) {
    const GammaShape constants = gamma_shape(shape);
    const double root = 1.0 + constants.c * gamma_normal(stream, constants);
    return constants.d * root * root * root;
}

}  // namespace

double gamma_variate(Stream& stream, double shape) {
    return shape < 1.0 ? std::exp(log_gamma_variate(stream, shape)) : gamma_of_shape_one_or_more(stream, shape);
}

double log_gamma_variate(Stream& stream, double shape) {
    if (shape >= 1.0) return std::log(gamma_of_shape_one_or_more(stream, shape));
    const double whole = std::log(gamma_of_shape_one_or_more(stream, shape + 1.0));
    return whole + std::log(stream.uniform()) / shape;
}

double beta_variate(Stream& stream, double a, double b) {
    const double log_x = log_gamma_variate(stream, a);
    const double log_y = log_gamma_variate(stream, b);
    return 1.0 / (1.0 + std::exp(log_y - log_x));
}

}  // namespace lacuna
