// What a study of a given size is and can show, before any data.
#pragma once

#include <cstdint>

namespace lacuna {

/// Observations per group; n2 = 0 for designs with one group.
struct StudySize {
    std::uint32_t n1, n2;
    bool operator==(const StudySize&) const = default;
};

struct TestPlan {
    StudySize size;
    double participants;   // of all groups
    double df;             // degrees of freedom; infinity where the variance is known
    double noncentrality;  // of the statistic, per unit of effect; an estimate is the statistic over it
    double correction;     // small-sample correction J(df) from d to g; 1 where there is none
    double critical;       // significant: statistic > critical, or < -critical in a two-sided test
    double df_effect = 1;  // numerator degrees of freedom of an F statistic
};

}  // namespace lacuna
