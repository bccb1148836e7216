// Drawing a batch of studies from the exact joint distribution of their sufficient statistics.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "sim/design/test_table.h"
#include "sim/random/kernels.h"

namespace lacuna {

/// Scratch columns, reused from batch to batch.
struct SamplingScratch {
    std::vector<std::uint32_t> words;
    std::vector<std::uint32_t> open;       // entries that a kernel leaves to exact scalar code
    std::vector<double> error, root;       // of the entries in `open`: the draws behind them
    std::vector<std::uint32_t> spare;
};

/// Study number `study` of the lines `entities` in `literature`, under `seed`.
struct StudyRound {
    StreamKey key;
    std::uint32_t literature;
    std::uint16_t study;
    Entities entities;

    Address address(Purpose purpose) const { return {literature, purpose, study, 0}; }
    std::uint64_t entity(std::size_t i) const {
        return entities.first + (entities.offsets ? entities.offsets[i] : i);
    }
};

/// Columns of round.entities.count entries.
struct StudyBatch {
    const std::uint32_t* row;   // in the table
    const double* theta;        // true effect of the study
    double* statistic;          // out
    double* estimate;           // out
    std::uint8_t* claim;        // out, a Claim
};

/// row[i] = a size drawn for entry i from its kind's sizes. `kind` may be null when there is one kind.
void draw_sizes(const StudyRound& round, const TestTable& table, const std::uint8_t* kind, SamplingScratch& scratch,
                std::uint32_t* row);

/// Statistic, estimate and claim of each study. Student's t is drawn as (Z + noncentrality) /
/// sqrt(chi-squared / df), its numerator and variance independent (Johnson, Kotz & Balakrishnan 1995,
/// ch. 31); with known variance the statistic is Z + noncentrality.
void draw_studies(const StudyRound& round, const Design& design, const TestTable& table, SamplingScratch& scratch,
                  StudyBatch batch);

/// level[i] = how many of `cuts` the statistic of study i passes (p below the cut). `cuts` are indices
/// into table.cut_critical; `sides` theirs.
void count_cuts(const TestTable& table, const std::vector<std::size_t>& cuts, int sides, std::size_t count,
                const std::uint32_t* row, const double* statistic, std::uint8_t* level);

}  // namespace lacuna
