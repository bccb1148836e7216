// What an estimand is: a ratio of sums over literatures, each literature given by its row of
// sufficient statistics (sim/tally/layout.h).
#pragma once

#include <functional>
#include <span>
#include <string>
#include <vector>

#include "sim/model/claim.h"

namespace lacuna {

/// A number computed from one literature's row.
using Form = std::function<double(std::span<const double> row)>;

/// value = sum of numerators / sum of denominators over literatures; one literature's own value is
/// numerator / denominator. A literature whose denominator is 0 holds nothing that the estimand is
/// about; its numerator is 0 too.
struct Estimand {
    std::string metric;  // snake_case, as in the results
    Scope scope;
    std::string stratum;  // "all", or a part: "claim=positive", "class=mixed", "lab=routine"
    Form numerator;
    Form denominator;
};

using Estimands = std::vector<Estimand>;

}  // namespace lacuna
