// Group-sequential tests: bounds for looks at accumulating data that together keep a significance level.
// Computed, never tabulated, by the recursion of Armitage, McPherson & Rowe (1969, "Repeated significance tests
// on accumulating data", J. R. Statist. Soc. A 132:235): the density of the score where no look has stopped is
// carried from look to look by Gauss-Legendre quadrature, to about 1e-10.
#pragma once

#include <vector>

namespace lacuna {

enum class BoundaryKind {
    constant_level,          // every look at the level itself, uncorrected
    pocock,                  // one bound for all looks (Pocock 1977, Biometrika 64:191)
    obrien_fleming,          // bounds falling as 1 / sqrt(information) (O'Brien & Fleming 1979, Biometrics 35:549)
    spending_pocock,         // Lan & DeMets (1983, Biometrika 70:659): a log(1 + (e - 1) t) spent by t,
    spending_obrien_fleming  // or 2 (1 - Phi(z_{a/2} / sqrt(t))), a = alpha / sides on each side
};

/// A plan of looks at the shares `information` of the whole, ascending, the last 1.
struct LookSchedule {
    BoundaryKind kind = BoundaryKind::obrien_fleming;
    std::vector<double> information{1.0};
    double alpha = 0.05;  // overall
    int sides = 2;
};

/// K looks at equal steps.
std::vector<double> equal_steps(std::size_t looks);

/// The bound of every look on the z scale: significant at |Z_k| >= c_k (sides 2) or Z_k >= c_k. Throws InputError
/// for alpha outside (0, 1) or shares that do not ascend to 1.
std::vector<double> look_bounds(const LookSchedule& schedule);

/// P(|Z| >= c) or P(Z >= c): the nominal level of a look.
double nominal_level(double bound, int sides);

/// How a study ends, for Z_k normal with mean drift sqrt(t_k), variance 1 and independent increments of the score.
/// `futility`: an interim look with |Z| (sides 2) or Z below it stops the study; -infinity: none does.
struct Crossing {
    std::vector<double> above, below, futile;  // chance that look k is the last: significant either way, or futile
    double predicted = 0.0, reversed = 0.0;    // sums of the first two
    double information = 0.0;                  // expected at the end
};
Crossing crossing(const std::vector<double>& information, const std::vector<double>& bounds, int sides, double drift,
                  double futility = -__builtin_huge_val());

/// The drift with this power (both directions in a two-sided test), which must exceed the level.
double drift_of_power(const std::vector<double>& information, const std::vector<double>& bounds, int sides,
                      double power);

}  // namespace lacuna
