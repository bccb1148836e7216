// A number never travels without its error.
#pragma once

#include <cstddef>
#include <optional>

namespace lacuna {

/// `value` is missing when its denominator is empty; `mcse` (Monte Carlo standard error) is missing
/// when it cannot be known, as with a single literature. `n`: literatures that entered.
struct Estimate {
    std::optional<double> value;
    std::optional<double> mcse;
    std::size_t n = 0;
};

}  // namespace lacuna
