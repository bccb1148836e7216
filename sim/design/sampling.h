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
    std::vector<double> error, normal, uniform;
    std::vector<std::uint32_t> open;  // draws that the squeeze left open
    std::vector<double> other;
};

/// A batch: study number `study` of the lines `entities` in `literature`. Columns of entities.count.
struct StudyBatch {
    const std::uint32_t* row;   // in the table
    const double* theta;        // true effect of the study
    double* statistic;          // out
    double* estimate;           // out
    std::uint8_t* claim;        // out, a Claim
};

/// rows[i] = a size drawn for entity i from its kind's sizes. `kind` may be null when there is one kind.
void draw_sizes(StreamKey key, std::uint32_t literature, std::uint16_t study, Entities entities,
                const TestTable& table, const std::uint8_t* kind, SamplingScratch& scratch, std::uint32_t* row);

/// Statistic, estimate and claim of each study. Student's t is drawn as (Z + noncentrality) /
/// sqrt(chi-squared / df), its numerator and variance independent (Johnson, Kotz & Balakrishnan 1995,
/// ch. 31); with known variance the statistic is Z + noncentrality.
void draw_studies(StreamKey key, std::uint32_t literature, std::uint16_t study, Entities entities,
                  const Design& design, const TestTable& table, SamplingScratch& scratch, StudyBatch batch);

/// level[i] = how many of `cuts` the statistic of study i passes (p below the cut). `cuts` are indices
/// into table.cut_critical; `sides` theirs.
void count_cuts(const TestTable& table, const std::vector<std::size_t>& cuts, int sides, std::size_t count,
                const std::uint32_t* row, const double* statistic, std::uint8_t* level);

}  // namespace lacuna
