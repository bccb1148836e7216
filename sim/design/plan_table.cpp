#include "sim/design/plan_table.h"

#include <boost/math/tools/toms748_solve.hpp>
#include <cmath>

#include "sim/design/design.h"

namespace lacuna {

namespace {

constexpr std::uint32_t exact_up_to = 64;
constexpr std::uint32_t nodes_an_octave = 14;

/// The x in (0, most] at which an increasing function passes `target`; infinity if it does not. 0 < guess <= most.
template <class F>
double where_passes(F f, double target, double guess, double most) {
    const auto above = [&](double x) { return f(x) - target; };
    double low = guess, high = guess;
    while (high < most && above(high) < 0.0) high = std::fmin(most, 1.3 * high);
    if (high == most && above(most) < 0.0) return infinity;
    while (above(low) > 0.0 && low > 1e-9) low /= 1.3;  // at 0 the power is alpha, to rounding
    if (low == high || above(low) > 0.0) return low;
    std::uintmax_t steps = 100;
    const auto ends = boost::math::tools::toms748_solve(above, low, high, boost::math::tools::eps_tolerance<double>(50), steps);
    return 0.5 * (ends.first + ends.second);
}

/// Effects end somewhere on some scales.
double largest_effect_of(Test test) {
    if (test == Test::correlation) return 1.0 - 1e-12;
    return test == Test::two_proportions ? 30.0 : 1e6;
}

double exact_least_effect(const Design& design, double target, std::uint32_t n, double guess, double sign = 1.0) {
    const TestPlan plan = describe(design, n);
    return where_passes([&](double effect) { return power(design, plan, sign * effect); }, target, guess,
                        largest_effect_of(design.test));
}

/// Scale on which least effects fall with 1 / sqrt(n): a correlation's is rho / sqrt(1 - rho^2).
double stretched(Test test, double effect) {
    return test == Test::correlation ? effect / std::sqrt(1.0 - effect * effect) : effect;
}
double shrunk(Test test, double x) { return test == Test::correlation ? x / std::sqrt(1.0 + x * x) : x; }

/// e(n) sqrt(n) at some n, and between them by barycentric interpolation in 1 / n (Berrut & Trefethen
/// 2004, SIAM Review 46:501, eq. 4.2).
class Octave {
public:
    Octave(const Design& design, double target, std::uint32_t low, std::uint32_t high, double guess) : test_(design.test) {
        for (std::uint32_t k = 0; k < nodes_an_octave; ++k) {
            const double angle = M_PI * (k + 0.5) / nodes_an_octave;
            const double inverse = 0.5 * (1.0 / low + 1.0 / high) + 0.5 * (1.0 / low - 1.0 / high) * std::cos(angle);
            const auto n = static_cast<std::uint32_t>(std::lround(1.0 / inverse));
            if (!x_.empty() && 1.0 / n == x_.back()) continue;
            guess = exact_least_effect(design, target, n, guess);
            x_.push_back(1.0 / n);
            y_.push_back(stretched(test_, guess) * std::sqrt(static_cast<double>(n)));
        }
        for (std::size_t i = 0; i < x_.size(); ++i) {
            double product = 1.0;
            for (std::size_t j = 0; j < x_.size(); ++j) {
                if (j != i) product *= (x_[i] - x_[j]) / (1.0 / low);
            }
            weight_.push_back(1.0 / product);
        }
    }

    double least_effect(std::uint32_t n) const {
        const double x = 1.0 / n;
        double above = 0.0, below = 0.0;
        for (std::size_t i = 0; i < x_.size(); ++i) {
            if (x == x_[i]) return shrunk(test_, y_[i] / std::sqrt(static_cast<double>(n)));
            above += weight_[i] / (x - x_[i]) * y_[i];
            below += weight_[i] / (x - x_[i]);
        }
        return shrunk(test_, above / below / std::sqrt(static_cast<double>(n)));
    }

private:
    Test test_;
    std::vector<double> x_, y_, weight_;
};

}  // namespace

PlanTable::PlanTable(const Design& design, double target_power, std::uint32_t most, double least_planned)
    : first_(smallest_n(design)) {
    most = std::max(most, first_);
    up_ = direction(design, target_power, most, least_planned, 1.0);
    if (design.test != Test::two_proportions || design.sides == 1) return;
    down_ = direction(design, target_power, most, least_planned, -1.0);
    // Rows are alike for both directions.
    const std::size_t sizes = std::max(up_.least_effect.size(), down_.least_effect.size());
    up_.least_effect.resize(sizes, up_.least_effect.back());
    down_.least_effect.resize(sizes, down_.least_effect.back());
}

PlanTable::Direction PlanTable::direction(const Design& design, double target, std::uint32_t most, double least_planned,
                                          double sign) const {
    Direction its;
    const bool smooth = design.test != Test::two_proportions && design.allocation == std::floor(design.allocation);
    double guess = design.test == Test::correlation ? 0.9 : 2.0;
    std::uint32_t n = first_;
    const auto goes_on = [&] { return n <= most && (its.least_effect.empty() || its.least_effect.back() > least_planned); };
    // A size counts by the least effect up to it: where power is not monotone in n, larger ones may need more.
    const auto add = [&](double effect) {
        its.least_effect.push_back(its.least_effect.empty() ? effect : std::fmin(effect, its.least_effect.back()));
    };
    for (; goes_on() && (n <= exact_up_to || !smooth); ++n) {
        const double effect = exact_least_effect(design, target, n, guess, sign);
        add(effect);
        if (effect < infinity) guess = effect;
    }
    while (goes_on()) {
        const std::uint32_t high = std::min(most, 2 * n);
        const Octave octave(design, target, n, std::max(high, n + 1), its.least_effect.back());
        for (; n <= high; ++n) add(octave.least_effect(n));
    }
    its.make_starts();
    return its;
}

/// n grows about as the inverse square of the effect, so equal steps of that are good places to start.
void PlanTable::Direction::make_starts() {
    const double last = 1.0 / (least_effect.back() * least_effect.back());
    const std::size_t steps = 2 * least_effect.size() + 1;
    starts_per_inverse = static_cast<double>(steps - 1) / last;
    std::uint32_t at = 0;
    for (std::size_t s = 0; s < steps; ++s) {
        const double effect = s == 0 ? infinity : std::sqrt(starts_per_inverse / static_cast<double>(s));
        while (at + 1 < least_effect.size() && least_effect[at] > effect) ++at;
        start.push_back(at);
    }
}

std::uint32_t PlanTable::Direction::position(double effect) const {
    const double size = std::fabs(effect);
    const auto last = static_cast<std::uint32_t>(least_effect.size() - 1);
    if (!(size >= least_effect[last])) return last;
    const double step = starts_per_inverse / (size * size);
    std::uint32_t at = start[std::min(static_cast<std::size_t>(step), start.size() - 1)];
    while (least_effect[at] > size) ++at;
    while (at > 0 && least_effect[at - 1] <= size) --at;
    return at;
}

double noncentrality_of_power(const Design& design, std::uint32_t n, double target) {
    TestPlan plan = describe(design, n);
    plan.noncentrality = 1.0;
    return where_passes([&](double x) { return power(design, plan, x); }, target, 3.0, 1e6);
}

}  // namespace lacuna
