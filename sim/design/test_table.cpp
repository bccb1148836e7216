#include "sim/design/test_table.h"

#include <algorithm>
#include <cmath>

#include "sim/base/fault.h"
#include "sim/design/design.h"
#include "sim/design/looks.h"
#include "sim/design/unplanned_looks.h"
#include "sim/stats/student_t.h"
#include "sim/variate/alias.h"
#include "sim/variate/gamma.h"

namespace lacuna {

namespace {

/// The chi-squared variates behind a study of one look (see sim/design/studies.h).
void add_variates(const Design& design, const TestPlan& plan, TestTable& table) {
    const double n1 = plan.size.n1, n2 = plan.size.n2;
    if (design.test == Test::known_variance || design.test == Test::two_proportions) {
        table.variance.add(0.0, 1.0);
    } else if (design.welch) {
        table.variance.add(n1 - 1.0, n1 - 1.0);
    } else {
        table.variance.add(plan.df, plan.df);
    }
    if (design.welch) {
        table.other.add(n2 - 1.0, n2 - 1.0);
    } else if (design.test == Test::correlation) {
        table.other.add(n1 - 1.0, 1.0);
    } else {
        table.other.add(design.test == Test::several_means ? design.groups - 2.0 : 0.0, 1.0);
    }
}

/// What the statistic (the root of an F) is multiplied by.
double to_estimate(const Design& design, const TestPlan& plan) {
    if (design.test == Test::several_means) return std::sqrt(plan.df_effect / plan.participants);
    return (design.estimate == EffectEstimate::g ? plan.correction : 1.0) / plan.noncentrality;
}

/// All of a row but its variates.
void add_facts(const Design& design, const std::vector<Cut>& cuts, const TestPlan& plan, TestTable& table) {
    table.n1.push_back(plan.size.n1);
    table.n2.push_back(plan.size.n2);
    table.participants.push_back(static_cast<std::uint32_t>(plan.participants));
    table.df.push_back(plan.df);
    table.df_effect.push_back(plan.df_effect);
    table.noncentrality.push_back(plan.noncentrality);
    table.size1.push_back(plan.size.n1);
    table.size2.push_back(plan.size.n2);
    table.to_estimate.push_back(to_estimate(design, plan));
    table.correction.push_back(plan.correction);
    table.critical.push_back(plan.critical);
    table.equivalence_critical.push_back(
        design.equivalence.tested() ? equivalence_critical(design, plan) : -infinity);
    for (std::size_t c = 0; c < cuts.size(); ++c) {
        table.cut_critical[c].push_back(critical_value(design, plan, cuts[c].p, cuts[c].sides));
    }
}

void add_row(const Design& design, const std::vector<Cut>& cuts, const TestPlan& plan, TestTable& table) {
    add_facts(design, cuts, plan, table);
    add_variates(design, plan, table);
}

void add_sizes(const Design& design, const std::vector<Cut>& cuts, const SizePlan& size,
               const std::optional<LookPlans>& looks, TestTable& table) {
    const std::uint32_t last = design.looks.count - 1;
    const IntegerDistribution sizes = size_distribution(design, size);
    const AliasTable alias = alias_table(sizes.chance);
    const auto first = static_cast<std::uint32_t>(table.n1.size());
    for (std::size_t i = 0; i < sizes.chance.size(); ++i) {
        const auto n = static_cast<std::uint32_t>(sizes.first + static_cast<long>(i));
        add_row(design, cuts, looks ? looks->plan(n, last) : describe(design, n), table);
        table.keep.push_back(alias.keep[i]);
        table.other_row.push_back(std::uint64_t{first} + alias.other[i]);
    }
    table.kinds.push_back({first, static_cast<std::uint32_t>(sizes.chance.size()), {}, false});
}

/// The least absolute effect that is drawn; 0 where effects of both signs are.
double least_size(const Distribution& effect) {
    const double low = quantile(effect, 0x1p-53), high = quantile(effect, 1.0 - 0x1p-53);
    return low > 0.0 ? low : high < 0.0 ? -high : 0.0;
}

/// Sizes that follow each question's effect: a row for each of them.
void add_planned_sizes(const Design& design, const std::vector<Cut>& cuts, const SizePlan& size,
                       const Distribution& effect, TestTable& table) {
    const auto first = static_cast<std::uint32_t>(table.n1.size());
    const PlanTable plan(design, size.power, size.most, size.effect.optimism * least_size(effect));
    for (std::uint32_t n = plan.first(); n <= plan.most(); ++n) {
        add_row(design, cuts, describe(design, n), table);
        table.keep.push_back(1.0);
        table.other_row.push_back(table.keep.size() - 1);
    }
    table.kinds.push_back({first, plan.most() - plan.first() + 1, plan, false});
}

/// One size, with noise such that an effect of 1 has the power: effects are in units of the planned one.
void add_exact_power(const Design& design, const std::vector<Cut>& cuts, const SizePlan& size, TestTable& table) {
    const auto first = static_cast<std::uint32_t>(table.n1.size());
    TestPlan plan = describe(design, size.n);
    plan.noncentrality = noncentrality_of_power(design, size.n, size.power);
    add_row(design, cuts, plan, table);
    table.keep.push_back(1.0);
    table.other_row.push_back(first);
    table.kinds.push_back({first, 1, {}, true});
}

void add_curves(const Design& design, const std::vector<Cut>& cuts, TestTable& table) {
    double least = infinity, most = 0.0;
    for (std::size_t row = 0; row < table.df.size(); ++row) {
        least = std::fmin(least, std::min(table.n1[row], table.n2[row]) - 1.0);
        most = std::fmax(most, table.df[row]);
    }
    table.curve = CriticalCurve(design.alpha, design.sides, least, most);
    table.equivalence_curve = CriticalCurve(design.equivalence.alpha, 1, least, most);
    for (const Cut& cut : cuts) table.cut_curves.emplace_back(cut.p, cut.sides, least, most);
}

/// Appends a look: the study as it stands then, and the chi-squared of what is new since `before` (null: all is).
void add_look(const Design& design, const std::vector<Cut>& cuts, const TestPlan& plan, const TestPlan* before,
              double futility, TestTable& table) {
    add_facts(design, cuts, plan, table);
    const auto df = [](std::uint32_t n, std::uint32_t had) { return std::fmax(0.0, double(n) - double(had) - 1.0); };
    const StudySize had = before ? before->size : StudySize{0, 0};
    table.variance.add(df(plan.size.n1, had.n1) + df(plan.size.n2, had.n2), 1.0);
    table.other.add(0.0, 1.0);
    table.futility.resize(table.n1.size(), -infinity);
    table.futility.back() = futility;
}

/// Looks of designs that plan them.
void add_planned_looks(const Design& design, const std::vector<Cut>& cuts, const LookPlans& looks, TestTable& table) {
    const std::size_t sizes = table.n1.size();
    for (std::size_t size = 0; size < sizes; ++size) {
        table.looks.first.push_back(static_cast<std::uint32_t>(table.n1.size()));
        table.looks.count.push_back(design.looks.count);
        TestPlan before{};
        for (std::uint32_t k = 0; k < design.looks.count; ++k) {
            const TestPlan plan = looks.plan(table.n1[size], k);
            add_look(design, cuts, plan, k == 0 ? nullptr : &before, looks.futility(k, plan.df), table);
            before = plan;
        }
    }
}

/// Every look of every size is a row.
void refuse_too_many(std::size_t rows) {
    if (rows <= std::size_t{1} << 22) return;
    Fault fault;
    fault.key = "lab.practices.optional_stopping";
    fault.message = "the looks of all sizes are more than the 4194304 that are tabulated";
    fault.remedy = "raise batch, or let sizes spread less";
    throw InputError(std::move(fault));
}

/// Looks of studies that stop when they find, for every size of a kind; sizes in absolute numbers share them.
LookRows add_unplanned_looks(const Design& design, const std::vector<Cut>& cuts, const OptionalStopping& stopping,
                             TestTable::Kind kind, std::size_t sizes, TestTable& table) {
    LookRows rows;
    rows.first.resize(sizes);
    rows.count.resize(sizes);
    for (std::uint32_t s = 0; s < kind.sizes; ++s) {
        const std::size_t size = kind.first_row + s;
        if (s > 0 && !stopping.relative) {
            rows.first[size] = rows.first[kind.first_row];
            rows.count[size] = rows.count[kind.first_row];
            continue;
        }
        rows.first[size] = static_cast<std::uint32_t>(table.n1.size());
        TestPlan before{};
        for (const std::uint32_t n : look_sizes(stopping, table.n1[size], smallest_n(design))) {
            const TestPlan plan = describe(design, n);
            add_look(design, cuts, plan, rows.count[size]++ == 0 ? nullptr : &before, -infinity, table);
            before = plan;
        }
        refuse_too_many(table.n1.size());
    }
    return rows;
}

}  // namespace

void ChiColumns::add(double df, double divisor) {
    if (df < 2.0) {
        c.push_back(df == 1.0 ? -1.0 : 0.0);
        per_cube.push_back(df == 1.0 ? 1.0 / divisor : 0.0);
        return;
    }
    const GammaShape shape = gamma_shape(df / 2.0);
    c.push_back(shape.c);
    per_cube.push_back(2.0 * shape.d / divisor);  // chi-squared is twice a gamma(df / 2)
}

TestTable test_table(const Science& science, const std::vector<Cut>& cuts) {
    TestTable table;
    table.cut_critical.resize(cuts.size());
    const Design& design = science.design;
    const std::optional<LookPlans> looks = design.looks.count > 1 ? std::optional<LookPlans>(design) : std::nullopt;
    for (const LabKind& kind : science.labs) {
        if (kind.size.kind == SizePlan::Kind::exact_power)
            add_exact_power(design, cuts, kind.size, table);
        else if (kind.size.for_each_question())
            add_planned_sizes(design, cuts, kind.size, science.field.effect, table);
        else
            add_sizes(design, cuts, kind.size, looks, table);
    }
    if (design.welch) add_curves(design, cuts, table);
    if (looks) add_planned_looks(design, cuts, *looks, table);
    const std::size_t sizes = table.n1.size();
    for (std::size_t k = 0; k < science.labs.size(); ++k) {
        const Practices& practices = science.labs[k].practices;
        table.unplanned_looks.emplace_back();
        if (!practices.any()) continue;
        table.unplanned_looks.back() =
            add_unplanned_looks(design, cuts, practices.optional_stopping, table.kinds[k], sizes, table);
    }
    return table;
}

TestPlan TestTable::plan(std::size_t row) const {
    return {{n1[row], n2[row]},  static_cast<double>(participants[row]), df[row], noncentrality[row],
            correction[row], critical[row], df_effect[row]};
}

}  // namespace lacuna
