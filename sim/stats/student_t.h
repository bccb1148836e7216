// Student's t: quantiles for critical values, exact power, and truncated moments of the noncentral t.
// All by way of T = (Z + delta) / sqrt(X / df), Z standard normal, X chi-squared with df degrees of
// freedom (Johnson, Kotz & Balakrishnan 1995, Continuous Univariate Distributions 2, chapter 31).
#pragma once

namespace lacuna {

/// Upper critical value: P(T > c) = tail for the central t. `df` = infinity gives the normal's. A tail of
/// 0 or 1 gives infinity or its negative.
double t_critical(double df, double tail);

/// J(df) = Gamma(df / 2) / (sqrt(df / 2) Gamma((df - 1) / 2)), so that J E[T] is the noncentrality: the
/// exact small-sample correction (Hedges 1981, Journal of Educational Statistics 6:107). df > 1; 1 for
/// infinite df.
double small_sample_correction(double df);

/// P(T > c) and P(T <= c) for the noncentral t; df may be infinity; a whole number
/// where it is small (a fractional power at zero would spoil the quadrature). Absolute error <= 1e-12.
double noncentral_t_upper(double c, double df, double noncentrality);
double noncentral_t_lower(double c, double df, double noncentrality);

/// Chance and partial mean of T over an interval.
struct TruncatedT {
    double chance;  // P(a < T <= b)
    double first;   // E[T; a < T <= b], the partial mean (not divided by the chance)
};

/// Both for a < b, either infinite. df > 1 for the mean to exist on an unbounded interval.
TruncatedT noncentral_t_between(double a, double b, double df, double noncentrality);

}  // namespace lacuna
