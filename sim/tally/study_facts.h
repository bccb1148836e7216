// Study columns made ready for counting: computed once per block, counted under every regime.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

namespace lacuna {

/// Bins for ratios (oriented estimate / |effect|): 64 per octave of the absolute value between 2^-7
/// and 2^12, both signs, ordered; each about 1 % wide.
namespace ratio_bins {
inline constexpr std::size_t per_octave = 64;
inline constexpr int lowest_exponent = -7;
inline constexpr int octaves = 19;
inline constexpr std::size_t per_sign = per_octave * octaves;
inline constexpr std::size_t count = 2 * per_sign;
/// Lower edge of bin b, 0 <= b <= count (count: upper edge of the last). The outermost bins are open;
/// the two around zero reach to zero.
double lower_edge(std::size_t bin);
}  // namespace ratio_bins

/// Sums of effects and estimates are kept in whole units of scale * 2^-30, so that they are exact and do
/// not depend on any order: of studies, blocks, threads, or of how rules divide studies among statuses.
/// Values beyond 2^21 scales count as that: a scale is chosen so that none is drawn.
struct EffectScale {
    double scale = 1.0;
    double unit() const { return scale * 0x1p-30; }
    double units_in(double value) const { return value / unit(); }
};
inline constexpr double most_units = 0x1p51;

/// Per-study inputs, each an array of `count`: Truth and Claim codes, lab kind (null: all 0), estimate,
/// effect of the study's question, participants.
struct StudyColumns {
    std::size_t count;
    const std::uint8_t* truth;
    const std::uint8_t* claim;
    const std::uint8_t* kind;
    const double* estimate;
    const double* effect;
    const std::uint32_t* participants;
};

struct StudyFacts {
    // Of every study.
    std::vector<std::uint16_t> cell;              // (kind * 3 + truth) * 4 + claim
    const std::uint32_t* participants = nullptr;  // the column given
    // Of the studies of real questions, which alone have effects to compare with.
    std::vector<std::uint32_t> real;     // their entries
    std::vector<std::int64_t> estimate;  // oriented by the sign of the effect, in units of the scale
    std::vector<std::int64_t> effect;    // absolute, in units of the scale
    std::vector<std::uint16_t> bin;      // of the ratio estimate / effect
    std::vector<double> gathered;        // scratch
};

/// Fills `facts` from columns. `scale`: the order of magnitude of effects and estimates, a power of 2.
void make_study_facts(const StudyColumns& columns, EffectScale scale, StudyFacts& facts);

}  // namespace lacuna
