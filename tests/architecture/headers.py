#!/usr/bin/env python3
"""Compiles each header of sim/ and analysis/ alone (syntax only). Usage: headers.py BUILD_FOLDER"""
import concurrent.futures
import json
import pathlib
import shlex
import subprocess
import sys

root = pathlib.Path(__file__).resolve().parents[2]
commands = json.loads((pathlib.Path(sys.argv[1]) / "compile_commands.json").read_text())


def command_of(folder):
    for entry in commands:
        if pathlib.Path(entry["file"]).parent == folder:
            words = shlex.split(entry["command"])
            return [w for w in words[:1] + [w for i, w in enumerate(words[1:], 1)
                    if w.startswith(("-D", "-I", "-std", "-W", "-isystem")) or words[i - 1] == "-isystem"]]
    return None


def compile_alone(header):
    command = command_of(header.parent) or command_of(root / "sim" / "literature")
    program = f'#include "{header.relative_to(root)}"\n'
    done = subprocess.run(command + ["-fsyntax-only", "-x", "c++", "-"], input=program, text=True, capture_output=True)
    return header, done.returncode, done.stderr


headers = [h for tree in ("sim", "analysis") for h in sorted((root / tree).rglob("*.h")) if "-inl" not in h.name]
with concurrent.futures.ThreadPoolExecutor(2) as pool:
    results = list(pool.map(compile_alone, headers))
bad = [(h, e) for h, code, e in results if code]
for header, errors in bad:
    print(f"{header.relative_to(root)} does not compile alone:\n{errors}")
print(f"{len(headers) - len(bad)} of {len(headers)} headers compile alone")
sys.exit(bool(bad))
