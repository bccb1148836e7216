#!/usr/bin/env python3
"""Every study design against the same design in NumPy, one thread each, in turns; writes benchmarks.md.

Usage: designs.py BENCH_DESIGNS BENCH_TAILS [ROUNDS] > outputs-example/benchmarks.md   (needs python3-numpy, python3-scipy)
"""
import os
import statistics
import subprocess
import sys

here = os.path.dirname(os.path.abspath(__file__))
bench, tails = sys.argv[1], sys.argv[2]
rounds = int(sys.argv[3]) if len(sys.argv) > 3 else 5
environment = dict(os.environ, OMP_NUM_THREADS="1", OPENBLAS_NUM_THREADS="1")
DESIGNS = {"two-means": "two means, Student, n = 24 per group", "unequal-means": "two means, n = 24 and 48",
           "one-mean": "one mean, or pairs, n = 24", "known-variance": "known variance, n = 24",
           "welch": "two means, Welch, n = 24 per group", "correlation": "correlation, n = 24",
           "several-means": "four means, n = 24 per group", "two-proportions": "two proportions, n = 24 per group",
           "equivalence": "two means and an equivalence test", "looks": "two means, three looks"}


def run(command):
    return subprocess.run(command, check=True, capture_output=True, text=True, env=environment).stdout.split()


print("# Cost of a study, by design\n")
print("Made by `tests/bench/designs.py` (the two programs named there built with `cmake --build --preset release --target")
print(f"bench_designs bench_tails`). Medians of {rounds} rounds in turns, one thread each, at the level of statistics: sampling,")
print("test, claim, estimate. The variates are the normals, chi-squareds or binomials alone. Times depend on the machine;")
print("ratios less so.\n")
print("| design | ns a study | over its variates | NumPy, ns | NumPy over this |")
print("| --- | ---: | ---: | ---: | ---: |")
for name, text in DESIGNS.items():
    own, bare, numpy = [], [], []
    for _ in range(rounds):
        ours = run([bench, name, "1e7"])
        theirs = run([sys.executable, os.path.join(here, "designs_numpy.py"), name, "2e5" if name == "welch" else "2e6"])
        own.append(float(ours[1]))
        bare.append(float(ours[2]))
        numpy.append(float(theirs[1]))
    ratio = statistics.median(n / o for n, o in zip(numpy, own))
    over = statistics.median(o / b for o, b in zip(own, bare))
    print(f"| {text} | {statistics.median(own):.1f} | {over:.2f} | {statistics.median(numpy):.0f} | {ratio:.1f} |", flush=True)

print("\n# Cost of a p-value\n")
print("Upper tails on one thread, ns a value; SciPy is `scipy.stats`, Boost is Boost.Math (`bench_tails`, `tails_scipy.py`).\n")
print("| law | ns a value | Boost over this | SciPy over this |")
print("| --- | ---: | ---: | ---: |")


def table(lines, column):
    rows = {}
    for line in lines:
        for law in ("normal", "t", "F, df1 = 3", "F, df1 = 4", "F, df1 = 50"):
            if line.startswith(law + " "):
                rows[law] = line[len(law):].split()[column]
    return rows


ours = subprocess.run([tails], check=True, capture_output=True, text=True, env=environment).stdout.splitlines()
theirs = subprocess.run([sys.executable, os.path.join(here, "tails_scipy.py")], check=True, capture_output=True, text=True,
                        env=environment).stdout.splitlines()
own, boost, scipy = table(ours, 0), table(ours, 1), table(theirs, 1)
for law in own:
    a, b, c = float(own[law]), float(boost[law]), float(scipy[law])
    print(f"| {law} | {a:.1f} | {b / a:.0f} | {c / a:.0f} |")
