#include "analysis/estimand/spread.h"

#include <algorithm>
#include <cmath>

namespace lacuna {

double sample_quantile(const std::vector<double>& sorted, double p) {
    const double at = p * static_cast<double>(sorted.size() - 1);
    const auto below = static_cast<std::size_t>(at);
    if (below + 1 >= sorted.size()) return sorted.back();
    return sorted[below] + (at - static_cast<double>(below)) * (sorted[below + 1] - sorted[below]);
}

std::optional<Spread> spread_of(std::vector<double> values) {
    std::erase_if(values, [](double value) { return std::isnan(value); });
    if (values.size() < 2) return std::nullopt;
    std::sort(values.begin(), values.end());
    return Spread{sample_quantile(values, 0.05), sample_quantile(values, 0.25), sample_quantile(values, 0.5),
                  sample_quantile(values, 0.75), sample_quantile(values, 0.95)};
}

void SpreadSample::add(double value) {
    if (seen_++ % stride_ != 0) return;
    if (values_.size() == most) {
        for (std::size_t i = 0; i < most / 2; ++i) values_[i] = values_[2 * i];
        values_.resize(most / 2);
        stride_ *= 2;
        // The literature at hand is number most * stride_ / 2, a multiple of the new stride.
    }
    values_.push_back(value);
}

}  // namespace lacuna
