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
    std::vector<std::uint16_t> cell;        // (kind * 3 + truth) * 4 + claim
    const std::uint32_t* participants = nullptr;  // the column given
    // Of the studies of real questions, which alone have effects to compare with.
    std::vector<std::uint32_t> real;        // their entries
    std::vector<double> estimate;           // oriented by the sign of the effect
    std::vector<double> effect;             // absolute
    std::vector<std::uint16_t> bin;         // of the ratio estimate / effect
};

/// Fills `facts` from columns.
void make_study_facts(const StudyColumns& columns, StudyFacts& facts);

}  // namespace lacuna
