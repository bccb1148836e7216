// Per-literature values, kept for their quantiles in bounded memory.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <vector>

#include "analysis/estimand/result.h"

namespace lacuna {

/// Quantile of sorted values by linear interpolation of order statistics: definition 7 of Hyndman &
/// Fan (1996, "Sample quantiles in statistical packages", The American Statistician 50:361).
/// `sorted` must hold at least one value.
double sample_quantile(const std::vector<double>& sorted, double p);

/// The five quantiles of `values`, NaN meaning absent; none when fewer than two are present, since
/// one literature shows no spread.
std::optional<Spread> spread_of(std::vector<double> values);

/// Values of literature 0, 1, 2, ... in order. Keeps all of the first `most`; beyond that every 2nd,
/// 4th, ... 2^k-th literature, so that never more than `most` are held.
class SpreadSample {
public:
    static constexpr std::size_t most = 16384;

    /// `value`: NaN where the literature has none.
    void add(double value);
    const std::vector<double>& values() const { return values_; }

private:
    std::vector<double> values_;
    std::uint64_t seen_ = 0;
    std::uint64_t stride_ = 1;
};

}  // namespace lacuna
