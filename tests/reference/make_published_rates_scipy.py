#!/usr/bin/python3
"""Writes published_rates_scipy.csv: the field of configs/published-rates.toml by quadrature in SciPy.

Usage: make_published_rates_scipy.py > published_rates_scipy.csv    (needs python3-scipy)
30 % real questions with d = 0.4; n per group floor(lognormal(median 25, sdlog 0.5) kept in 8..200); two-sided
alpha .05; t > critical value is published at .95, everything else at .20.
"""
import math

import scipy
from scipy import integrate, special, stats

D, RATE, ALPHA, HIT, REST = 0.4, 0.3, 0.05, 0.95, 0.20
size = stats.lognorm(0.5, scale=25)


def weight(n):
    if n == 200:
        return size.sf(200)
    return size.cdf(n + 1) - (size.cdf(n) if n > 8 else 0.0)


def over_s(df, f):
    """E[f(S)], S = sqrt(chi2_df / df)."""
    log_c = math.log(2) + df / 2 * math.log(df / 2) - special.gammaln(df / 2)
    density = lambda s: math.exp(log_c + (df - 1) * math.log(s) - df * s * s / 2) if s > 0 else 0.0
    sd = 1 / math.sqrt(2 * df)
    low = max(0.0, 1 - 11 * sd)
    return sum(integrate.quad(lambda s: density(s) * f(s), a, b, epsabs=1e-15, epsrel=1e-12)[0]
               for a, b in ((low, 1.0), (1.0, 1 + 13 * sd)))


power = positive_sum = report_sum = 0.0
for n in range(8, 201):
    df, delta = 2 * n - 2, D * math.sqrt(n / 2)
    c = special.stdtrit(df, 1 - ALPHA / 2)
    for _ in range(3):  # Newton steps on SciPy's quantile, which errs by 1e-9
        c += (stats.t.sf(c, df) - ALPHA / 2) / stats.t.pdf(c, df)
    up = over_s(df, lambda s: special.ndtr(delta - c * s))
    first = over_s(df, lambda s: (delta * special.ndtr(delta - c * s) + stats.norm.pdf(c * s - delta)) / s)
    mean = delta * math.sqrt(df / 2) * math.exp(special.gammaln((df - 1) / 2) - special.gammaln(df / 2))
    w, to_d = weight(n), math.sqrt(2 / n)
    power += w * up
    positive_sum += w * to_d * first
    report_sum += w * to_d * (HIT * first + REST * (mean - first))
type1 = ALPHA / 2
rows = {
    ("power", "conducted"): power,
    ("type1_error", "conducted"): type1,
    ("false_discovery_rate", "published"): (1 - RATE) * type1 / ((1 - RATE) * type1 + RATE * power),
    ("effect_inflation", "published"): positive_sum / power / D,
    ("effect_inflation_reports", "published"): report_sum / (HIT * power + REST * (1 - power)) / D,
    ("publication_rate", "published"): sum(s * (HIT * p + REST * (1 - p)) for s, p in ((RATE, power), (1 - RATE, type1))),
    ("false_nonfinding_rate", "published"): RATE * (1 - power) / (RATE * (1 - power) + (1 - RATE) * (1 - type1)),
    ("wrong_sign_rate", "published"): 0.0,
}
print("# Expected values of the field of configs/published-rates.toml, findings = predicted.")
print(f"# Source: SciPy {scipy.__version__} quadrature, make_published_rates_scipy.py. Tolerance 1e-9.")
print("metric,scope,value")
for (metric, scope), value in rows.items():
    print(f"{metric},{scope},{value!r}")
