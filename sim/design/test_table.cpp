#include "sim/design/test_table.h"

#include "sim/design/design.h"
#include "sim/variate/alias.h"
#include "sim/variate/gamma.h"

namespace lacuna {

namespace {

void add_row(const Design& design, const std::vector<Cut>& cuts, std::uint32_t n, TestTable& table) {
    const TestPlan plan = describe(design, n);
    table.n1.push_back(plan.size.n1);
    table.n2.push_back(plan.size.n2);
    table.participants.push_back(plan.size.n1 + plan.size.n2);
    table.df.push_back(plan.df);
    table.noncentrality.push_back(plan.noncentrality);
    table.to_estimate.push_back(reported_estimate(design, plan, 1.0));
    table.to_corrected.push_back(plan.correction / plan.noncentrality);
    table.critical.push_back(plan.critical);
    const bool variance_known = design.test == Test::known_variance;
    const GammaShape shape = gamma_shape(variance_known ? 1.0 : plan.df / 2.0);
    table.gamma_c.push_back(shape.c);
    // Chi-squared over df is 2 gamma(df / 2) / df = (2 d / df) (1 + c x)^3.
    table.variance_per_cube.push_back(variance_known ? 1.0 : 2.0 * shape.d / plan.df);
    for (std::size_t c = 0; c < cuts.size(); ++c) {
        table.cut_critical[c].push_back(critical_value(design.test, plan.df, cuts[c].p, cuts[c].sides));
    }
}

void add_kind(const Design& design, const std::vector<Cut>& cuts, const SizePlan& size, TestTable& table) {
    const IntegerDistribution sizes = size_distribution(design, size);
    const AliasTable alias = alias_table(sizes.chance);
    const auto first = static_cast<std::uint32_t>(table.n1.size());
    for (std::size_t i = 0; i < sizes.chance.size(); ++i) {
        add_row(design, cuts, static_cast<std::uint32_t>(sizes.first + static_cast<long>(i)), table);
        table.keep.push_back(alias.keep[i]);
        table.other.push_back(std::uint64_t{first} + alias.other[i]);
    }
    table.kinds.push_back({first, static_cast<std::uint32_t>(sizes.chance.size())});
}

}  // namespace

TestTable test_table(const Science& science, const std::vector<Cut>& cuts) {
    TestTable table;
    table.cut_critical.resize(cuts.size());
    for (const LabKind& kind : science.labs) add_kind(science.design, cuts, kind.size, table);
    return table;
}

double TestTable::standard_error(const Design& design, std::size_t row, double statistic) const {
    const TestPlan plan{{n1[row], n2[row]}, static_cast<double>(participants[row]), df[row], noncentrality[row],
                        to_corrected[row] * noncentrality[row], critical[row]};
    return reported_standard_error(design, plan, statistic);
}

}  // namespace lacuna
