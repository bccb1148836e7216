#include "sim/tally/study_facts.h"

#include <cmath>

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/tally/study_facts.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {
namespace hn = hwy::HWY_NAMESPACE;

/// Orients estimates, takes absolute effects, and bins their ratio; whole vectors only.
std::size_t FactVectors(const StudyColumns& in, StudyFacts& out) {
    const hn::ScalableTag<double> f;
    const hn::RebindToSigned<decltype(f)> i;
    const hn::RebindToUnsigned<decltype(i)> u;
    const hn::Rebind<std::uint16_t, decltype(f)> narrow;
    const std::size_t lanes = hn::Lanes(f);
    const auto first = hn::Set(i, static_cast<std::int64_t>(1023 + ratio_bins::lowest_exponent) << 6);
    const auto last = hn::Set(i, static_cast<std::int64_t>(ratio_bins::per_sign - 1));
    const auto middle = hn::Set(i, static_cast<std::int64_t>(ratio_bins::per_sign));
    std::size_t at = 0;
    for (; at + lanes <= in.count; at += lanes) {
        const auto effect = hn::LoadU(f, in.effect + at);
        const auto sign = hn::And(effect, hn::SignBit(f));
        const auto magnitude = hn::Abs(effect);
        const auto estimate = hn::Xor(hn::LoadU(f, in.estimate + at), sign);
        hn::StoreU(estimate, f, out.estimate.data() + at);
        hn::StoreU(magnitude, f, out.effect.data() + at);
        // Exponent and leading six bits of the mantissa, as one integer: the bin within a sign.
        const auto ratio = hn::Div(estimate, magnitude);
        const auto bits = hn::ShiftRight<46>(hn::BitCast(i, hn::Abs(ratio)));
        const auto step = hn::Min(hn::Max(hn::Sub(bits, first), hn::Zero(i)), last);
        const auto negative = hn::RebindMask(i, hn::Lt(ratio, hn::Zero(f)));
        const auto bin = hn::IfThenElse(negative, hn::Sub(middle, step), hn::Add(hn::Add(middle, step), hn::Set(i, 1)));
        hn::StoreU(hn::TruncateTo(narrow, hn::BitCast(u, bin)), narrow, out.bin.data() + at);
    }
    std::uint16_t* kept = out.bin.data();
    for (std::size_t s = 0; s < at; ++s) kept[s] = static_cast<std::uint16_t>(in.truth[s] == 0 ? 0 : kept[s]);
    return at;
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(FactVectors);

namespace ratio_bins {

double lower_edge(std::size_t bin) {
    const auto edge = [](std::size_t step) {  // absolute value at which `step` begins
        if (step == 0) return 0.0;
        const double mantissa = 1.0 + static_cast<double>(step % per_octave) / static_cast<double>(per_octave);
        return std::ldexp(mantissa, lowest_exponent + static_cast<int>(step / per_octave));
    };
    return bin <= per_sign ? -edge(per_sign + 1 - bin) : edge(bin - per_sign - 1);
}

}  // namespace ratio_bins

namespace {

/// The same as the vectors do, for one study.
std::uint16_t bin_of(std::uint8_t truth, double estimate, double effect) {
    if (truth == 0) return 0;
    const double ratio = estimate / effect;
    int exponent = 0;
    const double mantissa = 2.0 * std::frexp(std::fabs(ratio), &exponent);
    double step = 0.0;
    if (ratio != 0.0) {
        step = (exponent - 1 - ratio_bins::lowest_exponent) * static_cast<double>(ratio_bins::per_octave) +
               std::floor((mantissa - 1.0) * static_cast<double>(ratio_bins::per_octave));
    }
    const double top = static_cast<double>(ratio_bins::per_sign - 1);
    const auto within = static_cast<std::size_t>(std::fmin(std::fmax(step, 0.0), top));
    return static_cast<std::uint16_t>(ratio < 0.0 ? ratio_bins::per_sign - within : ratio_bins::per_sign + 1 + within);
}

}  // namespace

void make_study_facts(const StudyColumns& in, StudyFacts& out) {
    out.cell.resize(in.count);
    out.bin.resize(in.count);
    out.estimate.resize(in.count);
    out.effect.resize(in.count);
    out.participants = in.participants;
    std::uint16_t* cell = out.cell.data();
    for (std::size_t s = 0; s < in.count; ++s) cell[s] = static_cast<std::uint16_t>(in.truth[s] * 4u + in.claim[s]);
    for (std::size_t s = 0; in.kind && s < in.count; ++s) cell[s] = static_cast<std::uint16_t>(cell[s] + in.kind[s] * 12u);
    for (std::size_t s = HWY_DYNAMIC_DISPATCH(FactVectors)(in, out); s < in.count; ++s) {
        out.effect[s] = std::fabs(in.effect[s]);
        out.estimate[s] = std::signbit(in.effect[s]) ? -in.estimate[s] : in.estimate[s];
        out.bin[s] = bin_of(in.truth[s], out.estimate[s], out.effect[s]);
    }
}

}  // namespace lacuna
#endif
