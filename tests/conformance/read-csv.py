"""Prints as JSON what astropy's CSV reader, called as a user would, and Python's own csv module find in a file."""

import csv
import json
import sys

import numpy
from astropy.table import Table


def plain(value):
    if numpy.ma.is_masked(value):
        return None
    if isinstance(value, numpy.integer):
        return int(value)
    if isinstance(value, numpy.floating):
        return float(value) if numpy.isfinite(value) else str(float(value))
    return str(value)


table = Table.read(sys.argv[1], format="ascii.csv")
with open(sys.argv[1], newline="", encoding="utf-8") as file:
    records = list(csv.reader(file, strict=True))
print(json.dumps({
    "columns": table.colnames,
    "rows": [[plain(value) for value in row] for row in table],
    "records": records,
}))
