#include "sim/theory/study_law.h"

#include <algorithm>
#include <cmath>

#include "sim/design/design.h"

namespace lacuna {

namespace {

std::vector<double> critical_values(const Design& design, const TestPlan& plan, const std::vector<double>& cuts,
                                    int sides) {
    std::vector<double> critical;
    for (const double p : cuts) critical.push_back(critical_value(design, plan, p, sides));
    return critical;
}

std::size_t passed(const std::vector<double>& critical, double statistic) {
    return static_cast<std::size_t>(
        std::count_if(critical.begin(), critical.end(), [&](double c) { return statistic > c; }));
}

/// A point inside (a, b), either infinite.
double inside(double a, double b) {
    if (std::isinf(a)) return std::isinf(b) ? 0.0 : b - 1.0;
    return std::isinf(b) ? a + 1.0 : 0.5 * (a + b);
}

}  // namespace

StudyLaw::StudyLaw(const Science& science, const LabKind& kind, const std::vector<double>& cuts_two,
                   const std::vector<double>& cuts_one) {
    const IntegerDistribution sizes = size_distribution(science.design, kind.size);
    for (std::size_t i = 0; i < sizes.chance.size(); ++i) {
        if (sizes.chance[i] == 0.0) continue;
        const auto n = static_cast<std::uint32_t>(sizes.first + static_cast<long>(i));
        add_size(science, n, sizes.chance[i], cuts_two, cuts_one);
    }
}

std::size_t StudyLaw::cell_of(const Cell& facts) {
    const auto same = [&](const Cell& cell) {
        return cell.claim == facts.claim && cell.level_two == facts.level_two && cell.level_one == facts.level_one;
    };
    const auto found = std::find_if(blank_.begin(), blank_.end(), same);
    if (found != blank_.end()) return static_cast<std::size_t>(found - blank_.begin());
    blank_.push_back(facts);
    return blank_.size() - 1;
}

void StudyLaw::add_size(const Science& science, std::uint32_t n, double weight, const std::vector<double>& cuts_two,
                        const std::vector<double>& cuts_one) {
    const Design& design = science.design;
    const TestPlan plan = describe(design, n);
    const std::vector<double> two = critical_values(design, plan, cuts_two, 2);
    const std::vector<double> one = critical_values(design, plan, cuts_one, 1);
    // Zero is an end too, so that |estimate| is an estimate or its negative throughout a piece.
    std::vector<double> ends{-infinity, 0.0, plan.critical, infinity};
    if (design.sides == 2) ends.push_back(-plan.critical);
    for (const double c : two) ends.insert(ends.end(), {c, -c});
    ends.insert(ends.end(), one.begin(), one.end());
    std::sort(ends.begin(), ends.end());
    ends.erase(std::unique(ends.begin(), ends.end()), ends.end());

    const double spread = std::hypot(1.0, plan.noncentrality * science.field.heterogeneity);
    std::vector<std::size_t> cells;
    for (std::size_t e = 0; e + 1 < ends.size(); ++e) {
        const double t = inside(ends[e], ends[e + 1]);
        Cell cell{Claim::inconclusive, passed(two, std::fabs(t)), passed(one, t), {}};
        if (t > plan.critical)
            cell.claim = Claim::positive;
        else if (design.sides == 2 && t < -plan.critical)
            cell.claim = Claim::reversed;
        cells.push_back(cell_of(cell));
    }
    for (double& end : ends) {
        end /= spread;
        if (std::isfinite(end)) largest_critical_ = std::max(largest_critical_, std::fabs(end));
    }
    const double noncentrality = plan.noncentrality / spread;
    least_noncentrality_ = std::min(least_noncentrality_, noncentrality);
    most_noncentrality_ = std::max(most_noncentrality_, noncentrality);
    sizes_.push_back(
        {PartitionedT(ends, plan.df), cells, noncentrality, spread * reported_estimate(design, plan, 1.0), weight});
}

// As a function of the noncentrality a chance bends over a width of 1 or more, and is settled once it has
// passed the critical values by 9. So at effect x, studies whose noncentrality l x has passed them do not
// bend any more, and those that have not bend over 1 / l >= x / settled.
std::vector<double> StudyLaw::bends() const {
    constexpr double width = 4.0;  // of a piece, in units of the bend's width
    const double settled = 1.5 * largest_critical_ + 9.0;
    std::vector<double> bends{0.0};
    for (double x = 0.0; x * least_noncentrality_ < settled;) {
        x += width * std::max(1.0 / most_noncentrality_, x / settled);
        bends.insert(bends.end(), {x, -x});
    }
    return bends;
}

std::vector<Cell> StudyLaw::cells(double effect) const {
    std::vector<Cell> cells = blank_;
    for (const Size& size : sizes_) {
        const std::vector<TruncatedT> parts = size.statistic(size.noncentrality * effect);
        for (std::size_t p = 0; p < parts.size(); ++p) {
            const double estimate = size.weight * parts[p].first * size.to_estimate;
            cells[size.cells[p]].sums.add({size.weight * parts[p].chance, estimate, std::fabs(estimate)});
        }
    }
    std::erase_if(cells, [](const Cell& cell) { return !(cell.sums.studies > 0.0); });
    return cells;
}

}  // namespace lacuna
