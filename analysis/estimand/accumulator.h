// Estimands from a stream of literatures, in memory that does not grow with their number.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "analysis/estimand/estimand.h"
#include "analysis/estimand/result.h"
#include "analysis/estimand/spread.h"

namespace lacuna {

/// Sums and central co-moments of an estimand's (numerator a, denominator b) under one regime, and
/// with (a0, b0) under the first regime. Co-moments are updated by Welford's method in the symmetric
/// form (Chan, Golub & LeVeque 1983, The American Statistician 37:242, eq. 1.5): the same numbers
/// in give the same bits out, whichever regime they belong to.
struct RatioMoments {
    double a = 0, b = 0;  // sums
    double mean_a = 0, mean_b = 0;
    double aa = 0, ab = 0, bb = 0;  // sums of products of deviations from the means
    double a_a0 = 0, a_b0 = 0, b_a0 = 0, b_b0 = 0;
    std::uint64_t entered = 0;  // literatures with b not 0
};

/// R = sum a / sum b with the standard error of the ratio of means by linearisation (Cochran 1977,
/// Sampling Techniques, ch. 6): var = n / (n - 1) * sum (a_i - R b_i)^2 / (sum b)^2, n = literatures
/// that entered. Missing value: sum b = 0. Missing error: n < 2.
Estimate ratio(const RatioMoments& moments);

/// R - R0 with the standard error from the paired influences e_i = (a_i - R b_i) / sum b -
/// (a0_i - R0 b0_i) / sum b0; n the smaller of the two. Exactly 0 with error 0 where both are the same.
Estimate ratio_difference(const RatioMoments& moments, const RatioMoments& first);

class Accumulator {
public:
    /// by_regime[r]: the estimands as regime r counts findings; all of the same metrics, scopes and
    /// strata in the same order.
    explicit Accumulator(std::vector<Estimands> by_regime);

    /// One literature: rows[r] its sufficient statistics under regime r. Literatures must come in
    /// order for results to agree to the last bit.
    void add(const std::vector<std::vector<double>>& rows);

    std::uint64_t literatures() const { return literatures_; }
    std::vector<Result> results() const;                // estimand by estimand, regimes within
    std::vector<PairedDifference> differences() const;  // of regimes 1, 2, ... against regime 0

private:
    struct Cell {
        RatioMoments moments;
        SpreadSample sample;
    };
    const Cell& cell(std::size_t estimand, std::size_t regime) const {
        return cells_[estimand * regimes() + regime];
    }
    std::size_t regimes() const { return by_regime_.size(); }

    std::vector<Estimands> by_regime_;
    std::vector<Cell> cells_;
    std::uint64_t literatures_ = 0;
};

}  // namespace lacuna
