#!/usr/bin/env python3
"""Invented plans for timing: deterministic outlines of any number of vertices.

    python tests/bench/outlines.py              # writes tests/bench/plans/
    python tests/bench/outlines.py 500          # prints the valley of 500 vertices

`valley_N` is a closed aquifer of N vertices: a meandering river in the south
whose stage falls from vertex to vertex, barriers on the valley wall and at both
ends, five wells. `fold_8` is the outline of eight corners and ten wells of
tests/references/general/sallow_fold.toml with two neighbours.
"""

import math
import pathlib
import sys

HERE = pathlib.Path(__file__).resolve().parent
KEPT = (200, 1000)
SPACING = 40.0  # metres between river vertices


def river(count):
    """Vertices of the river: a sine-generated curve, evenly spaced, whose
    heading swings by 69 degrees at most, so that it does not meet itself."""
    points, x, y = [], 0.0, 0.0
    wave = 24.0  # vertices a meander
    for k in range(count):
        points.append((round(x, 3), round(y, 3)))
        heading = 1.2 * math.sin(2 * math.pi * (k + 0.5) / wave) + 0.12 * math.sin(0.37 * k + 1.0)
        x += SPACING * math.cos(heading)
        y += SPACING * math.sin(heading)
    return points


def wall(length, drift, count):
    """Vertices of the northern wall, from the east end to the west end."""
    points = []
    for k in range(count):
        share = 1 - k / (count - 1)
        rough = 60.0 * math.sin(2.1 * k + 0.4) + 35.0 * math.sin(5.3 * k + 2.0)
        points.append((round(share * length, 3), round(drift * share + 900.0 + rough, 3)))
    return points


def number(value):
    return repr(float(value))


def line(points):
    return "[" + ", ".join(f"[{number(x)}, {number(y)}]" for x, y in points) + "]"


def valley(vertices):
    """The plan text of a valley of so many vertices: three quarters on the river."""
    on_river = max(4, 3 * vertices // 4)
    banks = river(on_river)
    (x1, y1), (x0, y0) = banks[-1], banks[0]
    slopes = wall(x1, y1, vertices - on_river)
    stages = [round(52.0 - 0.0008 * SPACING * k, 4) for k in range(on_river)]
    parts = [f"# A closed valley of {vertices} vertices, for timing. An invented place.", "",
             f'title = "Valley of {vertices} vertices"', "crs   = { origin = [13.2, 53.8] }", 'units = "metric"', "",
             "[aquifer]", "transmissivity = 700.0", "roof           = 30.0", "", "[[river]]", 'name  = "Meander"',
             f"line  = {line(banks)}", "stage = [" + ", ".join(number(stage) for stage in stages) + "]", "",
             "[[barrier]]", 'name = "valley wall"', f"line = {line([banks[-1], *slopes, banks[0]])}", ""]
    for k, share in enumerate((0.12, 0.3, 0.47, 0.68, 0.86)):
        x = round(share * x1, 1)
        near = min(banks, key=lambda point: abs(point[0] - x))
        above = max(y for px, y in banks if abs(px - x) < 120.0) if vertices > 30 else near[1]
        parts += ["[[well]]", f'name    = "V-{k + 1}"', f"at      = [{number(x)}, {number(round(above + 60.0 + 70.0 * k, 1))}]",
                  f"pumping = {number(400.0 + 150.0 * k)}", "radius  = 0.2", ""]
    for k, share in enumerate((0.2, 0.41, 0.76)):
        x = round(share * x1, 1)
        parts += ["[[neighbour]]", f'name = "Lot {k + 1}"', f"at   = [{number(x)}, {number(round(y1 * share + 560.0 + 20.0 * k, 1))}]",
                  "allowed_drawdown = 0.5", ""]
    return "\n".join(parts[:-1]) + "\n"


def fold():
    text = (HERE.parent / "references" / "general" / "sallow_fold.toml").read_text(encoding="utf-8")
    for name, at in (("Lot 1", (450.0, 640.0)), ("Lot 2", (1850.0, 1010.0))):
        text += f'\n[[neighbour]]\nname = "{name}"\nat   = [{at[0]}, {at[1]}]\nallowed_drawdown = 0.8\n'
    return text


def main():
    if len(sys.argv) > 1:
        print(valley(int(sys.argv[1])), end="")
        return
    folder = HERE / "plans"
    folder.mkdir(exist_ok=True)
    (folder / "fold_8.toml").write_text(fold(), encoding="utf-8")
    for count in KEPT:
        (folder / f"valley_{count}.toml").write_text(valley(count), encoding="utf-8")


if __name__ == "__main__":
    main()
