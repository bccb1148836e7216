#!/usr/bin/env python3
"""Writes tails_mpmath.csv: upper tails of the normal, t and F (needs mpmath).

The incomplete beta function is integrated in s = -log x, a way of its own: neither the series of sim/tail nor
mpmath's hypergeometric functions. Arguments are doubles, so that the table's rounding does not count.
Usage: make_tails_mpmath.py > tails_mpmath.csv
"""
import math

import mpmath as mp

mp.mp.dps = 40


def incomplete_beta(a, b, odds):
    """I_x(a, b) at x = 1 / (1 + odds): the share of exp(-a s) (1 - exp(-s))^(b-1) beyond Y = log(1 + odds).

    Integrated in w, s = w^2, so that the integrand is smooth for b = 1/2; pieces of a few standard widths.
    """
    def log_density(w):
        s = w * w
        return -a * s + (2 * b - 1) * mp.log(w) + (b - 1) * (mp.log(-mp.expm1(-s) / s))

    start = mp.sqrt(mp.log1p(odds))
    low, high = mp.mpf(0), b / a  # a s = 1/2 + (b - 1) s / (exp(s) - 1) at the mode
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (middle, high) if a * middle < 0.5 + (b - 1) * middle / mp.expm1(middle) else (low, middle)
    mode = mp.sqrt(low)
    peak = max(start, mode, mp.mpf(10) ** -30)
    base = log_density(peak)
    width = 1 / mp.sqrt(4 * a)
    step = min(2 * width, 3 / (a * peak), 1 / peak)
    edges = [start]
    while edges[-1] < mode or log_density(edges[-1]) > base - 60:
        edges.append(edges[-1] + step)
    total = mp.fsum(mp.quad(lambda w: 2 * mp.exp(log_density(w) - base), edges[i:i + 2]) for i in range(len(edges) - 1))
    return total * mp.exp(base - mp.log(mp.beta(a, b)) if a < 1e5 else
                          base + mp.loggamma(a + b) - mp.loggamma(a) - mp.loggamma(b))


def significant(x):
    return mp.nstr(x, 18, min_fixed=0, max_fixed=0)


def t_rows():
    for df in (1, 1.5, 2, 3, 4, 7.25, 12, 33, 100, 999.5, 1e4, 1e6, 1e7):
        for w in (1e-3, 0.3, 1, 1.7, 2.6, 4, 6, 9, 14, 21, 30, 36.9):
            t = float(mp.sqrt(df * mp.expm1(mp.mpf(w) ** 2 / df)))
            p = incomplete_beta(mp.mpf(df) / 2, mp.mpf(1) / 2, mp.mpf(t) ** 2 / df) / 2
            if p > 1e-300:
                print(f"t,{t!r},,{df!r},{significant(p)}", flush=True)


def f_rows():
    for df1 in (1, 2, 3, 4, 7, 10, 51, 200, 1000):
        for df2 in (1, 2.5, 8, 30, 117, 2000, 1e7):
            for spread in (-3, -1, 0, 1, 2, 4, 8, 16):
                f = math.exp(spread * math.sqrt(2 / df1 + 2 / df2))
                p = incomplete_beta(mp.mpf(df2) / 2, mp.mpf(df1) / 2, mp.mpf(df1) * mp.mpf(f) / mp.mpf(df2))
                if p > 1e-300:
                    print(f"f,{f!r},{df1},{df2!r},{significant(p)}", flush=True)


print("# Upper tails: P(Z > x), P(T > x) with df2 degrees of freedom, P(F > x) with df1 and df2.")
print(f"# Source: mpmath {mp.__version__} at 40 digits, make_tails_mpmath.py. All printed digits hold.")
print("law,x,df1,df2,p")
for z in (-8.0, -3.0, -1.0, -1e-3, 0.0, 1e-8, 0.1, 0.5, 1.0, 1.96, 3.0, 5.0, 8.0, 12.0, 20.0, 30.0, 37.0):
    print(f"normal,{z!r},,,{significant(mp.erfc(mp.mpf(z) / mp.sqrt(2)) / 2)}")
t_rows()
f_rows()
