#!/usr/bin/env python3
"""Each study design as a methodologist would write it with NumPy: vectorised, in blocks that fit the cache.

Usage: designs_numpy.py DESIGN [STUDIES]    prints the design, nanoseconds per study, and the share of positives
"""
import sys
import time

import numpy as np
from scipy import stats

rng = np.random.default_rng(1)
N, ALPHA, BLOCK = 24, 0.05, 100_000


def pooled(m, n1, n2, d):
    df = n1 + n2 - 2
    t = (rng.standard_normal(m) + d * np.sqrt(n1 * n2 / (n1 + n2))) / np.sqrt(rng.chisquare(df, m) / df)
    return t, t * np.sqrt(1 / n1 + 1 / n2), T[df]


def two_means(m):
    t, d, c = pooled(m, N, N, 0.4)
    return t, d, np.where(t > c, 1, np.where(t < -c, 2, 0))


def unequal_means(m):
    t, d, c = pooled(m, N, 2 * N, 0.4)
    return t, d, np.where(t > c, 1, np.where(t < -c, 2, 0))


def one_mean(m):
    t = (rng.standard_normal(m) + 0.4 * np.sqrt(N)) / np.sqrt(rng.chisquare(N - 1, m) / (N - 1))
    return t, t / np.sqrt(N), np.where(t > T[N - 1], 1, np.where(t < -T[N - 1], 2, 0))


def known_variance(m):
    z = rng.standard_normal(m) + 0.4 * np.sqrt(N)
    return z, z / np.sqrt(N), np.where(z > Z, 1, np.where(z < -Z, 2, 0))


def welch(m):
    difference = rng.standard_normal(m) * np.sqrt(2 / N) + 0.4
    v1, v2 = rng.chisquare(N - 1, m) / (N - 1), rng.chisquare(N - 1, m) / (N - 1)
    a, b = v1 / N, v2 / N
    t = difference / np.sqrt(a + b)
    df = (a + b) ** 2 / (a**2 / (N - 1) + b**2 / (N - 1))
    p = 2 * stats.t.sf(np.abs(t), df)
    return t, difference / np.sqrt((v1 + v2) / 2), np.where(p < ALPHA, np.where(t > 0, 1, 2), 0)


def correlation(m):
    rho = 0.4
    theta = rho / np.sqrt(1 - rho**2)
    t = (theta * np.sqrt(rng.chisquare(N - 1, m)) + rng.standard_normal(m)) / np.sqrt(rng.chisquare(N - 2, m) / (N - 2))
    return t, t / np.sqrt(t**2 + N - 2), np.where(t > T[N - 2], 1, np.where(t < -T[N - 2], 2, 0))


def several_means(m):
    g, f = 4, 0.25
    df1, df2 = g - 1, g * (N - 1)
    F = rng.noncentral_chisquare(df1, g * N * f**2, m) / df1 / (rng.chisquare(df2, m) / df2)
    return F, np.sqrt(df1 * F / (g * N)), (F > stats.f.isf(ALPHA, df1, df2)).astype(int)


def two_proportions(m):
    p2 = 0.3
    p1 = 1 / (1 + np.exp(-(np.log(p2 / (1 - p2)) + 0.8)))
    x1, x2 = rng.binomial(N, p1, m), rng.binomial(N, p2, m)
    pooled_rate = (x1 + x2) / (2 * N)
    with np.errstate(invalid="ignore", divide="ignore"):
        z = (x1 - x2) / N / np.sqrt(pooled_rate * (1 - pooled_rate) * 2 / N)
    z = np.nan_to_num(z)
    h = np.where((x1 == 0) | (x2 == 0) | (x1 == N) | (x2 == N), 0.5, 0.0)
    a, b, c, d = x1 + h, N - x1 + h, x2 + h, N - x2 + h
    ratio, error = np.log(a * d / (b * c)), np.sqrt(1 / a + 1 / b + 1 / c + 1 / d)
    return z, ratio + 0 * error, np.where(z > Z, 1, np.where(z < -Z, 2, 0))


def equivalence(m):
    m_, s = np.sqrt(N / 2), np.sqrt(rng.chisquare(2 * N - 2, m) / (2 * N - 2))
    numerator = rng.standard_normal(m) + 0.1 * m_
    t = numerator / s
    claim = np.where(t > T[2 * N - 2], 1, np.where(t < -T[2 * N - 2], 2, 0))
    claim[(claim == 0) & (np.abs(numerator) < 0.8 * m_ - T1[2 * N - 2] * s)] = 3
    return t, t / m_, claim


def looks(m):
    """Three looks at two means with the critical values of O'Brien and Fleming; cumulative sums by group."""
    K, n = 3, N // 3
    x = rng.standard_normal((m, K, 2, n))
    x[:, :, 0] += 0.4
    total = np.cumsum(x.sum(3), 1)
    squares = np.cumsum((x**2).sum(3), 1)
    size = n * np.arange(1, K + 1)
    ss = (squares - total**2 / size[:, None]).sum(2)
    t = (total[:, :, 0] - total[:, :, 1]) / size / np.sqrt(ss / (2 * size - 2) * 2 / size)
    critical = stats.t.isf(stats.norm.sf(2.0040 * np.sqrt(K / np.arange(1, K + 1))), 2 * size - 2)
    passed = np.abs(t) > critical
    at = np.where(passed.any(1), passed.argmax(1), K - 1)
    t = t[np.arange(m), at]
    return t, t * np.sqrt(2 / size[at]), np.where(np.abs(t) > critical[at], np.where(t > 0, 1, 2), 0)


design = globals()[sys.argv[1].replace("-", "_")]
studies = int(float(sys.argv[2])) if len(sys.argv) > 2 else 2_000_000
T = stats.t.isf(ALPHA / 2, np.arange(1, 200))
T = np.concatenate(([np.inf], T))
T1 = np.concatenate(([np.inf], stats.t.isf(ALPHA, np.arange(1, 200))))
Z = stats.norm.isf(ALPHA / 2)
design(BLOCK)
positives = 0
start = time.perf_counter()
for _ in range(studies // BLOCK):
    positives += np.count_nonzero(design(BLOCK)[2] == 1)
elapsed = time.perf_counter() - start
print(f"{sys.argv[1]} {1e9 * elapsed / (studies // BLOCK * BLOCK):.2f} {positives / (studies // BLOCK * BLOCK):.5f}")
