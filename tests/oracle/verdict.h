// Stochastic verdicts: an observed mean against an expected value, in standard errors.
#pragma once

#include <cmath>
#include <cstddef>

namespace lacuna::oracle {

/// Four standard errors: a correct program fails one such check in 16,000 (two-sided normal tail), and
/// with fixed seeds it fails never or always.
inline constexpr double bound_in_standard_errors = 4.0;

/// (observed - expected) / standard error.
inline double z_score(double observed, double expected, double standard_error) {
    return (observed - expected) / standard_error;
}

/// Standard error of a share of `n` independent trials with chance p.
inline double share_error(double p, double n) { return std::sqrt(p * (1.0 - p) / n); }

/// Mean and variance of a sample, one pass.
class Sample {
public:
    void add(double x) {
        ++n_;
        const double delta = x - mean_;
        mean_ += delta / static_cast<double>(n_);
        squares_ += delta * (x - mean_);
    }
    double mean() const { return mean_; }
    double variance() const { return squares_ / static_cast<double>(n_ - 1); }
    double standard_error() const { return std::sqrt(variance() / static_cast<double>(n_)); }
    std::size_t size() const { return n_; }

private:
    std::size_t n_ = 0;
    double mean_ = 0.0, squares_ = 0.0;
};

/// Largest distance between the sorted sample's distribution and `cdf` times sqrt(n): above 2.2 with a
/// chance of 1.2e-4 under equality (Kolmogorov 1933, limiting distribution 2 exp(-2 x^2)).
template <class Sorted, class Cdf>
double kolmogorov(const Sorted& sorted, Cdf cdf) {
    double distance = 0.0;
    const double n = static_cast<double>(sorted.size());
    for (std::size_t i = 0; i < sorted.size(); ++i) {
        const double at = cdf(sorted[i]);
        distance =
            std::fmax(distance, std::fmax(at - static_cast<double>(i) / n, static_cast<double>(i + 1) / n - at));
    }
    return distance * std::sqrt(n);
}
inline constexpr double kolmogorov_bound = 2.2;

}  // namespace lacuna::oracle
