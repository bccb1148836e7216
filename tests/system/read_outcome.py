#!/usr/bin/python3
"""Reads an outcome file with h5py alone and checks what the contract promises of it.

Usage: read_outcome.py OUT.h5
Prints "ok" and what it holds; otherwise every breach, and exit code 1.
"""
import sys

import h5py
import numpy

FACTS = ("title", "config_text", "resolved_config", "digest", "seed", "program_version", "commit", "compiler", "flags",
         "processor")
TYPES = (numpy.dtype("u1"), numpy.dtype("<i4"), numpy.dtype("<f8"))
FILTERS = {h5py.h5z.FILTER_SHUFFLE, h5py.h5z.FILTER_DEFLATE}


def breaches_of_root(file):
    if file.attrs.get("format") != "lacuna outcomes":
        yield f"format is {file.attrs.get('format')!r}"
    if file.attrs.get("format_version") != 1:
        yield f"format_version is {file.attrs.get('format_version')!r}"
    if file.attrs.get("complete") not in (0, 1):
        yield f"complete is {file.attrs.get('complete')!r}"
    for name in FACTS:
        if not isinstance(file.attrs.get(name), str):
            yield f"{name} is no text: {file.attrs.get(name)!r}"
    for name in ("literatures_done", "literatures_planned"):
        if int(file.attrs.get(name, -1)) < 0:
            yield f"{name} is {file.attrs.get(name)!r}"


def breaches_of_column(name, column):
    if not isinstance(column, h5py.Dataset):
        yield f"{name} is no dataset"
        return
    if column.ndim != 1 or column.chunks is None or column.chunks[0] > 65536:
        yield f"{name}: shape {column.shape}, chunks {column.chunks}"
    if column.dtype not in TYPES:
        yield f"{name}: type {column.dtype}"
    for key in ("units", "description"):
        if not isinstance(column.attrs.get(key), str) or not column.attrs[key]:
            yield f"{name}: {key} is {column.attrs.get(key)!r}"
    properties = column.id.get_create_plist()
    if any(properties.get_filter(i)[0] not in FILTERS for i in range(properties.get_nfilters())):
        yield f"{name}: a filter that not every reader has"
    values = column[:]
    names = h5py.check_enum_dtype(column.dtype)
    if names is not None:
        if sorted(names.values()) != list(range(len(names))):
            yield f"{name}: codes {names}"
        if len(values) and values.max() >= len(names):
            yield f"{name}: the code {values.max()} has no name"


def breaches_of(file):
    yield from breaches_of_root(file)
    for table in file:
        if not isinstance(file[table], h5py.Group):
            yield f"{table} is no group"
            continue
        for column in file[table]:
            if not isinstance(file[table].get(column, getlink=True), h5py.HardLink):
                yield f"{table}/{column} is a link"
            yield from breaches_of_column(f"{table}/{column}", file[table][column])
        lengths = {file[table][column].shape for column in file[table]}
        if len(lengths) > 1:
            yield f"{table}: columns of {len(lengths)} lengths"


with h5py.File(sys.argv[1], "r") as outcome:
    found = list(breaches_of(outcome))
    for breach in found:
        print(breach)
    if not found:
        tables = ", ".join(f"{t}: {len(next(iter(outcome[t].values()))) if len(outcome[t]) else 0} rows of {len(outcome[t])} columns"
                           for t in outcome)
        print(f"ok ({tables})")
sys.exit(1 if found else 0)
