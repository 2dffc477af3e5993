#!/usr/bin/env python3
"""Times scikit-fem on a plan, at several mesh sizes, beside heads known otherwise.

    python tests/bench/finite_elements.py PLAN.toml [HEADS.csv] [--sizes 0.4 0.2 0.1]

Quadratic elements on triangles graded into the corners, wells taken out as
logarithms (`tests/references/general/elements.py`), one direct factorisation.
HEADS.csv is a table of `tests/references/general/` or the output of
`mirrorwell heads PLAN.toml --points …`; its places are where heads are compared.
Without it the places are the plan's neighbours, and the finest mesh is the
measure. Seconds are of processor time, mesh and solution apart; reading is left out.
Needs numpy, scipy, scikit-fem, meshpy, matplotlib.
"""

import argparse
import csv
import pathlib
import sys
import tomllib

import numpy as np

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent.parent / "references" / "general"))
import plans  # noqa: E402
from elements import Elements  # noqa: E402


def known_heads(path):
    """Places and heads of either kind of table."""
    with open(path, newline="", encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    if rows and "kind" in rows[0]:
        rows = [{**row, "head": row["value"]} for row in rows if row["kind"] == "head"]
    rows = [row for row in rows if row["head"]]
    places = np.array([complex(float(row["x"]), float(row["y"])) for row in rows])
    return places, np.array([float(row["head"]) for row in rows])


def neighbours(path):
    with open(path, "rb") as file:
        return np.array([complex(*entry["at"]) for entry in tomllib.load(file)["neighbour"] if "at" in entry])


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("plan")
    parser.add_argument("heads", nargs="?")
    parser.add_argument("--sizes", nargs="+", type=float, default=[0.4, 0.2, 0.1],
                        help="growth of triangles with the distance from corners, coarse to fine")
    arguments = parser.parse_args()
    plan = plans.read(pathlib.Path(arguments.plan))
    places, heads = known_heads(arguments.heads) if arguments.heads else (neighbours(arguments.plan), None)
    runs = []
    for size in arguments.sizes:
        run = Elements(plan, size)
        runs.append((size, run.unknowns, run.meshed, run.seconds - run.meshed, run.heads(places)))
    measure = heads if heads is not None else runs.pop()[-1]
    print(f"{plan.title}: {len(plan.outer)} sides, {len(plan.wells)} wells, {len(places)} places, against "
          + (arguments.heads or f"the mesh of size {arguments.sizes[-1]}"))
    print("  size   unknowns   mesh s  solution s   largest difference m    median m")
    for size, unknowns, meshed, solved, found in runs:
        apart = np.abs(found - measure)
        print(f"{size:6.3f} {unknowns:10d} {meshed:8.2f} {solved:11.2f} {apart.max():22.1e} {np.median(apart):11.1e}")


if __name__ == "__main__":
    main()
