#include "sim/design/p_values.h"

#include <algorithm>
#include <cmath>

#include "sim/tail/tails.h"

namespace lacuna {

std::vector<double> p_values(const Design& design, const TestTable& table, const Studies& studies) {
    const std::size_t count = studies.claim.size();
    std::vector<double> statistic(studies.statistic.begin(), studies.statistic.begin() + static_cast<std::ptrdiff_t>(count));
    std::vector<double> df(count), p(count);
    for (std::size_t s = 0; s < count; ++s) df[s] = studies.df.empty() ? table.df[studies.row[s]] : studies.df[s];
    if (design.test == Test::several_means) {
        f_upper_tails(statistic.data(), design.groups - 1, df.data(), count, p.data());
        return p;
    }
    if (design.sides == 2) {
        for (double& t : statistic) t = std::fabs(t);
    }
    t_upper_tails(statistic.data(), df.data(), count, p.data());
    if (design.sides == 2) {
        for (double& x : p) x *= 2.0;
    }
    return p;
}

}  // namespace lacuna
