#include "sim/variate/binomial.h"

#include <algorithm>
#include <cmath>

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "sim/variate/binomial.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>
// after highway.h
#include <hwy/contrib/math/math-inl.h>

HWY_BEFORE_NAMESPACE();
namespace lacuna::HWY_NAMESPACE {
namespace hn = hwy::HWY_NAMESPACE;

/// Searches from 0, for n p <= 64 and p <= 1/2, all lanes in step: x is alike for all, so 1 / x is a scalar.
/// `out` counts; columns hold whole vectors.
void SearchFromZero(const double* n, const double* p, const double* u, std::size_t count, double* out) {
    const hn::ScalableTag<double> f;
    const std::size_t lanes = hn::Lanes(f);
    const auto one = hn::Set(f, 1.0);
    for (std::size_t at = 0; at < count; at += lanes) {
        const auto size = hn::LoadU(f, n + at), rate = hn::LoadU(f, p + at);
        const auto odds = hn::Div(rate, hn::Sub(one, rate));
        auto chance = hn::Exp(f, hn::Mul(size, hn::Log1p(f, hn::Neg(rate))));
        auto left = hn::LoadU(f, u + at);
        auto found = hn::Zero(f);
        // A lane goes on while what is left is not below the chance of its x, and x < n.
        auto going = hn::And(hn::Ge(left, chance), hn::Gt(size, hn::Zero(f)));
        for (double x = 1.0; !hn::AllFalse(f, going); x += 1.0) {
            left = hn::Sub(left, chance);
            const auto above = hn::Sub(size, hn::Set(f, x - 1.0));
            chance = hn::Mul(hn::Mul(chance, odds), hn::Mul(above, hn::Set(f, 1.0 / x)));
            found = hn::IfThenElse(going, hn::Set(f, x), found);
            going = hn::And(going, hn::And(hn::Ge(left, chance), hn::Gt(size, hn::Set(f, x))));
        }
        hn::StoreU(found, f, out + at);
    }
}

}  // namespace lacuna::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace lacuna {

HWY_EXPORT(SearchFromZero);

namespace {

constexpr double mean_searched_from_zero = 64.0;

/// log(n!) - (log(sqrt(2 pi n)) + n log n - n): exact sums below 16, Stirling's series above.
double stirling_error(double n) {
    if (n < 16.0) {
        double factorial = 1.0;
        for (double k = 2.0; k <= n; k += 1.0) factorial *= k;
        return n == 0.0 ? 0.0 : std::log(factorial) - (0.5 * std::log(2.0 * M_PI * n) + n * std::log(n) - n);
    }
    const double i = 1.0 / (n * n);
    return (1.0 / 12.0 - i * (1.0 / 360.0 - i * (1.0 / 1260.0 - i * (1.0 / 1680.0 - i / 1188.0)))) / n;
}

/// Deviance x log(x / m) + m - x, without cancellation next to x = m.
double deviance(double x, double m) {
    if (x == 0.0) return m;
    const double v = (x - m) / (x + m);
    if (std::fabs(v) > 0.1) return x * std::log(x / m) + m - x;
    double sum = (x - m) * v, term = 2.0 * x * v;
    for (int j = 3; j < 1000; j += 2) {
        term *= v * v;
        const double next = sum + term / j;
        if (next == sum) break;
        sum = next;
    }
    return sum;
}

/// Outward from the mode, for p <= 1/2 and large n p.
std::uint32_t search_from_mode(std::uint32_t n, double p, double u) {
    const double odds = p / (1.0 - p);
    const auto mode = static_cast<std::uint32_t>((n + 1.0) * p);
    double up = binomial_chance(n, p, mode), down = up;
    if (u < up) return mode;
    u -= up;
    std::uint32_t above = mode, below = mode;
    while (above < n || below > 0) {
        if (above < n) {
            up *= odds * static_cast<double>(n - above) / (above + 1.0);
            ++above;
            if (u < up) return above;
            u -= up;
        }
        if (below > 0) {
            down *= static_cast<double>(below) / (odds * (n - below + 1.0));
            --below;
            if (u < down) return below;
            u -= down;
        }
        if (up == 0.0 && down == 0.0) break;
    }
    return mode;  // u within rounding of 1
}

}  // namespace

double binomial_chance(std::uint32_t n, double p, std::uint32_t x) {
    if (p == 0.0) return x == 0 ? 1.0 : 0.0;
    if (p == 1.0) return x == n ? 1.0 : 0.0;
    if (x == 0) return std::exp(n * std::log1p(-p));
    if (x == n) return std::exp(n * std::log(p));
    const double all = n, k = x, rest = all - k;
    const double exponent = stirling_error(all) - stirling_error(k) - stirling_error(rest) - deviance(k, all * p) -
                            deviance(rest, all * (1.0 - p));
    return std::sqrt(all / (2.0 * M_PI * k * rest)) * std::exp(exponent);
}

void binomials(const std::uint32_t* n, const double* p, const double* u, std::size_t count, std::uint32_t* x) {
    constexpr std::size_t stretch = 512;
    double size[stretch + 8], rate[stretch + 8], uniform[stretch + 8], found[stretch + 8];
    for (std::size_t begin = 0; begin < count; begin += stretch) {
        const std::size_t here = std::min(stretch, count - begin);
        for (std::size_t i = 0; i < here; ++i) {
            const double smaller = std::min(p[begin + i], 1.0 - p[begin + i]);
            const bool small = n[begin + i] * smaller <= mean_searched_from_zero;
            size[i] = small ? n[begin + i] : 0.0;
            rate[i] = smaller;
            uniform[i] = u[begin + i];
        }
        std::fill(size + here, size + here + 8, 0.0);
        std::fill(rate + here, rate + here + 8, 0.0);
        std::fill(uniform + here, uniform + here + 8, 0.0);
        HWY_DYNAMIC_DISPATCH(SearchFromZero)(size, rate, uniform, here, found);
        for (std::size_t i = 0; i < here; ++i) {
            const std::size_t at = begin + i;
            const double smaller = rate[i];
            std::uint32_t count_of = static_cast<std::uint32_t>(found[i]);
            if (n[at] * smaller > mean_searched_from_zero) count_of = search_from_mode(n[at], smaller, u[at]);
            x[at] = p[at] > 0.5 ? n[at] - count_of : count_of;
        }
    }
}

}  // namespace lacuna
#endif
