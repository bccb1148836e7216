#!/usr/bin/env python3
"""Prints the coefficients in sim/tail/erfcx-inl.h and sim/tail/half_beta-inl.h (needs mpmath).

Usage: make_tail_coefficients_mpmath.py
"""
import mpmath as mp

mp.mp.dps = 40
CENTRE, DEGREE, TERMS = 3, 21, 12


def scaled(u):
    """(v + 3) exp(v^2) erfc(v) at v = 3 (1 + u) / (1 - u)."""
    v = CENTRE * (1 + u) / (1 - u)
    if v < 60:
        return (v + CENTRE) * mp.exp(v * v) * mp.erfc(v)
    asymptotic = mp.fsum((-1) ** n * mp.fac2(2 * n - 1) / (2 * v * v) ** n for n in range(12))
    return (v + CENTRE) * asymptotic / (v * mp.sqrt(mp.pi))


def chebyshev(f, nodes=64):
    values = [f(mp.cos(mp.pi * (j + mp.mpf(1) / 2) / nodes)) for j in range(nodes)]
    return [(2 if i else 1) / mp.mpf(nodes) *
            mp.fsum(values[j] * mp.cos(mp.pi * i * (j + mp.mpf(1) / 2) / nodes) for j in range(nodes))
            for i in range(nodes)]


def powers(coefficients):
    """A Chebyshev series as a polynomial, constant first."""
    total = [mp.mpf(0)] * len(coefficients)
    before, now = [mp.mpf(1)], [mp.mpf(0), mp.mpf(1)]
    for c in coefficients:
        for i, x in enumerate(before):
            total[i] += c * x
        following = [mp.mpf(0)] + [2 * x for x in now]
        for i, x in enumerate(before):
            following[i] -= x
        before, now = now, following
    return total


def root_series(terms):
    """Coefficients of (s / (1 - exp(-s)))^(1/2), as the power -1/2 of the series of (1 - exp(-s)) / s."""
    inner = [mp.mpf(-1) ** k / mp.factorial(k + 1) for k in range(terms)]
    series = [mp.mpf(1)]
    for n in range(1, terms):
        series.append(mp.fsum((-mp.mpf(k) / 2 - (n - k)) * inner[k] * series[n - k] for k in range(1, n + 1)) / n)
    return series


series = chebyshev(scaled)
left_out = mp.fsum(abs(c) for c in series[DEGREE + 1:])
print(f"(v + 3) erfcx(v) in u = (v - 3) / (v + 3), the terms left out sum to {mp.nstr(left_out, 2)}:")
for c in powers(series[:DEGREE + 1]):
    print(mp.nstr(c, 18))
print("(s / (1 - exp(-s)))^(1/2):")
for c in root_series(TERMS):
    print(mp.nstr(c, 18))
