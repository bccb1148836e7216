#include "sim/tail/tails.h"

#include <limits>

#include "sim/base/fault.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/tail/tails.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

#include "sim/tail/half_beta-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

constexpr double log_2 = 0.69314718055994530942;
constexpr double infinite = std::numeric_limits<double>::infinity();

/// `df` for the formulas: 1e20 for more, which is t^4 / (4 df) < 1e-14 from the limit where p > 1e-300.
HWY_INLINE F2 finite_df(F2 df) { return larger(smaller(df, all(1e20)), all(1.0)); }

/// `p` where x is a number and df is one of at least 1, else NaN.
HWY_INLINE F2 where_defined(F2 x, F2 df, F2 p) {
    const F2 missing = all(std::numeric_limits<double>::quiet_NaN());
    return choose(x == x, choose(all(1.0) <= df, p, missing), missing);
}

/// The upper tail at x from that at |x|, for laws symmetric about 0.
HWY_INLINE F2 with_sign(F2 x, F2 p) { return choose(x < all(0.0), all(1.0) - p, p); }

HWY_INLINE F2 normal_upper(F2 z) {
    const F2 size = smaller(magnitude(z), all(1e3));
    const F2 p = exponential(all(-0.5) * (size * size)) * erfcx(all(0.70710678118654752440) * size);
    return where_defined(z, all(1.0), with_sign(z, all(0.5) * p));
}

HWY_INLINE F2 t_upper(F2 t, F2 given_df) {
    const F2 df = finite_df(given_df);
    const F2 a = all(0.5) * df;
    const F2 size = magnitude(t);
    const M2 huge = all(0x1p500) < size;  // whose square is out of range
    const F2 scaled = choose(huge, all(0x1p-512) * size, size);
    const BetaPoint at = beta_point((scaled * scaled) * reciprocal(df), huge, 1024.0 * log_2);
    const HalfBeta beta = half_beta(a, at);
    F2 p = all(0.5) * (exponential(all(-1.0) * (a * at.minus_log)) * (beta.value * reciprocal(beta.divisor)));
    p = choose(size == all(infinite), all(0.0), smaller(p, all(0.5)));
    return where_defined(t, given_df, with_sign(t, p));
}

/// A sum on its way up in b, times 2^-(512 `scalings`).
struct Ascent {
    F2 sum, term, scalings;
};

/// Adds `count` terms of I_x(a, b + 1) = I_x(a, b) + x^a (1 - x)^b / (b B(a, b)) (DLMF 8.17.21), from the
/// term of `b` on; neighbouring terms have the ratio (a + b) (1 - x) / (b + 1). Sums whose first terms are
/// too small for a double grow out of it, so that what grows is scaled down now and then.
HWY_INLINE Ascent ascend(Ascent s, F2 a, F2 complement, double b, std::uint32_t count) {
    for (std::uint32_t i = 0; i < count; ++i, b += 1.0) {
        s.sum = s.sum + s.term;
        s.term = s.term * ((a + all(b)) * (complement * all(1.0 / (b + 1.0))));
        if (i % 8 != 7) continue;
        const M2 grown = all(0x1p256) < larger(s.sum, s.term);
        const F2 scale = choose(grown, all(0x1p-512), all(1.0));
        s.sum = s.sum * scale;
        s.term = s.term * scale;
        s.scalings = s.scalings + choose(grown, all(1.0), all(0.0));
    }
    return s;
}

/// exp(a Y) I_x(a, df1 / 2): by DLMF 8.17.21 from I_x(a, 1/2) or from I_x(a, 0) = 0.
HWY_INLINE Ascent f_sum(F2 a, const BetaPoint& at, std::uint32_t df1) {
    const std::uint32_t count = df1 / 2;
    if (df1 % 2 == 0) return ascend({all(0.0), all(1.0), all(0.0)}, a, at.complement, 0.0, count);
    const HalfBeta beta = half_beta(a, at);
    const F2 inverse = reciprocal(beta.divisor);
    return ascend({beta.value * inverse, beta.step * inverse, all(0.0)}, a, at.complement, 0.5, count);
}

HWY_INLINE F2 f_upper(F2 f, F2 given_df2, std::uint32_t df1) {
    const F2 df2 = finite_df(given_df2);
    const F2 a = all(0.5) * df2;
    const F2 size = larger(f, all(0.0));
    const M2 huge = all(0x1p900) < size;
    const F2 scaled = choose(huge, all(0x1p-512) * size, size);
    const BetaPoint at = beta_point(scaled * (all(static_cast<double>(df1)) * reciprocal(df2)), huge, 512.0 * log_2);
    const Ascent s = f_sum(a, at, df1);
    // In two halves, since the exponential alone may underflow where the sum makes up for it.
    const F2 half = exponential(fma(s.scalings, all(256.0 * log_2), all(-0.5) * (a * at.minus_log)));
    const F2 p = (s.sum * half) * half;
    const F2 inside = choose(size == all(infinite), all(0.0), smaller(p, all(1.0)));
    return where_defined(f, given_df2, choose(f <= all(0.0), all(1.0), inside));
}

void NormalUpperTails(const double* z, std::size_t n, double* p) {
    along_columns(z, z, n, p, [](F2 x, F2) HWY_ATTR { return normal_upper(x); });
}

void TUpperTails(const double* t, const double* df, std::size_t n, double* p) {
    along_columns(t, df, n, p, [](F2 x, F2 its_df) HWY_ATTR { return t_upper(x, its_df); });
}

void FUpperTails(const double* f, std::uint32_t df1, const double* df2, std::size_t n, double* p) {
    along_columns(f, df2, n, p, [df1](F2 x, F2 its_df) HWY_ATTR { return f_upper(x, its_df, df1); });
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(NormalUpperTails);
HWY_EXPORT(TUpperTails);
HWY_EXPORT(FUpperTails);

void normal_upper_tails(const double* z, std::size_t n, double* p) { HWY_DYNAMIC_DISPATCH(NormalUpperTails)(z, n, p); }

void t_upper_tails(const double* t, const double* df, std::size_t n, double* p) {
    HWY_DYNAMIC_DISPATCH(TUpperTails)(t, df, n, p);
}

void f_upper_tails(const double* f, std::uint32_t df1, const double* df2, std::size_t n, double* p) {
    if (df1 == 0) throw Defect("f_upper_tails: no numerator degrees of freedom");
    HWY_DYNAMIC_DISPATCH(FUpperTails)(f, df1, df2, n, p);
}

}  // namespace lacuna
#endif
