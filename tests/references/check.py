#!/usr/bin/env python3
"""Recomputes the reference tables and compares them with the committed ones.

    python3 -m venv .venv && .venv/bin/pip install -r tests/references/requirements.txt
    .venv/bin/python tests/references/check.py            # compares
    .venv/bin/python tests/references/check.py --write    # writes the tables anew

Each script beside this one makes the table of its own name: COLUMNS names the
columns, rows() computes them and stops with an AssertionError where its own
independent check of a formula fails. Numbers are equal when they differ by no
more than 1e-13 of themselves or 1e-15: room for another version of a library
in the last digits, none for another formula. Projected coordinates, metres or
feet up to 1e7, are equal to within 1e-6.

The scripts of `general/` whose `tables()` are quickly made are run too and held
against their tables to within the accuracy that stands there; they write their
tables themselves.
"""

import argparse
import csv
import importlib
import pathlib
import sys

HERE = pathlib.Path(__file__).resolve().parent
NO_TABLES = {"check", "potential"}
GENERAL = ["lake_beside_river", "clogged_banks", "published_polygons", "invented_outlines"]


def text(value):
    """Shortest decimal that reads back as the same double."""
    if isinstance(value, (str, int)):
        return str(value)
    return repr(float(value))


def equal(new, old, tolerance):
    if new == old:
        return True
    try:
        new, old = float(new), float(old)
    except ValueError:
        return False
    return abs(new - old) <= max(tolerance, 1e-13 * abs(old))


def compare(name, table, path, tolerance):
    with open(path, newline="", encoding="utf-8") as file:
        committed = list(csv.reader(file))
    if len(committed) != len(table):
        return [f"{name}: {len(table)} rows computed, {len(committed)} committed"]
    return [
        f"{name}, row {number}: computed {new}, committed {old}"
        for number, (new, old) in enumerate(zip(table, committed))
        if len(new) != len(old) or not all(equal(n, o, tolerance) for n, o in zip(new, old))
    ]


def general_faults():
    sys.path.insert(0, str(HERE / "general"))
    differences = importlib.import_module("tables").differences
    for script in GENERAL:
        for name, rows in importlib.import_module(script).tables():
            yield from differences(name, rows)
            print(f"general/{name}: {len(rows)} rows")


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("--write", action="store_true", help="write the tables anew")
    arguments = parser.parse_args()
    sys.path.insert(0, str(HERE))
    faults = []
    for script in sorted(HERE.glob("*.py")):
        name = script.stem
        if name in NO_TABLES:
            continue
        module = importlib.import_module(name)
        table = [module.COLUMNS] + [[text(value) for value in row] for row in module.rows()]
        path = HERE / f"{name}.csv"
        if arguments.write:
            with open(path, "w", newline="", encoding="utf-8") as file:
                csv.writer(file, lineterminator="\n").writerows(table)
        else:
            faults += compare(name, table, path, getattr(module, "TOLERANCE", 1e-15))
        print(f"{name}: {len(table) - 1} rows")
    if not arguments.write:
        faults += general_faults()
    if faults:
        sys.exit("\n".join(faults))


if __name__ == "__main__":
    main()
