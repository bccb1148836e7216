#!/usr/bin/env python3
"""The field of configs/published-rates.toml: lacuna against the NumPy script, one thread each, in turns.

Usage: against_baseline.py LACUNA [STUDIES [ROUNDS]]   (needs python3-numpy, python3-scipy)
Prints whole-process seconds and the ratio of each round; both sides pay for their start.
"""
import os
import statistics
import subprocess
import sys
import tempfile
import time

here = os.path.dirname(os.path.abspath(__file__))
program = sys.argv[1]
studies = int(float(sys.argv[2])) if len(sys.argv) > 2 else 20_000_000
rounds = int(sys.argv[3]) if len(sys.argv) > 3 else 5
config = os.path.join(here, "..", "..", "configs", "published-rates.toml")
environment = dict(os.environ, OMP_NUM_THREADS="1")


def seconds(command):
    start = time.perf_counter()
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, env=environment)
    return time.perf_counter() - start


ratios = []
with tempfile.TemporaryDirectory() as folder:
    ours = [program, "run", config, "-o", os.path.join(folder, "out.h5"), "--overwrite", "--threads", "1", "--quiet",
            "--literatures", str(max(1, studies // 1_000_000))]
    theirs = [sys.executable, os.path.join(here, "baseline_published_rates.py"), str(studies)]
    for _ in range(rounds):
        a, b = seconds(theirs), seconds(ours)
        ratios.append(a / b)
        print(f"NumPy {a:.2f} s ({1e9 * a / studies:.1f} ns/study)   lacuna {b:.2f} s ({1e9 * b / studies:.1f} ns/study)   "
              f"ratio {a / b:.2f}", flush=True)
print(f"median ratio {statistics.median(ratios):.2f}")
