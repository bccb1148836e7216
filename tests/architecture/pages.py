#!/usr/bin/env python3
"""Checks that the paths and targets that README.md and DEVELOPERS.md name exist."""
import pathlib
import re
import sys

root = pathlib.Path(__file__).resolve().parents[2]
faults = []
for page in ("README.md", "DEVELOPERS.md"):
    text = (root / page).read_text()
    for path in set(re.findall(r"(?<![\w/~-])((?:sim|analysis|tests|configs|outputs-example|\.ci)/[\w./*{},-]*[\w*}])", text)):
        patterns = [path]
        for choice in re.findall(r"\{([^}]*)\}", path):
            patterns = [p.replace("{" + choice + "}", part) for p in patterns for part in choice.split(",")]
        for pattern in patterns:
            if not any(root.glob(pattern)) and not (root / pattern).exists():
                faults.append(f"{page}: names {pattern}, which is not there")
    if "@@" in text:
        faults.append(f"{page}: an unfilled place")
print("\n".join(faults) if faults else "pages name what is there")
sys.exit(bool(faults))
