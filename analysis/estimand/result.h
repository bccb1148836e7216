// Results as plain values: what the accumulators give and the reports show.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "sim/model/claim.h"
#include "sim/stats/estimate.h"

namespace lacuna {

/// Quantiles over literatures of one literature's own value: what a single field would see by luck.
struct Spread {
    double p05, p25, p50, p75, p95;
};

/// One estimand under one regime. `estimate.n`: literatures in which its denominator is not empty.
struct Result {
    std::string metric;
    Scope scope;
    std::string stratum;
    std::size_t regime;  // index into Results::regimes
    Estimate estimate;
    std::optional<Spread> spread;
};

/// One estimand under `regime` minus the same under `against`, paired by literature.
struct PairedDifference {
    std::string metric;
    Scope scope;
    std::string stratum;
    std::size_t regime, against;
    Estimate estimate;
    std::optional<Spread> spread;
};

/// Everything that is known of a run.
struct Results {
    std::string title;
    std::string digest;                // of the resolved config
    std::vector<std::string> regimes;  // names
    std::uint64_t literatures = 0;     // that entered
    std::vector<Result> results;
    std::vector<PairedDifference> differences;  // of each later regime against the first
};

}  // namespace lacuna
