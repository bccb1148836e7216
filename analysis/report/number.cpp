#include "analysis/report/number.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace lacuna {

const std::string missing_sign = "–";

namespace {

/// Decimals that show `size` to `digits` significant digits; negative places are left at 0.
int decimals_for(double size, int digits) {
    if (!(size > 0.0) || !std::isfinite(size)) return 0;
    const int magnitude = static_cast<int>(std::floor(std::log10(size)));
    return std::clamp(digits - 1 - magnitude, 0, 12);
}

std::string fixed(double value, int decimals) {
    std::string text = fmt::format("{:.{}f}", value, decimals);
    const bool zero = text.find_first_of("123456789") == std::string::npos;
    return zero && text.front() == '-' ? text.substr(1) : text;
}

bool is_extreme(double value) {
    const double size = std::fabs(value);
    return !std::isfinite(value) || size >= 1e9 || (size > 0.0 && size < 1e-4);
}

}  // namespace

std::string show_number(double value, int digits) {
    if (is_extreme(value)) return fmt::format("{:.{}g}", value, digits);
    return fixed(value, decimals_for(std::fabs(value), digits));
}

std::string show(const Estimate& estimate) {
    if (!estimate.value) return missing_sign;
    const double value = *estimate.value;
    if (!estimate.mcse) return show_number(value, 4);
    if (*estimate.mcse == 0.0) return fmt::format("{} ± 0", value == 0.0 ? "0" : show_number(value, 4));
    if (*estimate.mcse >= 1e9 || *estimate.mcse < 1e-6) {
        const double ratio = std::max(1.0, std::fabs(value) / *estimate.mcse);
        return fmt::format("{:.{}g} ± {:.2g}", value, 2 + static_cast<int>(std::log10(ratio)), *estimate.mcse);
    }
    const int decimals = decimals_for(*estimate.mcse, 2);
    return fmt::format("{} ± {}", fixed(value, decimals), fixed(*estimate.mcse, decimals));
}

std::string show_range(const std::optional<Spread>& spread) {
    if (!spread) return "";
    const double distance = spread->p95 - spread->p05;
    if (distance == 0.0) return fmt::format("all {}", spread->p05 == 0.0 ? "0" : show_number(spread->p05, 3));
    if (is_extreme(spread->p95)) return fmt::format("{:.3g} to {:.3g}", spread->p05, spread->p95);
    const int decimals = std::min(decimals_for(distance, 2), 6);
    return fmt::format("{} to {}", fixed(spread->p05, decimals), fixed(spread->p95, decimals));
}

std::string show_count(double value) {
    if (!std::isfinite(value) || std::fabs(value) >= 9e18) return show_number(value, 4);
    std::string digits = std::to_string(static_cast<long long>(std::llround(value)));
    const std::size_t start = digits.front() == '-' ? 1 : 0;
    for (std::size_t at = digits.size(); at > start + 3;) digits.insert(at -= 3, 1, ',');
    return digits;
}

std::string exact_number(std::optional<double> value) {
    if (!value || !std::isfinite(*value)) return "";
    return fmt::format("{}", *value);
}

}  // namespace lacuna
