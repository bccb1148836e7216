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
    explicit Chance(double p) : threshold_(static_cast<std::uint32_t>(p * 0x1p16)), p_(p) {}

    double p() const { return p_; }
    bool sure(std::uint16_t word) const { return word < threshold_; }
    bool open(std::uint16_t word) const { return word == threshold_; }

    /// Whether the event with this word happens for `entity` at `address`.
    bool happens(std::uint16_t word, StreamKey key, Address address, std::uint64_t entity) const {
        return open(word) ? refined(key, address, entity, word, 16) < p_ : sure(word);
    }

private:
    std::uint32_t threshold_ = 0;  // floor(2^16 p)
    double p_ = 0.0;
};

/// happened[i] = whether the event of chance(i) happens for entity(i), with words[i] drawn at `address`.
/// A first pass decides by the words, without branches; a second one settles what they leave open.
template <class ChanceOf, class EntityOf>
void decide(StreamKey key, Address address, std::size_t count, const std::uint16_t* words, ChanceOf chance,
            EntityOf entity, std::uint8_t* happened) {
    bool open = false;
    for (std::size_t i = 0; i < count; ++i) {
        const Chance& its = chance(i);
        happened[i] = its.sure(words[i]);
        open |= its.open(words[i]);
    }
    if (!open) return;
    for (std::size_t i = 0; i < count; ++i) {
        if (chance(i).open(words[i])) happened[i] = chance(i).happens(words[i], key, address, entity(i));
    }
}

}  // namespace lacuna
