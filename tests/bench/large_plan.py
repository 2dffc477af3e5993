#!/usr/bin/env python3
"""Times the run of a large plan with every output.

    cargo build --release
    python3 tests/bench/large_plan.py target/release/mirrorwell

200 wells, 500 neighbours, a map of 1000 × 1000 nodes. Prints seconds, peak
memory and the size of each file; fails beyond 10 s or 1 GB, the aims on two
cores. `--plan FILE` keeps the plan, `--outline box` closes it in, `--outline bent` bends
the box's river, so that the general solver computes it.
"""

import argparse
import pathlib
import random
import resource
import subprocess
import sys
import tempfile
import time

MOST_SECONDS, MOST_BYTES = 10.0, 1e9
SIDE_M = 9990.0


def plan(outline):
    """The same plan on every machine."""
    dice = random.Random(1)
    place = lambda: [round(dice.uniform(300.0, SIDE_M - 300.0), 1) for _ in range(2)]
    corners = [[0.0, 0.0], [SIDE_M, 0.0], [SIDE_M, SIDE_M], [0.0, SIDE_M]]
    sides = [[corners[side], corners[(side + 1) % 4]] for side in range(4)]
    if outline == "bent":
        sides[0][1:1] = [[3000.0, 250.0], [6500.0, 40.0]]
    edges = [("river", "stage = 30.0\n", sides[0])]
    if outline != "half-plane":
        edges.append(("barrier", "", sides[2]))
    if outline in ("box", "bent"):
        edges += [("barrier", "", sides[1]), ("barrier", "", sides[3])]
    yield 'title = "Large"\ncrs = { origin = [14.0, 48.0] }\nunits = "metric"\n'
    yield f"[map]\nextent = [0.0, 0.0, {SIDE_M}, {SIDE_M}]\nspacing = 10.0\n"
    yield "[aquifer]\nconductivity = 40.0\nthickness = 25.0\nroof = 10.0\n"
    for number, (kind, more, line) in enumerate(edges):
        yield f'[[{kind}]]\nname = "edge {number}"\nline = {line}\n{more}'
    for number in range(200):
        kind = "injection" if number % 10 == 0 else "pumping"
        rate = round(dice.uniform(20.0, 120.0))
        yield f'[[well]]\nname = "W-{number}"\nat = {place()}\n{kind} = {rate}.0\nradius = 0.2\n'
    for number in range(500):
        x, y = place()
        area = [[x, y], [x + 60.0, y], [x + 60.0, y + 40.0], [x, y + 40.0]]
        where = f"area = {area}" if number % 5 == 0 else f"at = {[x, y]}"
        yield f'[[neighbour]]\nname = "N-{number}"\n{where}\nallowed_drawdown = 1.0\n'


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("program", type=pathlib.Path)
    parser.add_argument("--outline", choices=["half-plane", "strip", "box", "bent"], default="strip")
    parser.add_argument("--plan", type=pathlib.Path, help="where to keep the plan")
    parser.add_argument("more", nargs="*", help="passed on to `run`, after --")
    arguments = parser.parse_args()
    with tempfile.TemporaryDirectory() as folder:
        path = arguments.plan or pathlib.Path(folder, "large.toml")
        path.write_text("".join(plan(arguments.outline)), encoding="utf-8")
        out = pathlib.Path(folder, "out")
        start = time.monotonic()
        command = [arguments.program.resolve(), "run", path, "--quiet", "--out", out, *arguments.more]
        subprocess.run(command, check=True)
        seconds = time.monotonic() - start
        kilobytes = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss
        for file in sorted(out.iterdir()):
            print(f"{file.stat().st_size / 1e6:9.2f} MB  {file.name}")
    print(f"{arguments.outline}: {seconds:.2f} s, {kilobytes / 1e6:.2f} GB at most")
    if seconds > MOST_SECONDS or 1024 * kilobytes > MOST_BYTES:
        sys.exit(f"more than {MOST_SECONDS:g} s or {MOST_BYTES / 1e9:g} GB")


if __name__ == "__main__":
    main()
