// What a scenario must give, without simulating it: exact expected values by quadrature.
#pragma once

#include <string>
#include <vector>

#include "sim/model/scenario.h"

namespace lacuna {

/// One estimand's value: the ratio of its expected totals, which is where its estimate over many
/// literatures goes. Names of metric and scope as in the results of an analysis.
struct ExpectedValue {
    std::string metric, scope;
    double value;
};

struct Theory {
    std::vector<ExpectedValue> values;
    std::string unavailable;  // why there are none; empty where there are
};

/// Expected values in scopes conducted, written and published. Given its question's effect
/// the studies of a line are independent and alike, so a line's fate is a sum over how many studies it
/// has and how many of them find; over effects it is integrated by quadrature, over sizes summed.
/// A metric whose denominator is zero is left out, and so is false_discovery_rate_questions where a
/// question may have several lines.
Theory expectations(const Regime& regime);

}  // namespace lacuna
