#!/usr/bin/env python3
"""Reads every include of sim/ and analysis/ and fails on an arrow that runs up or sideways.

A folder may include itself and folders of lower layers. analysis/ may use sim/base, sim/stats, sim/model
and sim/tally anywhere; sim/store only from record and cli; config, engine and the rest only from cli.
Some library headers belong to one folder each.
"""
import pathlib
import re
import sys

root = pathlib.Path(__file__).resolve().parents[2]
LAYERS = {
    "sim": dict(base=0, random=1, stats=1, model=2, variate=2, tail=2, sequential=2, design=3, publication=3, tally=3, literature=4,
                theory=4, config=5, store=5, engine=6),
    "analysis": dict(record=1, estimand=2, report=5, cli=6),
}
FROM_ANALYSIS = {"base": None, "stats": None, "model": None, "tally": None, "store": {"record", "cli"}}
ONE_FOLDER = {r"tbb/": {"sim/engine"}, r"hdf5": {"sim/store"}, r"isa-l": {"sim/store"}, r"toml\+\+": {"sim/config"},
              r"CLI/": {"analysis/cli"}}

faults = []
for file in sorted(list((root / "sim").rglob("*")) + list((root / "analysis").rglob("*"))):
    if file.suffix not in (".h", ".cpp"):
        continue
    tree, folder = file.relative_to(root).parts[:2]
    text = file.read_text()
    if file.suffix == ".h" and "-inl" not in file.name and "#pragma once" not in text:
        faults.append(f"{file.relative_to(root)}: no #pragma once")
    for line, include in enumerate(re.findall(r'^.*$', text, re.M), 1):
        found = re.match(r'\s*#\s*include\s*[<"]([^>"]+)[>"]', include)
        if not found:
            continue
        where = f"{file.relative_to(root)}:{line}: includes {found[1]}"
        target = re.match(r"(sim|analysis)/(\w+)/", found[1])
        if not target:
            for pattern, folders in ONE_FOLDER.items():
                if re.match(pattern, found[1]) and f"{tree}/{folder}" not in folders and folder != "cli":
                    faults.append(f"{where}: that library belongs to {', '.join(sorted(folders))}")
            continue
        other_tree, other = target.groups()
        if other not in LAYERS[other_tree]:
            faults.append(f"{where}: unknown folder")
        elif other_tree == tree and other != folder and LAYERS[tree][other] >= LAYERS[tree][folder]:
            faults.append(f"{where}: runs up or sideways")
        elif other_tree != tree and tree == "sim":
            faults.append(f"{where}: the simulation knows nothing of the analysis")
        elif other_tree != tree and folder != "cli" and folder not in (FROM_ANALYSIS.get(other, set()) or LAYERS["analysis"]):
            faults.append(f"{where}: only the command line may use that")
        elif other_tree != tree and folder != "cli" and other not in FROM_ANALYSIS:
            faults.append(f"{where}: only the command line may use that")
print("\n".join(faults) if faults else "includes run downwards")
sys.exit(bool(faults))
