// The scaled complementary error function on vectors. Included once per target.
#if defined(LACUNA_ERFCX_INL_H_) == defined(HWY_TARGET_TOGGLE)
#ifdef LACUNA_ERFCX_INL_H_
#undef LACUNA_ERFCX_INL_H_
#else
#define LACUNA_ERFCX_INL_H_
#endif

#include "sim/tail/lanes-inl.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {

/// exp(v^2) erfc(v) for 0 <= v < 1e100, to 1e-15: one polynomial for (v + 3) erfcx(v) on the whole half-line in
/// u = (v - 3) / (v + 3). The map is that of Shepherd & Laframboise (1981), "Chebyshev approximation of
/// (1 + 2x) exp(x^2) erfc x in 0 <= x < infinity", Math. Comp. 36; the factor v + 3 saves a division.
/// Coefficients: tests/reference/make_tail_coefficients_mpmath.py; the terms left out sum to 2.3e-16.
HWY_INLINE F2 erfcx(F2 v) {
    constexpr double c[22] = {
        1.07400690708833968, -0.883394453169879014, 0.590228357104107169, -0.310467261900974611,
        0.11952776128703104, -0.02682723461387531, -0.00121241662233028468, 0.00303406187394486984,
        -0.000548309738742103044, -0.000276776999933685247, 0.000107561752213937281, 0.0000303947360254707682,
        -0.0000174715178330863414, -4.74035681081854708e-6, 2.76764728470124379e-6, 9.83951645231049179e-7,
        -4.1156335216014678e-7, -2.17239444083116055e-7, 4.98670727278602593e-8, 3.95233089818475833e-8,
        -3.52991350344888316e-9, -4.03012907372658226e-9};
    const F2 scale = reciprocal(v + all(3.0));
    const F2 u = (v - all(3.0)) * scale;
    const F2 square = u * u;
    F2 even = all(c[20]);
    F2 odd = all(c[21]);
    for (int k = 18; k >= 0; k -= 2) {
        even = fma(even, square, c[k]);
        odd = fma(odd, square, c[k + 1]);
    }
    return fma(odd, u, even) * scale;
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#endif
