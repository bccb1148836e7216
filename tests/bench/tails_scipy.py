#!/usr/bin/python3
"""Nanoseconds per value of SciPy's upper tails on the grid of bench_tails.cpp, one thread, best of nine.

scipy.stats has overheads of its own; scipy.special, which it calls, is printed beside it.
Usage: tails_scipy.py
"""
import time

import numpy as np
import scipy
from scipy import special, stats

N = 4096
i = np.arange(N)
df = 1.0 + i * 7919 % 1000
t = (i * 104729 % 10007) / 10007.0 * 8.0
f = t * t / 4.0


def nanoseconds(run, repeats=20):
    run()
    best = np.inf
    for _ in range(9):
        start = time.perf_counter()
        for _ in range(repeats):
            run()
        best = min(best, (time.perf_counter() - start) / repeats / N * 1e9)
    return best


print(f"SciPy {scipy.__version__}, NumPy {np.__version__}; ns per value")
laws = [("normal", "norm.sf", lambda: stats.norm.sf(t), "ndtr", lambda: special.ndtr(-t)),
        ("t", "t.sf", lambda: stats.t.sf(t, df), "stdtr", lambda: special.stdtr(df, -t))]
laws += [(f"F, df1 = {k}", "f.sf", lambda k=k: stats.f.sf(f, k, df), "fdtrc", lambda k=k: special.fdtrc(k, df, f))
         for k in (1, 2, 3, 4, 5, 10, 11, 50)]
for law, full, run_full, bare, run_bare in laws:
    print(f"{law:12}stats.{full:8}{nanoseconds(run_full):8.1f}   special.{bare:6}{nanoseconds(run_bare):8.1f}")
