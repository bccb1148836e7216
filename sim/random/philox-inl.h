// Philox4x32-10, uniforms and Box-Muller pairs on Highway vectors. Included once per target; other
// rooms' kernels include it too, so that they can fuse draws with what they are drawn for.
//
// Everything works on two vectors in lockstep: the chains of dependent operations are long (ten Philox
// rounds, then two polynomials), and one vector at a time leaves half of the processor waiting.
// The traps it avoids: 32x32 -> 64 bit products are explicit (auto-vectorised Philox takes 5 ns a
// block), sine and cosine share one reduction, and divisions and square roots, which block their port
// for about 20 cycles, are Newton steps where the processor gives a start value.
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
using I64 = hn::ScalableTag<std::int64_t>;
using VecF = hn::Vec<F64>;
using VecU = hn::Vec<U64>;
using VecI = hn::Vec<I64>;

/// Two vectors in lockstep: of doubles, of 64-bit words.
struct F2 {
    VecF a, b;
};
struct U2 {
    VecU a, b;
};

HWY_INLINE F2 all(double x) { return {hn::Set(F64(), x), hn::Set(F64(), x)}; }
HWY_INLINE U2 all(std::uint64_t x) { return {hn::Set(U64(), x), hn::Set(U64(), x)}; }
HWY_INLINE F2 operator+(F2 x, F2 y) { return {hn::Add(x.a, y.a), hn::Add(x.b, y.b)}; }
HWY_INLINE F2 operator-(F2 x, F2 y) { return {hn::Sub(x.a, y.a), hn::Sub(x.b, y.b)}; }
HWY_INLINE F2 operator*(F2 x, F2 y) { return {hn::Mul(x.a, y.a), hn::Mul(x.b, y.b)}; }
HWY_INLINE F2 operator^(F2 x, F2 y) { return {hn::Xor(x.a, y.a), hn::Xor(x.b, y.b)}; }
HWY_INLINE U2 operator+(U2 x, U2 y) { return {hn::Add(x.a, y.a), hn::Add(x.b, y.b)}; }
HWY_INLINE U2 operator-(U2 x, U2 y) { return {hn::Sub(x.a, y.a), hn::Sub(x.b, y.b)}; }
HWY_INLINE U2 operator&(U2 x, U2 y) { return {hn::And(x.a, y.a), hn::And(x.b, y.b)}; }
HWY_INLINE U2 operator|(U2 x, U2 y) { return {hn::Or(x.a, y.a), hn::Or(x.b, y.b)}; }
HWY_INLINE U2 xor3(U2 x, U2 y, U2 z) { return {hn::Xor3(x.a, y.a, z.a), hn::Xor3(x.b, y.b, z.b)}; }
/// x y + z and z - x y, each with one rounding where the target can.
HWY_INLINE F2 fma(F2 x, F2 y, F2 z) { return {hn::MulAdd(x.a, y.a, z.a), hn::MulAdd(x.b, y.b, z.b)}; }
HWY_INLINE F2 fma(F2 x, F2 y, double z) { return fma(x, y, all(z)); }
HWY_INLINE F2 minus_product(F2 z, F2 x, F2 y) {
    return {hn::NegMulAdd(x.a, y.a, z.a), hn::NegMulAdd(x.b, y.b, z.b)};
}
template <int bits>
HWY_INLINE U2 left(U2 x) {
    return {hn::ShiftLeft<bits>(x.a), hn::ShiftLeft<bits>(x.b)};
}
template <int bits>
HWY_INLINE U2 right(U2 x) {
    return {hn::ShiftRight<bits>(x.a), hn::ShiftRight<bits>(x.b)};
}
HWY_INLINE F2 as_doubles(U2 x) { return {hn::BitCast(F64(), x.a), hn::BitCast(F64(), x.b)}; }
HWY_INLINE U2 as_words(F2 x) { return {hn::BitCast(U64(), x.a), hn::BitCast(U64(), x.b)}; }

/// Loads and stores of neighbouring vectors.
HWY_INLINE F2 load(const double* from) {
    const F64 f;
    return {hn::LoadU(f, from), hn::LoadU(f, from + hn::Lanes(f))};
}
HWY_INLINE void store(F2 x, double* to) {
    const F64 f;
    hn::StoreU(x.a, f, to);
    hn::StoreU(x.b, f, to + hn::Lanes(f));
}

/// 64-bit products of the low halves.
HWY_INLINE VecU product(VecU x, VecU y) {
#if HWY_TARGET == HWY_SCALAR  // has no 32-bit MulEven in Highway 1.0.3 under g++ 12
    return VecU((x.raw & 0xFFFFFFFFu) * (y.raw & 0xFFFFFFFFu));
#else
    const hn::Repartition<std::uint32_t, U64> words;
    return hn::MulEven(hn::BitCast(words, x), hn::BitCast(words, y));
#endif
}
HWY_INLINE U2 product(U2 x, U2 y) { return {product(x.a, y.a), product(x.b, y.b)}; }

/// Blocks; each 32-bit word stands in the low half of a 64-bit lane, the high half is without meaning
/// (products read the low halves only).
struct Block {
    U2 w0, w1, w2, w3;
};

/// The keys of the ten rounds, each in a 64-bit word, worked out once per batch.
struct RoundKeys {
    std::uint64_t k0[10], k1[10];
    explicit RoundKeys(StreamKey key) {
        for (std::uint32_t round = 0; round < 10; ++round) {
            k0[round] = static_cast<std::uint32_t>(static_cast<std::uint32_t>(key.seed) + round * 0x9E3779B9u);
            k1[round] =
                static_cast<std::uint32_t>(static_cast<std::uint32_t>(key.seed >> 32) + round * 0xBB67AE85u);
        }
    }
};

/// The high halves of products, in the low halves. A shuffle, since products and shifts share a port.
HWY_INLINE VecU high_half(VecU x) {
#if HWY_TARGET == HWY_SCALAR
    return hn::ShiftRight<32>(x);
#else
    const hn::Repartition<std::uint32_t, U64> words;
    return hn::BitCast(U64(), hn::Shuffle2301(hn::BitCast(words, x)));
#endif
}
HWY_INLINE U2 high_half(U2 x) { return {high_half(x.a), high_half(x.b)}; }

HWY_INLINE Block philox(Block c, const RoundKeys& keys) {
    const U2 m0 = all(std::uint64_t{0xD2511F53});
    const U2 m1 = all(std::uint64_t{0xCD9E8D57});
    for (int round = 0; round < 10; ++round) {
        const U2 p0 = product(c.w0, m0);
        const U2 p1 = product(c.w2, m1);
        c.w0 = xor3(high_half(p1), c.w1, all(keys.k0[round]));
        c.w1 = p1;
        c.w2 = xor3(high_half(p0), c.w3, all(keys.k1[round]));
        c.w3 = p0;
    }
    return c;
}

/// The counter block of `address` for the entity blocks in `block` (each below 2^40).
HWY_INLINE Block counter(Address address, U2 block) {
    const std::uint64_t tags =
        std::uint64_t{static_cast<std::uint8_t>(address.purpose)} << 8 | std::uint64_t{address.study} << 16;
    return {all(std::uint64_t{address.index}), block, right<32>(block) | all(tags),
            all(std::uint64_t{address.literature})};
}

/// Neighbouring blocks from `first` on.
HWY_INLINE U2 blocks_from(std::uint64_t first) {
    const U64 d;
    return {hn::Iota(d, first), hn::Iota(d, first + hn::Lanes(d))};
}

/// Two words to a uniform on (0, 1).
HWY_INLINE F2 to_uniform(U2 low, U2 high) {
    const U2 bits = left<32>(high) | (low & all(std::uint64_t{0xFFFFFFFF}));
    const U2 mantissa = right<12>(bits) | all(std::uint64_t{0x3FF0000000000000});
    return as_doubles(mantissa) - all(1.0 - 0x1p-53);
}

/// The 12 bits of a block that its first uniform leaves unused, as a number 0 .. 4095.
HWY_INLINE F2 spare_bits(const Block& b) {
    const U2 mantissa = (b.w0 & all(std::uint64_t{0xFFF})) | all(std::uint64_t{0x4330000000000000});
    return as_doubles(mantissa) - all(0x1p52);
}

/// The same of its second uniform.
HWY_INLINE F2 other_spare_bits(const Block& b) {
    const U2 mantissa = (b.w2 & all(std::uint64_t{0xFFF})) | all(std::uint64_t{0x4330000000000000});
    return as_doubles(mantissa) - all(0x1p52);
}

/// 1 / x for positive normal x, to about 1 ulp.
HWY_INLINE F2 reciprocal(F2 x) {
#if HWY_TARGET <= HWY_AVX3
    F2 r{VecF{_mm512_maskz_rcp14_pd(0xFF, x.a.raw)}, VecF{_mm512_maskz_rcp14_pd(0xFF, x.b.raw)}};
    r = fma(r, minus_product(all(1.0), x, r), r);  // Newton: 14, 28, 56 bits
    return fma(r, minus_product(all(1.0), x, r), r);
#else
    const VecF one = hn::Set(F64(), 1.0);
    return {hn::Div(one, x.a), hn::Div(one, x.b)};
#endif
}

/// 1 / sqrt(x) for positive normal x, to about 1 ulp.
HWY_INLINE F2 reciprocal_sqrt(F2 x) {
#if HWY_TARGET <= HWY_AVX3
    F2 r{VecF{_mm512_maskz_rsqrt14_pd(0xFF, x.a.raw)}, VecF{_mm512_maskz_rsqrt14_pd(0xFF, x.b.raw)}};
    for (int step = 0; step < 2; ++step) {  // r + r (1 - x r^2) / 2
        r = fma(r, minus_product(all(0.5), x * r, all(0.5) * r), r);
    }
    return r;
#else
    const VecF one = hn::Set(F64(), 1.0);
    return {hn::Div(one, hn::Sqrt(x.a)), hn::Div(one, hn::Sqrt(x.b))};
#endif
}

/// log(x) for normal positive x. Method and coefficients of fdlibm's e_log.c (Sun Microsystems 1993).
HWY_INLINE F2 log_positive(F2 x) {
    // x = 2^k m with m in [sqrt(1/2), sqrt(2)): shift the exponent by the bits of sqrt(1/2).
    const U2 shifted = as_words(x) - all(std::uint64_t{0x3FE6A09E667F3BCD});
    const I64 i;
    const VecI ka = hn::ShiftRight<52>(hn::BitCast(i, shifted.a));
    const VecI kb = hn::ShiftRight<52>(hn::BitCast(i, shifted.b));
    const U2 exponent{hn::BitCast(U64(), ka), hn::BitCast(U64(), kb)};
    const F2 k{hn::ConvertTo(F64(), ka), hn::ConvertTo(F64(), kb)};
    const F2 m = as_doubles(as_words(x) - left<52>(exponent));
    const F2 t = m - all(1.0);
    const F2 s = t * reciprocal(t + all(2.0));
    const F2 z = s * s;
    const F2 w = z * z;
    F2 even = fma(w, all(1.531383769920937332e-01), 2.222219843214978396e-01);
    F2 odd = fma(w, all(1.479819860511658591e-01), 1.818357216161805012e-01);
    even = fma(w, even, 3.999999999940941908e-01);
    odd = fma(w, odd, 2.857142874366239149e-01);
    odd = fma(w, odd, 6.666666666666735130e-01);
    const F2 half = all(0.5) * (t * t);
    const F2 inner = fma(s, half + fma(w, even, z * odd), k * all(1.90821492927058770002e-10));
    return minus_product(t - (half - inner), k, all(-6.93147180369123816490e-01));
}

struct Pair {
    F2 first, second;
};

/// (cos, sin) of 2 pi u, u in (0, 1). Polynomials on [-pi/4, pi/4]: Moshier, Cephes sin.c (1989).
HWY_INLINE Pair cos_sin_turn(F2 u) {
    const F2 magic = all(0x1.8p52);
    const F2 rounded = fma(u, all(4.0), magic);  // low bits: quarter turns
    const U2 quarter = as_words(rounded);
    const F2 r = minus_product(u, rounded - magic, all(0.25));  // exact
    const F2 x = r * all(6.283185307179586476925);
    const F2 z = x * x;
    F2 s = fma(z, all(1.58962301576546568060e-10), -2.50507477628578072866e-8);
    F2 c = fma(z, all(-1.13585365213876817300e-11), 2.08757008419747316778e-9);
    s = fma(s, z, 2.75573136213857245213e-6);
    c = fma(c, z, -2.75573141792967388112e-7);
    s = fma(s, z, -1.98412698295895385996e-4);
    c = fma(c, z, 2.48015872888517045348e-5);
    s = fma(s, z, 8.33333333332211858878e-3);
    c = fma(c, z, -1.38888888888730564116e-3);
    s = fma(s, z, -1.66666666666666307295e-1);
    c = fma(c, z, 4.16666666666665929218e-2);
    s = fma(s * z, x, x);
    c = fma(c * z, z, minus_product(all(1.0), z, all(0.5)));
    const U2 odd = all(std::uint64_t{0}) - (quarter & all(std::uint64_t{1}));
    const auto swap_a = hn::MaskFromVec(hn::BitCast(F64(), odd.a));
    const auto swap_b = hn::MaskFromVec(hn::BitCast(F64(), odd.b));
    const U2 two = all(std::uint64_t{2});
    const F2 cosine{hn::IfThenElse(swap_a, s.a, c.a), hn::IfThenElse(swap_b, s.b, c.b)};
    const F2 sine{hn::IfThenElse(swap_a, c.a, s.a), hn::IfThenElse(swap_b, c.b, s.b)};
    return {cosine ^ as_doubles(left<62>((quarter + all(std::uint64_t{1})) & two)),
            sine ^ as_doubles(left<62>(quarter & two))};
}

/// Both uniforms of a block.
HWY_INLINE Pair uniform_pair(const Block& b) { return {to_uniform(b.w0, b.w1), to_uniform(b.w2, b.w3)}; }

/// Both normals of a block.
HWY_INLINE Pair normal_pair(const Block& b) {
    const Pair u = uniform_pair(b);
    const F2 square = all(-2.0) * log_positive(u.first);
    const F2 radius = square * reciprocal_sqrt(square);
    const Pair turn = cos_sin_turn(u.second);
    return {radius * turn.first, radius * turn.second};
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#endif
