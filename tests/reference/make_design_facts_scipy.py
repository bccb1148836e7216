#!/usr/bin/python3
"""Makes design_facts_scipy.csv: power of the F test, and of Welch's test, by SciPy. Debian 12: scipy 1.10.1.

F: scipy.stats.ncf. Welch: the share U of the first group's sum of squares is beta, and given it the statistic is a
multiple of Student's t with a fixed critical value: scipy.integrate.quad over U of scipy.stats.nct, with Welch's degrees
of freedom and scipy.stats.t's quantile at every U.
"""
import numpy as np
from scipy import integrate, stats

print("# Made by tests/reference/make_design_facts_scipy.py with SciPy 1.10.1: see there.")
print("# several_means: a = groups, n1 per group, effect f; welch: n1, n2, effect d. Columns upper, lower: chances of either tail.")
print("test,a,n1,n2,effect,alpha,sides,upper,lower")
for g in (2, 3, 4, 7):
    for n in (2, 5, 20, 100):
        for f in (0.0, 0.1, 0.25, 0.4, 1.0):
            for alpha in (0.05, 0.005):
                df1, df2 = g - 1, g * (n - 1)
                c = stats.f.isf(alpha, df1, df2)
                p = stats.ncf.sf(c, df1, df2, g * n * f * f) if f > 0 else alpha
                print(f"several_means,{g},{n},0,{f},{alpha},2,{p:.12g},0")


def welch(n1, n2, d, alpha, sides):
    a, b = n1 - 1, n2 - 1
    df, m = a + b, 1 / np.sqrt(1 / n1 + 1 / n2)

    def bound(u):
        v1, v2 = u * df / a / n1, (1 - u) * df / b / n2
        nu = (v1 + v2) ** 2 / (v1**2 / a + v2**2 / b)
        return stats.t.isf(alpha / sides, nu) * np.sqrt((v1 + v2) / (1 / n1 + 1 / n2))

    law = stats.beta(a / 2, b / 2)
    points = list(law.ppf([1e-9, 1e-4, 0.1, 0.5, 0.9, 1 - 1e-4, 1 - 1e-9]))
    ends = [0, *points, 1]
    up = low = 0.0
    for x, y in zip(ends[:-1], ends[1:]):
        up += integrate.quad(lambda u: law.pdf(u) * stats.nct.sf(bound(u), df, d * m), x, y, epsabs=1e-12, epsrel=1e-11)[0]
        if sides == 2:
            low += integrate.quad(lambda u: law.pdf(u) * stats.nct.cdf(-bound(u), df, d * m), x, y, epsabs=1e-12, epsrel=1e-11)[0]
    return up, low


for n1, n2 in ((4, 4), (4, 10), (10, 5), (30, 12)):
    for d in (0.3, 0.8):
        for alpha, sides in ((0.05, 2), (0.01, 1)):
            up, low = welch(n1, n2, d, alpha, sides)
            print(f"welch,0,{n1},{n2},{d},{alpha},{sides},{up:.12g},{low:.12g}")
