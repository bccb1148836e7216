// Events of given chances, decided by 16-bit words: exact, since a word that equals the threshold is
// refined by further bits (which happens once in 2^16 draws).
#pragma once

#include <cstdint>

#include "sim/random/kernels.h"

namespace lacuna {

/// A chance in [0, 1]: words below `threshold` decide for it, words above against it.
class Chance {
public:
    Chance() = default;
    explicit Chance(double p) : threshold_(p < 1.0 ? static_cast<std::uint16_t>(p * 0x1p16) : 0xFFFFu), p_(p) {}

    double p() const { return p_; }
    std::uint16_t threshold() const { return threshold_; }  // min(floor(2^16 p), 2^16 - 1)

    /// Whether the event with this word happens for `entity` at `address`.
    bool happens(std::uint16_t word, StreamKey key, Address address, std::uint64_t entity) const {
        return word == threshold_ ? refined(key, address, entity, word, 16) < p_ : word < threshold_;
    }

private:
    std::uint16_t threshold_ = 0;
    double p_ = 0.0;
};

/// happened[i] = whether the event of chance(i) happens for entity(i), with words[i] drawn at `address`.
/// A first pass decides by the words, without branches; a second one settles what they leave open.
template <class ChanceOf, class EntityOf>
void decide(StreamKey key, Address address, std::size_t count, const std::uint16_t* words, ChanceOf chance,
            EntityOf entity, std::uint8_t* happened) {
    std::uint16_t open = 0;
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint16_t threshold = chance(i).threshold();
        happened[i] = words[i] < threshold;
        open |= static_cast<std::uint16_t>(words[i] == threshold);
    }
    if (open == 0) return;
    for (std::size_t i = 0; i < count; ++i) {
        if (words[i] == chance(i).threshold()) happened[i] = chance(i).happens(words[i], key, address, entity(i));
    }
}

/// The same where the chance follows from a code below `kinds` (at most 4): without look-ups the first
/// pass is made of vector compares.
template <class EntityOf>
void decide_by_code(StreamKey key, Address address, std::size_t count, const std::uint16_t* words,
                    const std::uint8_t* codes, const Chance* chances, std::size_t kinds, EntityOf entity,
                    std::uint8_t* happened) {
    std::uint16_t threshold[4] = {};
    for (std::size_t k = 0; k < kinds; ++k) threshold[k] = chances[k].threshold();
    const std::uint16_t t0 = threshold[0], t1 = threshold[1], t2 = threshold[2], t3 = threshold[3];
    std::uint16_t open = 0;
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint16_t code = codes[i];
        std::uint16_t its = t0;
        its = code == 1 ? t1 : its;
        its = code == 2 ? t2 : its;
        its = code == 3 ? t3 : its;
        happened[i] = words[i] < its;
        open |= static_cast<std::uint16_t>(words[i] == its);
    }
    if (open == 0) return;
    for (std::size_t i = 0; i < count; ++i) {
        const Chance& its = chances[codes[i]];
        if (words[i] == its.threshold()) happened[i] = its.happens(words[i], key, address, entity(i));
    }
}

}  // namespace lacuna
