// Interim looks of a study: their sizes, and the bounds that its statistic must pass.
#pragma once

#include <cstdint>
#include <vector>

#include "sim/design/tails.h"
#include "sim/design/test_plan.h"
#include "sim/model/scenario.h"
#include "sim/sequential/boundaries.h"

namespace lacuna {

/// The looks of a design. Bounds are found once (sim/sequential), for looks at equal steps of information, which
/// sizes that do not divide by K meet to rounding only; a Student's t at look k is judged at the nominal level of the z bound (common practice: Jennison & Turnbull
/// 2000, Group Sequential Methods, section 3.8; cited from memory).
class LookPlans {
public:
    explicit LookPlans(const Design& design);

    /// A study of n observations (per group) at the end, as it stands at look k (from 0): n (k + 1) / K of
    /// them, rounded to nearest.
    TestPlan plan(std::uint32_t n, std::uint32_t look) const;

    /// T (in absolute value if two-sided) below which look k of a study on `df` stops for futility.
    double futility(std::uint32_t look, double df) const;

    /// Chances of the two kinds of significant results of a study of n observations (per group) at the end, for Z
    /// with this drift there, its looks where rounding puts them: exact where the variance is known.
    Tails tails(std::uint32_t n, double drift) const;

private:
    Design design_;  // without its looks
    Looks looks_;
    std::vector<double> information_, bound_;  // per look: share of the whole; bound on the z scale
};

}  // namespace lacuna
