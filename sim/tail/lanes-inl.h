// What the tails need beside sim/random/philox-inl.h: choices, bounds, roots and exponentials of two
// vectors in lockstep, and a loop over columns. Included once per target.
#if defined(LACUNA_LANES_INL_H_) == defined(HWY_TARGET_TOGGLE)
#ifdef LACUNA_LANES_INL_H_
#undef LACUNA_LANES_INL_H_
#else
#define LACUNA_LANES_INL_H_
#endif

#include <hwy/contrib/math/math-inl.h>

#include "sim/random/philox-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

struct M2 {
    hn::Mask<F64> a, b;
};

HWY_INLINE M2 operator<(F2 x, F2 y) { return {hn::Lt(x.a, y.a), hn::Lt(x.b, y.b)}; }
HWY_INLINE M2 operator<=(F2 x, F2 y) { return {hn::Le(x.a, y.a), hn::Le(x.b, y.b)}; }
HWY_INLINE M2 operator==(F2 x, F2 y) { return {hn::Eq(x.a, y.a), hn::Eq(x.b, y.b)}; }
HWY_INLINE F2 choose(M2 which, F2 yes, F2 no) {
    return {hn::IfThenElse(which.a, yes.a, no.a), hn::IfThenElse(which.b, yes.b, no.b)};
}
HWY_INLINE F2 smaller(F2 x, F2 y) { return {hn::Min(x.a, y.a), hn::Min(x.b, y.b)}; }
HWY_INLINE F2 larger(F2 x, F2 y) { return {hn::Max(x.a, y.a), hn::Max(x.b, y.b)}; }
HWY_INLINE F2 magnitude(F2 x) { return {hn::Abs(x.a), hn::Abs(x.b)}; }

/// sqrt(x) for x >= 0, to about 2 ulp; below 1e-300 with less.
HWY_INLINE F2 square_root(F2 x) {
#if HWY_TARGET <= HWY_AVX3
    return x * reciprocal_sqrt(larger(x, all(1e-300)));
#else
    return {hn::Sqrt(x.a), hn::Sqrt(x.b)};
#endif
}

/// exp(x) for x below 700, and 0 far below the range of doubles.
HWY_INLINE F2 exponential(F2 x) {
    const F2 bounded = larger(x, all(-1000.0));
    return {hn::Exp(F64(), bounded.a), hn::Exp(F64(), bounded.b)};
}

/// Calls f(x, y), two vectors each, along two columns; the last, partial call sees ones for what is missing.
template <class Function>
HWY_INLINE void along_columns(const double* x, const double* y, std::size_t n, double* out, Function f) {
    const std::size_t lanes = 2 * hn::Lanes(F64());
    std::size_t i = 0;
    for (; i + lanes <= n; i += lanes) store(f(load(x + i), load(y + i)), out + i);
    if (i == n) return;
    constexpr std::size_t most_lanes = 2 * HWY_MAX_BYTES / 8;
    double rest_x[most_lanes], rest_y[most_lanes];
    for (std::size_t lane = 0; lane < lanes; ++lane) {
        rest_x[lane] = i + lane < n ? x[i + lane] : 1.0;
        rest_y[lane] = i + lane < n ? y[i + lane] : 1.0;
    }
    store(f(load(rest_x), load(rest_y)), rest_x);
    for (std::size_t lane = 0; i + lane < n; ++lane) out[i + lane] = rest_x[lane];
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#endif
