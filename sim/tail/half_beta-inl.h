// The incomplete beta function I_x(a, 1/2) on vectors, for a >= 1/2 and relative error 1e-12 down to the
// smallest results: the tail of Student's t, and where odd numerator degrees of freedom start. Included
// once per target.
//
// 1. Eight steps up in a, I_x(a, b) = I_x(a + 1, b) + x^a (1 - x)^b / (a B(a, b)) (DLMF 8.17.20): sums of
//    positive terms.
// 2. What remains, with A = a + 8 and Y = -log x, is
//      B(A, 1/2) I_x(A, 1/2) = integral from Y of exp(-A s) (1 - exp(-s))^(-1/2) ds;
//    (s / (1 - exp(-s)))^(1/2) is expanded in powers of s, after DiDonato & Morris (1992), "Algorithm 708:
//    Significant digit computation of the incomplete beta function ratios", ACM TOMS 18 (their BGRAT), and
//    Temme (1996), "Special Functions", section 11.3. Its terms are incomplete gamma functions
//    Gamma(m + 1/2, A Y), which climb from sqrt(pi) erfc by DLMF 8.8.2: positive terms again.
//    Where the series in s would converge badly, at Y beyond 2, the remainder is exp(-8 Y) of the whole.
//    Twelve terms leave 1.2e-14 of the result, the worst at a = 5/2, Y = 1.6 (in 50 digits).
// 3. B(A, 1/2) itself is the same series at Y = 0, so that no gamma function is called for.
#if defined(LACUNA_HALF_BETA_INL_H_) == defined(HWY_TARGET_TOGGLE)
#ifdef LACUNA_HALF_BETA_INL_H_
#undef LACUNA_HALF_BETA_INL_H_
#else
#define LACUNA_HALF_BETA_INL_H_
#endif

#include "sim/tail/erfcx-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

/// x = 1 / (1 + q), 1 - x without loss of digits, and -log x.
struct BetaPoint {
    F2 x, complement, minus_log;
};

/// The point of the odds q = (1 - x) / x >= 0. Where `huge`, q stands for q exp(scale), too large for a double.
HWY_INLINE BetaPoint beta_point(F2 q, M2 huge, double scale) {
    const F2 odds = choose(huge, all(1e300), q);
    const F2 u = odds + all(1.0);
    const F2 x = reciprocal(u);
    const F2 rounded_off = (odds - (u - all(1.0))) * x;
    return {x, odds * x, log_positive(choose(huge, q, u)) + choose(huge, all(scale), rounded_off)};
}

/// The finite sum of step 1 over its common denominator: `sum` / `below`, times x^a sqrt(1 - x) / B(A, 1/2).
/// `above` / `below` = B(A, 1/2) / B(a, 1/2).
struct Climb {
    F2 sum, above, below;
};

HWY_INLINE Climb climb(F2 a, F2 x) {
    Climb c{all(0.0), all(1.0), all(1.0)};
    for (int j = 7; j >= 0; --j) {
        const F2 next = a + all(j + 0.5);
        c.sum = fma(x * next, c.sum, c.above);
        c.above = c.above * (a + all(static_cast<double>(j)));
        c.below = c.below * next;
    }
    return c;
}

/// The series of step 2 times sqrt(A) exp(A Y), and of step 3 times sqrt(A / pi).
struct Remainder {
    F2 incomplete, complete;
};

HWY_INLINE Remainder remainder(F2 A, F2 minus_log) {
    constexpr double d[12] = {
        1.0, 0.25, 0.0104166666666666667, -0.00260416666666666667, -0.00009765625, 0.0000515407986111111111,
        1.27560247189153439e-6, -1.11009708788029101e-6, -1.96705840041818232e-8, 2.48363198847156774e-8,
        3.39666199603867451e-10, -5.69007183394218764e-10};
    const F2 inverse = reciprocal(A);
    const F2 root = square_root(A * minus_log);
    F2 gamma = all(1.7724538509055160273) * erfcx(root);  // exp(A Y) Gamma(m + 1/2, A Y) / A^m
    F2 power = root * inverse;                            // sqrt(A Y) Y^m / A
    F2 complete_gamma = all(1.0);                         // (1/2)_m / A^m
    Remainder r{gamma, all(1.0)};
    for (int m = 1; m < 12; ++m) {
        const F2 grow = all(m - 0.5) * inverse;
        gamma = fma(grow, gamma, power);
        power = power * minus_log;
        complete_gamma = complete_gamma * grow;
        r.incomplete = fma(all(d[m]), gamma, r.incomplete);
        r.complete = fma(all(d[m]), complete_gamma, r.complete);
    }
    return r;
}

/// exp(a Y) I_x(a, 1/2) = value / divisor, and exp(a Y) x^a sqrt(1 - x) / ((1/2) B(a, 1/2)) = step / divisor.
struct HalfBeta {
    F2 value, step, divisor;
};

HWY_INLINE HalfBeta half_beta(F2 a, const BetaPoint& at) {
    const F2 A = a + all(8.0);
    const Climb c = climb(a, at.x);
    const Remainder r = remainder(A, at.minus_log);
    const F2 front = square_root(A * at.complement);
    const F2 x2 = at.x * at.x;
    const F2 x4 = x2 * x2;
    return {fma(front, c.sum, (x4 * x4) * (c.below * r.incomplete)), all(2.0) * (front * c.above),
            all(1.7724538509055160273) * (c.below * r.complete)};
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#endif
