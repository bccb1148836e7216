#!/usr/bin/python3
"""Writes a small outcome file with h5py alone, for the test of the reader.

Usage: write_outcome.py OUT.h5
"""
import sys

import h5py
import numpy

rows = 70000  # more than a chunk
with h5py.File(sys.argv[1], "w") as file:
    file.attrs["format"] = "lacuna outcomes"
    file.attrs["format_version"] = numpy.int64(1)
    file.attrs["complete"] = numpy.uint8(1)
    file.attrs["literatures_done"] = "12"
    file.attrs["literatures_planned"] = "12"
    file.attrs["title"] = "Feldversuche — 試験"
    file.attrs["seed"] = numpy.bytes_("7")  # text of fixed length
    table = file.create_group("studies")
    index = numpy.arange(rows)
    claims = h5py.enum_dtype({"inconclusive": 0, "positive": 1, "reversed": 2}, basetype="u1")
    for name, values, kind, options in (
        ("claim", index % 3, claims, dict(compression="gzip")),
        ("literature", index // 7 - 5, ">i4", dict(compression="gzip", shuffle=True, fletcher32=True)),
        ("estimate", index * 0.25, "<f8", dict()),
    ):
        column = table.create_dataset(name, data=values.astype("u1") if name == "claim" else values.astype(kind), dtype=kind,
                                      **options)
        column.attrs["units"] = "1"
        column.attrs["description"] = f"{name} by h5py"
