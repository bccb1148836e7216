// Philox4x32-10, uniforms and Box-Muller pairs on Highway vectors. Included once per target; other
// rooms' kernels include it too, so that they can fuse draws with what they are drawn for.
// The traps it avoids: 32x32 -> 64 bit products are explicit (auto-vectorised Philox takes 5 ns a
// block instead of 2), and sine and cosine share one reduction.
#if defined(LACUNA_PHILOX_INL_H_) == defined(HWY_TARGET_TOGGLE)
#ifdef LACUNA_PHILOX_INL_H_
#undef LACUNA_PHILOX_INL_H_
#else
#define LACUNA_PHILOX_INL_H_
#endif

#include <hwy/highway.h>

#include "sim/random/stream.h"

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {
namespace hn = hwy::HWY_NAMESPACE;

using F64 = hn::ScalableTag<double>;
using U64 = hn::ScalableTag<std::uint64_t>;
using VecF = hn::Vec<F64>;
using VecU = hn::Vec<U64>;

/// A vector of blocks; each 32-bit word stands in the low half of a 64-bit lane, the high half is
/// without meaning (products read the low halves only).
struct Block {
    VecU w0, w1, w2, w3;
};

/// 64-bit products of the low halves.
HWY_INLINE VecU product(VecU a, VecU b) {
#if HWY_TARGET == HWY_SCALAR  // has no 32-bit MulEven in Highway 1.0.3 under g++ 12
    return VecU((a.raw & 0xFFFFFFFFu) * (b.raw & 0xFFFFFFFFu));
#else
    const hn::Repartition<std::uint32_t, U64> words;
    return hn::MulEven(hn::BitCast(words, a), hn::BitCast(words, b));
#endif
}

HWY_INLINE Block philox(Block c, StreamKey key) {
    const U64 d;
    const VecU m0 = hn::Set(d, 0xD2511F53u);
    const VecU m1 = hn::Set(d, 0xCD9E8D57u);
    std::uint32_t k0 = static_cast<std::uint32_t>(key.seed);
    std::uint32_t k1 = static_cast<std::uint32_t>(key.seed >> 32);
    for (int round = 0; round < 10; ++round) {
        const VecU p0 = product(c.w0, m0);
        const VecU p1 = product(c.w2, m1);
        c.w0 = hn::Xor(hn::Xor(hn::ShiftRight<32>(p1), c.w1), hn::Set(d, k0));
        c.w1 = p1;
        c.w2 = hn::Xor(hn::Xor(hn::ShiftRight<32>(p0), c.w3), hn::Set(d, k1));
        c.w3 = p0;
        k0 += 0x9E3779B9u;
        k1 += 0xBB67AE85u;
    }
    return c;
}

/// The counter block of `address` for the entity blocks in `block` (each below 2^39).
HWY_INLINE Block counter(Address address, VecU block) {
    const U64 d;
    const std::uint32_t tags = static_cast<std::uint32_t>(address.purpose) << 8 |
                               static_cast<std::uint32_t>(address.study) << 16;
    return {hn::Set(d, address.index), block, hn::Or(hn::ShiftRight<32>(block), hn::Set(d, tags)),
            hn::Set(d, address.literature)};
}

/// Two words to a uniform on (0, 1).
HWY_INLINE VecF to_uniform(VecU low, VecU high) {
    const U64 d;
    const F64 f;
    const VecU bits = hn::Or(hn::ShiftLeft<32>(high), hn::And(low, hn::Set(d, 0xFFFFFFFFu)));
    const VecU mantissa = hn::Or(hn::ShiftRight<12>(bits), hn::Set(d, 0x3FF0000000000000u));
    return hn::Sub(hn::BitCast(f, mantissa), hn::Set(f, 1.0 - 0x1p-53));
}

/// log(x) for normal positive x. Method and coefficients of fdlibm's e_log.c (Sun Microsystems 1993).
HWY_INLINE VecF log_positive(VecF x) {
    const U64 d;
    const F64 f;
    const hn::RebindToSigned<U64> i;
    // x = 2^k m with m in [sqrt(1/2), sqrt(2)): shift the exponent by the bits of sqrt(1/2).
    const VecU shifted = hn::Sub(hn::BitCast(d, x), hn::Set(d, 0x3FE6A09E667F3BCDu));
    const auto k = hn::ShiftRight<52>(hn::BitCast(i, shifted));
    const VecF m = hn::BitCast(f, hn::Sub(hn::BitCast(d, x), hn::ShiftLeft<52>(hn::BitCast(d, k))));
    const VecF kd = hn::ConvertTo(f, k);
    const VecF t = hn::Sub(m, hn::Set(f, 1.0));
    const VecF s = hn::Div(t, hn::Add(t, hn::Set(f, 2.0)));
    const VecF z = hn::Mul(s, s);
    const VecF w = hn::Mul(z, z);
    VecF even = hn::MulAdd(w, hn::Set(f, 1.531383769920937332e-01), hn::Set(f, 2.222219843214978396e-01));
    even = hn::Mul(w, hn::MulAdd(w, even, hn::Set(f, 3.999999999940941908e-01)));
    VecF odd = hn::MulAdd(w, hn::Set(f, 1.479819860511658591e-01), hn::Set(f, 1.818357216161805012e-01));
    odd = hn::MulAdd(w, odd, hn::Set(f, 2.857142874366239149e-01));
    odd = hn::Mul(z, hn::MulAdd(w, odd, hn::Set(f, 6.666666666666735130e-01)));
    const VecF half = hn::Mul(hn::Set(f, 0.5), hn::Mul(t, t));
    const VecF inner = hn::MulAdd(s, hn::Add(half, hn::Add(even, odd)),
                                  hn::Mul(kd, hn::Set(f, 1.90821492927058770002e-10)));
    return hn::NegMulAdd(hn::Set(f, -6.93147180369123816490e-01), kd, hn::Sub(t, hn::Sub(half, inner)));
}

struct Pair {
    VecF first, second;
};

/// (cos, sin) of 2 pi u, u in (0, 1). Polynomials on [-pi/4, pi/4]: Moshier, Cephes sin.c (1989).
HWY_INLINE Pair cos_sin_turn(VecF u) {
    const U64 d;
    const F64 f;
    const VecF magic = hn::Set(f, 0x1.8p52);
    const VecF rounded = hn::MulAdd(u, hn::Set(f, 4.0), magic);  // low bits: quarter turns
    const VecU quarter = hn::BitCast(d, rounded);
    const VecF r = hn::NegMulAdd(hn::Sub(rounded, magic), hn::Set(f, 0.25), u);  // exact
    const VecF x = hn::Mul(r, hn::Set(f, 6.283185307179586476925));
    const VecF z = hn::Mul(x, x);
    VecF s = hn::Set(f, 1.58962301576546568060e-10);
    s = hn::MulAdd(s, z, hn::Set(f, -2.50507477628578072866e-8));
    s = hn::MulAdd(s, z, hn::Set(f, 2.75573136213857245213e-6));
    s = hn::MulAdd(s, z, hn::Set(f, -1.98412698295895385996e-4));
    s = hn::MulAdd(s, z, hn::Set(f, 8.33333333332211858878e-3));
    s = hn::MulAdd(s, z, hn::Set(f, -1.66666666666666307295e-1));
    s = hn::MulAdd(hn::Mul(s, z), x, x);
    VecF c = hn::Set(f, -1.13585365213876817300e-11);
    c = hn::MulAdd(c, z, hn::Set(f, 2.08757008419747316778e-9));
    c = hn::MulAdd(c, z, hn::Set(f, -2.75573141792967388112e-7));
    c = hn::MulAdd(c, z, hn::Set(f, 2.48015872888517045348e-5));
    c = hn::MulAdd(c, z, hn::Set(f, -1.38888888888730564116e-3));
    c = hn::MulAdd(c, z, hn::Set(f, 4.16666666666665929218e-2));
    c = hn::MulAdd(hn::Mul(c, z), z, hn::NegMulAdd(hn::Set(f, 0.5), z, hn::Set(f, 1.0)));
    const auto swap = hn::MaskFromVec(hn::BitCast(f, hn::Sub(hn::Zero(d), hn::And(quarter, hn::Set(d, 1)))));
    const VecU two = hn::Set(d, 2);
    const VecU sine_sign = hn::ShiftLeft<62>(hn::And(quarter, two));
    const VecU cosine_sign = hn::ShiftLeft<62>(hn::And(hn::Add(quarter, hn::Set(d, 1)), two));
    return {hn::Xor(hn::IfThenElse(swap, s, c), hn::BitCast(f, cosine_sign)),
            hn::Xor(hn::IfThenElse(swap, c, s), hn::BitCast(f, sine_sign))};
}

/// Both uniforms of a block.
HWY_INLINE Pair uniform_pair(const Block& b) { return {to_uniform(b.w0, b.w1), to_uniform(b.w2, b.w3)}; }

/// Both normals of a block.
HWY_INLINE Pair normal_pair(const Block& b) {
    const F64 f;
    const Pair u = uniform_pair(b);
    const VecF radius = hn::Sqrt(hn::Mul(hn::Set(f, -2.0), log_positive(u.first)));
    const Pair turn = cos_sin_turn(u.second);
    return {hn::Mul(radius, turn.first), hn::Mul(radius, turn.second)};
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#endif
