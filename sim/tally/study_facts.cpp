#include "sim/tally/study_facts.h"

#include <cmath>

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/tally/study_facts.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {
namespace hn = hwy::HWY_NAMESPACE;

/// Orients estimates, takes absolute effects, bins their ratio; entries first .. of the real studies,
/// gathered in `estimate` and `effect`; whole vectors only.
std::size_t RatioVectors(const double* estimates, const double* effects, double units, StudyFacts& facts) {
    const hn::ScalableTag<double> f;
    const hn::RebindToSigned<decltype(f)> i;
    const hn::RebindToUnsigned<decltype(i)> u;
    const hn::Rebind<std::uint16_t, decltype(f)> narrow;
    const std::size_t lanes = hn::Lanes(f);
    const auto first = hn::Set(i, static_cast<std::int64_t>(1023 + ratio_bins::lowest_exponent) << 6);
    const auto last = hn::Set(i, static_cast<std::int64_t>(ratio_bins::per_sign - 1));
    const auto middle = hn::Set(i, static_cast<std::int64_t>(ratio_bins::per_sign));
    const auto scale = hn::Set(f, units);
    const auto most = hn::Set(f, most_units);
    // Rounded to whole units: adding and subtracting 1.5 * 2^52 leaves the integer in the low bits.
    const auto magic = hn::Set(f, 0x1.8p52);
    const auto whole = [&](auto x) HWY_ATTR {
        const auto units_of_x = hn::Min(hn::Max(hn::Mul(x, scale), hn::Neg(most)), most);
        return hn::Sub(hn::BitCast(i, hn::Add(units_of_x, magic)), hn::BitCast(i, magic));
    };
    std::size_t at = 0;
    for (; at + lanes <= facts.real.size(); at += lanes) {
        const auto signed_effect = hn::LoadU(f, effects + at);
        const auto sign = hn::And(signed_effect, hn::SignBit(f));
        const auto effect = hn::Abs(signed_effect);
        const auto estimate = hn::Xor(hn::LoadU(f, estimates + at), sign);
        hn::StoreU(whole(estimate), i, facts.estimate.data() + at);
        hn::StoreU(whole(effect), i, facts.effect.data() + at);
        // Exponent and leading six bits of the mantissa, as one integer: the bin within a sign.
        const auto ratio = hn::Div(estimate, effect);
        const auto bits = hn::ShiftRight<46>(hn::BitCast(i, hn::Abs(ratio)));
        const auto step = hn::Min(hn::Max(hn::Sub(bits, first), hn::Zero(i)), last);
        const auto negative = hn::RebindMask(i, hn::Lt(ratio, hn::Zero(f)));
        const auto below = hn::Sub(hn::Sub(middle, step), hn::Set(i, 1));
        const auto bin = hn::IfThenElse(negative, below, hn::Add(middle, step));
        hn::StoreU(hn::TruncateTo(narrow, hn::BitCast(u, bin)), narrow, facts.bin.data() + at);
    }
    return at;
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(RatioVectors);

namespace ratio_bins {

double lower_edge(std::size_t bin) {
    const auto edge = [](std::size_t step) {  // absolute value at which `step` begins
        if (step == 0) return 0.0;
        const double mantissa = 1.0 + static_cast<double>(step % per_octave) / static_cast<double>(per_octave);
        return std::ldexp(mantissa, lowest_exponent + static_cast<int>(step / per_octave));
    };
    return bin < per_sign ? -edge(per_sign - bin) : edge(bin - per_sign);
}

}  // namespace ratio_bins

namespace {

/// The same as the vectors do, for one study.
std::uint16_t bin_of(double ratio) {
    double step = 0.0;
    if (ratio != 0.0) {
        int exponent = 0;
        const double mantissa = 2.0 * std::frexp(std::fabs(ratio), &exponent);
        step = (exponent - 1 - ratio_bins::lowest_exponent) * static_cast<double>(ratio_bins::per_octave) +
               std::floor((mantissa - 1.0) * static_cast<double>(ratio_bins::per_octave));
    }
    const double top = static_cast<double>(ratio_bins::per_sign - 1);
    const auto within = static_cast<std::size_t>(std::fmin(std::fmax(step, 0.0), top));
    return static_cast<std::uint16_t>(ratio < 0.0 ? ratio_bins::per_sign - 1 - within
                                                  : ratio_bins::per_sign + within);
}

void list_real(const StudyColumns& in, std::vector<std::uint32_t>& real) {
    real.resize(in.count + 1);
    std::uint32_t* out = real.data();
    std::size_t found = 0;
    for (std::size_t s = 0; s < in.count; ++s) {
        out[found] = static_cast<std::uint32_t>(s);
        found += in.truth[s] != 0;
    }
    real.resize(found);
}

/// To whole units, ties to even, as the vectors do.
std::int64_t whole(double value, double units) {
    return static_cast<std::int64_t>(std::nearbyint(std::fmin(std::fmax(value * units, -most_units), most_units)));
}

}  // namespace

void make_study_facts(const StudyColumns& in, EffectScale scale, StudyFacts& out) {
    out.cell.resize(in.count);
    out.participants = in.participants;
    std::uint16_t* cell = out.cell.data();
    for (std::size_t s = 0; s < in.count; ++s) cell[s] = static_cast<std::uint16_t>(in.truth[s] * 4u + in.claim[s]);
    for (std::size_t s = 0; in.kind && s < in.count; ++s)
        cell[s] = static_cast<std::uint16_t>(cell[s] + in.kind[s] * 12u);
    list_real(in, out.real);
    const std::size_t real = out.real.size();
    out.estimate.resize(real);
    out.effect.resize(real);
    out.bin.resize(real);
    out.gathered.resize(2 * real);
    double* estimate = out.gathered.data();
    double* effect = estimate + real;
    for (std::size_t k = 0; k < real; ++k) {
        estimate[k] = in.estimate[out.real[k]];
        effect[k] = in.effect[out.real[k]];
    }
    const double units = scale.units_in(1.0);
    for (std::size_t k = HWY_DYNAMIC_DISPATCH(RatioVectors)(estimate, effect, units, out); k < real; ++k) {
        const double oriented = std::signbit(effect[k]) ? -estimate[k] : estimate[k];
        out.estimate[k] = whole(oriented, units);
        out.effect[k] = whole(std::fabs(effect[k]), units);
        out.bin[k] = bin_of(oriented / std::fabs(effect[k]));
    }
}

}  // namespace lacuna
#endif
