// Drawing a batch of studies from the exact joint distribution of their sufficient statistics.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "sim/design/test_table.h"
#include "sim/model/claim.h"
#include "sim/random/kernels.h"

namespace lacuna {

/// Entries whose chi-squared a kernel leaves to exact scalar code, with the draws behind them.
struct OpenDraws {
    std::vector<std::uint32_t> entry;
    std::vector<double> error, root;
    std::vector<std::uint32_t> spare;

    void clear() {
        entry.clear();
        error.clear();
        root.clear();
        spare.clear();
    }
};

/// Scratch of designs with interim looks.
struct SequentialScratch {
    std::vector<std::uint32_t> active, still, offsets, row;
    std::vector<double> mean, other_mean, squares;  // of each study so far, in units of sigma
};

/// Scratch columns, reused from batch to batch.
struct SamplingScratch {
    SequentialScratch sequential;
    std::vector<std::uint32_t> words;
    std::vector<std::uint32_t> open;              // entries whose word does not decide their size
    OpenDraws draws, other_draws;
    std::vector<double> z, v, other_z, other_v;   // errors of studies
    std::vector<double> rate;                     // of the treated, per study
    std::vector<std::uint32_t> n, x, other_x;     // binomial counts
};

/// Study number `study` of the lines `entities` in `literature`, under `seed`.
struct StudyRound {
    StreamKey key;
    std::uint32_t literature;
    std::uint16_t study;
    Entities entities;
    std::uint32_t look = 0;  // at the data, from 0

    /// Looks are 2^16 apart in the index, so that their streams of further draws do not meet.
    Address address(Purpose purpose) const { return {literature, purpose, study, look << 16}; }
    std::uint64_t entity(std::size_t i) const {
        return entities.first + (entities.offsets ? entities.offsets[i] : i);
    }
};

/// Columns of round.entities.count entries; kernels read and write up to the next multiple of 16.
struct StudyBatch {
    std::uint32_t* row;         // in the table; a study that stops at an interim look moves to that look's row
    const double* theta;        // true effect of the study
    double* statistic;          // out
    double* estimate;           // out
    std::uint8_t* claim;        // out, a Claim
    double* df = nullptr;              // out, of designs whose degrees of freedom depend on the data
    double* standard_error = nullptr;  // out, of designs whose standard error needs more than the estimate
    std::uint16_t* looks = nullptr;    // out where studies have looks: how many were made
};

/// Which of the optional columns a design fills.
bool fills_df(const Design& design);
bool fills_standard_error(const Design& design);

/// row[i] = a size drawn for entry i from its kind's sizes, or planned for the effect planned[i]. `kind` may
/// be null when there is one kind, `planned` when no kind plans for each question.
void draw_sizes(const StudyRound& round, const TestTable& table, const std::uint8_t* kind, const double* planned,
                SamplingScratch& scratch, std::uint32_t* row);

/// The row of `kind` that a uniform picks, by the alias method; 0 <= u <= 1, so that no rounding of u leads
/// out of the kind's rows.
std::uint32_t pick_row(const TestTable& table, const TestTable::Kind& kind, double u);

/// Statistic, estimate and claim of each study, of any design.
void draw_studies(const StudyRound& round, const Design& design, const TestTable& table, SamplingScratch& scratch,
                  StudyBatch batch);

/// level[i] = how many of `cuts` the statistic of study i passes (p below the cut). `cuts` are indices
/// into table.cut_critical; `sides` theirs. `df`: the column of Welch's degrees of freedom, else null.
void count_cuts(const TestTable& table, const std::vector<std::size_t>& cuts, int sides, std::size_t count,
                const std::uint32_t* row, const double* statistic, const double* df, std::uint8_t* level);

/// Positive, reversed or inconclusive.
Claim claim_of(double statistic, double critical, int sides);

/// The chi-squared of entry open.entry[k]: by the exact test and further draws.
double settled_chi(const StudyRound& round, Purpose test, Purpose again, const ChiColumns& chi, std::uint32_t row,
                   std::size_t k, const OpenDraws& open);

}  // namespace lacuna
