// Studies that a practice bends, among others of a round.
#pragma once

#include <cstdint>
#include <vector>

#include "sim/design/sampling.h"
#include "sim/literature/prepared.h"

namespace lacuna {

/// Scratch columns of the studies that are bent.
struct BentStudies {
    std::vector<std::uint16_t> words, looks;
    std::vector<std::uint8_t> happens, claim;
    std::vector<std::uint32_t> entry, offsets, row;
    std::vector<double> theta, statistic, estimate;
};

/// Conducts again, with optional stopping, the studies of `batch` that are run so: chosen by the chance of their
/// lab's kind (`kind` may be null when there is one), each by its own draw. stopped[i] says which.
void bend_studies(const PreparedScience& science, const StudyRound& round, const std::uint8_t* kind,
                  SamplingScratch& sampling, BentStudies& scratch, StudyBatch batch, std::uint8_t* stopped);

}  // namespace lacuna
