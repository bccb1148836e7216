// Upper tails of the normal, Student's t and the F distribution for columns of values, by vector kernels
// chosen at run time.
//
// Relative error, measured against 40-digit values on every vector target: normal 2e-13; t and F 1e-12,
// for p from 1 down to 1e-300, df and df2 from 1 to 1e7 and infinite, df1 up to 1000. Smaller p lose digits
// with the denormal numbers and end at 0. A result never exceeds 1 (t: 1/2 for t >= 0).
//
// Two-sided p-values are twice the upper tail of |t|. A column of results may be a column of arguments.
// NaN gives NaN, degrees of freedom below 1 do too, and infinite ones give the limiting law.
#pragma once

#include <cstddef>
#include <cstdint>

namespace lacuna {

/// p[i] = P(Z > z[i]), Z standard normal.
void normal_upper_tails(const double* z, std::size_t n, double* p);

/// p[i] = P(T > t[i]), T Student's t with df[i] >= 1 degrees of freedom, whole or not.
void t_upper_tails(const double* t, const double* df, std::size_t n, double* p);

/// p[i] = P(F > f[i]), F with df1 >= 1 (whole) and df2[i] >= 1 (whole or not) degrees of freedom; 1 for
/// f <= 0. The cost grows with df1 / 2. Throws Defect for df1 = 0.
void f_upper_tails(const double* f, std::uint32_t df1, const double* df2, std::size_t n, double* p);

}  // namespace lacuna
