#!/usr/bin/python3
"""Writes noncentral_t_mpmath.csv: noncentral t by 30-digit quadrature (needs python3-mpmath).

Usage: make_noncentral_t_mpmath.py > noncentral_t_mpmath.csv
"""
import mpmath as mp

mp.mp.dps = 30
phi, Phi = mp.npdf, mp.ncdf


def row(df, delta, c):
    """P(T > c) and E[T; T > c] as integrals over s = sqrt(chi2_df / df), split where they bend."""
    df, delta, c = mp.mpf(df), mp.mpf(delta), mp.mpf(c)
    log_constant = mp.log(2) + df / 2 * mp.log(df / 2) - mp.loggamma(df / 2)

    def density(s):
        return mp.exp(log_constant + (df - 1) * mp.log(s) - df * s * s / 2) if s > 0 else mp.mpf(0)

    sd = 1 / mp.sqrt(2 * df)
    points = {mp.mpf(0)} if df < 200 else set()
    points |= {1 + k * sd for k in range(-14, 16, 2) if 1 + k * sd > 0}
    if c != 0:
        points |= {p for p in (delta / c + k / abs(c) for k in range(-12, 13, 3)) if min(points) < p < max(points)}
    points = sorted(points)
    chance = mp.quad(lambda s: density(s) * Phi(delta - c * s), points)
    first = None
    if df > 1:
        first = mp.quad(lambda s: density(s) / s * (delta * Phi(delta - c * s) + phi(c * s - delta)) if s > 0 else
                        mp.mpf(0), points)
    return chance, first


def text(x):
    """Digits of x; below the range of doubles, zero."""
    return mp.nstr(x, 18) if abs(x) > 1e-300 else "0"


print("# Noncentral t: upper = P(T > c), first = E[T; T > c] (missing where the mean does not exist), T = (Z + delta) / S.")
print(f"# Source: mpmath {mp.__version__} at 30 digits, make_noncentral_t_mpmath.py. Tolerance 1e-12 absolute.")
print("df,delta,c,upper,first")
for df in (1, 2, 3, 8, 38, 398, 10000, 1000000):
    for delta in (-2.5, 0, 0.7, 5, 40):
        for c in (-15, -1.96, 0, 2.3, 6, 41):
            upper, first = row(df, delta, c)
            print(f"{df},{delta},{c},{text(upper)},{'' if first is None else text(first)}", flush=True)
