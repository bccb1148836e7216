// Gamma variates by Marsaglia & Tsang (2000, "A simple method for generating gamma variables", ACM
// TOMS 26): with d = shape - 1/3, c = 1 / (3 sqrt(d)), x normal, u uniform, v = (1 + c x)^3,
// d v is gamma(shape) when v > 0 and log u < x^2/2 + d (1 - v + log v).
//
// Our squeeze: with y = c x the bound is h = d (-3/4 y^4 + 3/5 y^5 - 1/2 y^6 + ...), and since
// d/dy (h/d + 3/4 y^4) = 3 y^4 / (1 + y),
//   h >= -d 3/4 y^4                    for y >= 0,
//   h >= -d (3/4 y^4 + 6/5 |y|^5)      for -1/2 <= y < 0,
// and exp(h) >= 1 + h. So u < 1 + (that bound) accepts without a logarithm. It fails in about one draw
// in 36 d, where the paper's squeeze, which does not know d, fails in one of ten.
#pragma once

#include "sim/random/stream.h"

namespace lacuna {

/// Constants of one shape, which must be at least 1.
struct GammaShape {
    double d, c;
};
GammaShape gamma_shape(double shape);

/// The exact acceptance test, for draws that the squeeze leaves open. `x` normal, `u` uniform.
bool gamma_accepts(GammaShape shape, double x, double u);

/// A normal x for which the method accepts: d (1 + c x)^3 is gamma(shape). From a sequential stream.
double gamma_normal(Stream& stream, GammaShape shape);

/// A gamma(shape) variate of scale 1, any shape > 0, from a sequential stream. Shapes below 1 by
/// gamma(shape + 1) u^(1/shape) (the same paper, section 6).
double gamma_variate(Stream& stream, double shape);

/// Its logarithm, which does not underflow for tiny shapes.
double log_gamma_variate(Stream& stream, double shape);

/// A beta(a, b) variate: X / (X + Y) with X, Y gamma of shapes a and b.
double beta_variate(Stream& stream, double a, double b);

}  // namespace lacuna
