// Everything the sampling of a study needs that depends on its size alone, one row per possible size,
// as columns for the vector kernels. Rows of several lab kinds stand one after the other.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "sim/model/scenario.h"

namespace lacuna {

/// A step of a p rule: p < `p`, of the two-sided test or of the one in the predicted direction.
struct Cut {
    double p;
    int sides;
    bool operator==(const Cut&) const = default;
};

struct TestTable {
    // One entry per row.
    std::vector<std::uint32_t> n1, n2;      // n2 = 0 for designs with one group
    std::vector<std::uint32_t> participants;
    std::vector<double> df;                 // infinity where the variance is known
    std::vector<double> noncentrality;      // per unit of effect
    std::vector<double> to_estimate;        // reported estimate = statistic * to_estimate
    std::vector<double> to_corrected;       // the same with the small-sample correction (Hedges' g)
    std::vector<double> critical;           // significant: statistic > critical (or < -critical, two-sided)
    std::vector<double> gamma_c;            // chi-squared of df by Marsaglia & Tsang: constant c, and
    std::vector<double> variance_per_cube;  // variance / sigma^2 = variance_per_cube * (1 + c x)^3
    std::vector<std::vector<double>> cut_critical;  // [cut][row]: critical value of a p rule's step

    // Sizes by the alias method (sim/variate/alias.h): each kind has `size_rows` rows from `first_row`
    // on; of its column that stands at `row`, `keep` stays there and the rest goes to row `other`.
    std::vector<double> keep;
    std::vector<std::uint64_t> other;
    struct Kind {
        std::uint32_t first_row = 0;
        std::uint32_t size_rows = 0;
    };
    std::vector<Kind> kinds;

    /// Standard error of the reported estimate of a study in `row` with this statistic.
    double standard_error(const Design& design, std::size_t row, double statistic) const;
};

/// The table of a science, with critical values for `cuts` (each at most once).
TestTable test_table(const Science& science, const std::vector<Cut>& cuts);

}  // namespace lacuna
