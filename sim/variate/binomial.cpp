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
/// Four vectors at a time, whose chains of dependent operations overlap. `out` counts; columns hold as many
/// whole groups.
struct Search {
    using F = hn::ScalableTag<double>;
    using V = hn::Vec<F>;
    V size, odds, mean, chance, left, found;
    hn::Mask<F> going;
};

HWY_INLINE Search begin(const double* n, const double* p, const double* u) {
    const Search::F f;
    const auto one = hn::Set(f, 1.0);
    Search s;
    const auto rate = hn::LoadU(f, p);
    s.size = hn::LoadU(f, n);
    s.odds = hn::Div(rate, hn::Sub(one, rate));
    s.mean = hn::Mul(s.size, rate);
    s.chance = hn::Exp(f, hn::Mul(s.size, hn::Log1p(f, hn::Neg(rate))));
    s.left = hn::LoadU(f, u);
    s.found = hn::Zero(f);
    s.going = hn::And(hn::Ge(s.left, s.chance), hn::Gt(s.size, hn::Zero(f)));
    return s;
}

/// A lane goes on while what is left of u is not below the chance of its x, and x < n; but not far above the mean
/// where chances have vanished, which only the rounding of u can reach.
HWY_INLINE void step(Search& s, double x, double inverse) {
    const Search::F f;
    const auto now = hn::Set(f, x);
    s.left = hn::Sub(s.left, s.chance);
    const auto factor = hn::Mul(hn::Sub(s.size, hn::Set(f, x - 1.0)), hn::Mul(s.odds, hn::Set(f, inverse)));
    s.chance = hn::Mul(s.chance, factor);
    s.found = hn::IfThenElse(s.going, now, s.found);
    const auto vanished = hn::And(hn::Lt(s.chance, hn::Set(f, 0x1p-80)), hn::Gt(now, s.mean));
    s.going = hn::AndNot(vanished, hn::And(s.going, hn::And(hn::Ge(s.left, s.chance), hn::Gt(s.size, now))));
}

void SearchFromZero(const double* n, const double* p, const double* u, std::size_t count, double* out) {
    const Search::F f;
    const std::size_t lanes = hn::Lanes(f);
    for (std::size_t at = 0; at < count; at += 4 * lanes) {
        Search a = begin(n + at, p + at, u + at);
        Search b = begin(n + at + lanes, p + at + lanes, u + at + lanes);
        Search c = begin(n + at + 2 * lanes, p + at + 2 * lanes, u + at + 2 * lanes);
        Search d = begin(n + at + 3 * lanes, p + at + 3 * lanes, u + at + 3 * lanes);
        const auto any = [&]() HWY_ATTR {
            return !hn::AllFalse(f, hn::Or(hn::Or(a.going, b.going), hn::Or(c.going, d.going)));
        };
        for (double x = 1.0; any(); x += 1.0) {
            const double inverse = 1.0 / x;
            step(a, x, inverse);
            step(b, x, inverse);
            step(c, x, inverse);
            step(d, x, inverse);
        }
        hn::StoreU(a.found, f, out + at);
        hn::StoreU(b.found, f, out + at + lanes);
        hn::StoreU(c.found, f, out + at + 2 * lanes);
        hn::StoreU(d.found, f, out + at + 3 * lanes);
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
    constexpr std::size_t beyond = 32;  // four vectors
    double size[stretch + beyond], rate[stretch + beyond], uniform[stretch + beyond], found[stretch + beyond];
    for (std::size_t begin = 0; begin < count; begin += stretch) {
        const std::size_t here = std::min(stretch, count - begin);
        for (std::size_t i = 0; i < here; ++i) {
            const double smaller = std::min(p[begin + i], 1.0 - p[begin + i]);
            const bool small = n[begin + i] * smaller <= mean_searched_from_zero;
            size[i] = small ? n[begin + i] : 0.0;
            rate[i] = smaller;
            uniform[i] = u[begin + i];
        }
        std::fill(size + here, size + here + beyond, 0.0);
        std::fill(rate + here, rate + here + beyond, 0.0);
        std::fill(uniform + here, uniform + here + beyond, 0.0);
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
