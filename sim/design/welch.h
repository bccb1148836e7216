// Welch's test of two means: Student's form with the variances apart, on Satterthwaite's degrees of freedom.
#pragma once

#include <cstdint>
#include <vector>

#include "sim/design/tails.h"

namespace lacuna {

/// Critical values of Student's t for one chance, as a function of real degrees of freedom: c(df) is smooth in
/// x = 1 / df, so a Chebyshev series on the range of x gives it to 1e-11 or better.
class CriticalCurve {
public:
    CriticalCurve() = default;

    /// For `least` <= df <= `most`, least >= 1.
    CriticalCurve(double alpha, int sides, double least, double most);

    double operator()(double df) const {
        double b = 0.0, last = 0.0;  // Clenshaw 1955, MTAC 9:118
        const double x = (1.0 / df - middle_) * stretch_;
        for (std::size_t k = coefficient_.size(); k-- > 1;) {
            const double next = coefficient_[k] + 2.0 * x * b - last;
            last = b;
            b = next;
        }
        return coefficient_[0] + x * b - last;
    }

    /// For vector code: the series is in (1 / df - middle) stretch.
    const std::vector<double>& coefficients() const { return coefficient_; }
    double middle() const { return middle_; }
    double stretch() const { return stretch_; }

private:
    std::vector<double> coefficient_{0.0};
    double middle_ = 0.0, stretch_ = 0.0;  // of 1 / df
};

namespace welch {

inline constexpr std::uint32_t smallest_n = 3;  // per group

/// Chances of a significant result at the standardised difference d of groups with equal variances: given how
/// the total sum of squares divides between the groups (a beta variate), the statistic is a multiple of a
/// noncentral t on n1 + n2 - 2 degrees of freedom and the critical value is fixed; that is averaged over the
/// division. To 1e-9.
Tails tails(double alpha, int sides, std::uint32_t n1, std::uint32_t n2, double d);

}  // namespace welch

}  // namespace lacuna
