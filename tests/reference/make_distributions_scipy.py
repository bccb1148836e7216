#!/usr/bin/python3
"""Writes distributions_scipy.csv: truncated and clamped distributions by SciPy (needs python3-scipy).

Usage: make_distributions_scipy.py > distributions_scipy.csv
"""
import math

import numpy as np
import scipy
from scipy import integrate, stats

INF = math.inf
CASES = [  # family, first, second, min, max, clamp
    ("normal", 0.35, 0.15, -INF, INF, 0),
    ("normal", 0.35, 0.15, 0.05, INF, 0),
    ("normal", 0.35, 0.15, 0.05, INF, 1),
    ("normal", 0, 1, 5, 8, 0),
    ("normal", 20, 8, 8, 30, 1),
    ("normal", 20, 8, 8.5, 30.5, 0),
    ("half_normal", 0.5, 0, -INF, INF, 0),
    ("half_normal", 0.5, 0, 0.2, 1.5, 0),
    ("lognormal", 25, 0.5, 8, 200, 1),
    ("lognormal", 24, 0.5, 8, 200, 0),
    ("lognormal", 2, 1.2, -INF, INF, 0),
    ("gamma", 0.4, 2.5, -INF, INF, 0),
    ("gamma", 30, 0.7, 4, 120, 0),
    ("gamma", 0.3, 0.5, -INF, 0.9, 1),
    ("beta", 0.3, 8, -INF, INF, 0),
    ("beta", 0.4, 1.5, 0.1, 0.95, 0),
    ("uniform", -1, 3, -INF, INF, 0),
    ("uniform", 4.2, 19.7, 5, 15, 1),
    ("poisson", 3.5, 0, -INF, INF, 0),
    ("poisson", 3.5, 0, 1, 9, 0),
    ("poisson", 40, 0, 30, 50, 1),
]


def law_of(family, a, b):
    return {
        "normal": lambda: stats.norm(a, b),
        "half_normal": lambda: stats.halfnorm(scale=a),
        "lognormal": lambda: stats.lognorm(b, scale=a),
        "gamma": lambda: stats.gamma(b, scale=a / b),
        "beta": lambda: stats.beta(a * b, (1 - a) * b),
        "uniform": lambda: stats.uniform(a, b - a),
        "poisson": lambda: stats.poisson(a),
    }[family]()


def mass(law, low, high, discrete):
    """P(low <= X <= high) by the tail that is small; low excluded from nothing (atoms count)."""
    if low > high:
        return 0.0
    before = math.ceil(low) - 1 if discrete and math.isfinite(low) else low
    if law.cdf(before) > 0.5:
        return law.sf(before) - law.sf(high)
    return law.cdf(high) - law.cdf(before)


def pieces(law, low, high):
    cuts = [law.ppf(p) for p in (1e-30, 1e-12, 1e-6, 1e-3, 0.05, 0.5)] + [law.isf(p) for p in (0.05, 1e-3, 1e-6, 1e-12, 1e-30)]
    a, b = max(low, law.support()[0]), min(high, law.support()[1])
    return [a] + sorted({c for c in cuts if a < c < b}) + [b if math.isfinite(b) else np.inf]


def moment(law, low, high, power, about, discrete):
    """E[(X - about)^power; low <= X <= high]."""
    f = lambda x: (x - about) ** power
    if discrete:
        x = np.arange(max(0, math.ceil(low) if math.isfinite(low) else 0), min(high, 400) + 1)
        return float(np.sum(law.pmf(x) * f(x)))
    ends = pieces(law, low, high)
    return math.fsum(integrate.quad(lambda x: f(x) * law.pdf(x), s, t, epsabs=0, epsrel=1e-12, limit=400)[0]
                     for s, t in zip(ends, ends[1:]))


def rows(case):
    family, a, b, low, high, clamp = case
    law, discrete = law_of(family, a, b), family == "poisson"
    inside = 1.0 if clamp else mass(law, low, high, discrete)
    strict_low = low if not discrete or not math.isfinite(low) else low + (1 if clamp else 0)
    strict_high = high if not discrete or not math.isfinite(high) else high - (1 if clamp else 0)
    atom_low = law.cdf(low) if clamp and math.isfinite(low) else 0.0
    atom_high = (law.sf(high - 1) if discrete else law.sf(high)) if clamp and math.isfinite(high) else 0.0

    def expect(power, about):
        total = moment(law, strict_low, strict_high, power, about, discrete)
        if atom_low:
            total += atom_low * (low - about) ** power
        if atom_high:
            total += atom_high * (high - about) ** power
        return total / inside

    def cdf(x):
        if x < low:
            return 0.0
        if x >= high:
            return 1.0
        return law.cdf(x) if clamp else mass(law, low, x, discrete) / inside

    def chance_of(n, offset):
        start, end = n - offset, n + 1 - offset
        if discrete:
            return cdf(n) - cdf(n - 1)
        a_, b_ = max(start, low), min(end, high)
        value = mass(law, a_, b_, False) if b_ > a_ else 0.0
        if atom_low and start <= low < end:
            value += atom_low
        if atom_high and start <= high < end:
            value += atom_high
        return value / inside

    yield "mass", "", inside
    mean = expect(1, 0.0)
    yield "mean", "", mean
    yield "variance", "", expect(2, mean)
    span = [law.ppf(p) for p in (0.001, 0.1, 0.5, 0.9, 0.999)]
    span += [x for x in (low, high) if math.isfinite(x)]
    if math.isfinite(low) and math.isfinite(high):
        span += [low + (high - low) * f for f in (0.1, 0.37, 0.8)]
    for x in span:
        x = float(f"{x:.6g}")
        yield "cdf", x, cdf(x)
    if not discrete:
        for p in (0.01, 0.3, 0.5, 0.85, 0.999):
            if clamp:
                q = min(max(law.ppf(p), low), high)
            elif law.cdf(low) > 0.5:
                q = law.isf(law.sf(high) + (1 - p) * inside)
            else:
                q = law.ppf(law.cdf(low) + p * inside)
            yield "quantile", p, q
    else:
        for p in (0.01, 0.3, 0.5, 0.85, 0.999):
            yield "quantile", p, next(n for n in range(500) if cdf(n) >= p)
    if span[4] - span[0] > 5:
        for n in sorted({math.floor(x) for x in span}):
            yield "rounded", n, chance_of(n, 0.5)
            yield "rounded_down", n, chance_of(n, 0.0)


print("# Distributions as lacuna defines them (parameters in the order of sim/stats/distribution.h; clamp 1: draws outside move to the bound).")
print(f"# Source: SciPy {scipy.__version__} distributions and quad, make_distributions_scipy.py. Tolerance 1e-9 relative (cdf: 1e-12 absolute).")
print("family,first,second,min,max,clamp,quantity,argument,value")
for case in CASES:
    for quantity, argument, value in rows(case):
        print(*case, quantity, argument, repr(float(value)), sep=",")
