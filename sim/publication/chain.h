// The chain from a manuscript to the record: writing up, then journals in order until one accepts.
#pragma once

#include <cstdint>
#include <vector>

#include "sim/model/columns.h"
#include "sim/publication/acceptance.h"
#include "sim/random/kernels.h"

namespace lacuna {

/// p-rule cuts in use by a set of regimes, ascending, by the sidedness of their p. Studies count how
/// many cuts they pass (columns level_two and level_one), once for all regimes.
struct Cuts {
    std::vector<double> two_sided, one_sided;
};
Cuts collect_cuts(const std::vector<const Rules*>& rules);

/// A regime's rules with their tables made.
struct PreparedRules {
    struct PreparedJournal {
        std::uint32_t index;  // of its streams
        AcceptanceTable accept;
        Chance results_blind, results_blind_chance;
    };
    Unit unit;
    Findings findings;
    Chance writing[3];                      // by class
    std::vector<PreparedJournal> journals;  // as many as are tried at most
    bool no_journal;
};
PreparedRules prepare(const Rules& rules, Findings findings, const Cuts& cuts);

/// Scratch columns, reused from block to block.
struct ChainScratch {
    std::vector<std::uint16_t> words, blind_words;
    std::vector<std::uint32_t> waiting, offsets;
    std::vector<std::uint32_t> everyone;  // 0, 1, 2, ...
    std::vector<std::uint8_t> level_two, level_one, happened, blind;
};

/// Takes every manuscript of the block through the chain and fills `outcome`.
void publish(StreamKey key, const PreparedRules& rules, const Conducted& block, ChainScratch& scratch,
             Outcome& outcome);

}  // namespace lacuna
