"""Reads the library's tables: heading lines with `#`, then tab-separated cells."""

import csv
from pathlib import Path

DATA = Path(__file__).resolve().parents[2] / "crates" / "reagents" / "data"


def rows(table):
    """The rows of a table as dictionaries of text."""
    with open(DATA / f"{table}.tsv", encoding="utf-8") as lines:
        body = [line for line in lines if not line.startswith("#")]
    return list(csv.DictReader(body, delimiter="\t", quoting=csv.QUOTE_NONE))


def report(name, compared, faults):
    """Prints the outcome of a check and gives its exit code."""
    for fault in faults:
        print(f"{name}: {fault}")
    print(f"{name}: {compared} values compared, {len(faults)} faults")
    return 1 if faults else 0
