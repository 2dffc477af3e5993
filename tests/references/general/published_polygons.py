#!/usr/bin/env python3
"""Plans and tables of polygons whose harmonic measures or Green's values are known.

    python tests/references/general/published_polygons.py

Writes NAME.toml and NAME.csv. The share of a well's water that a river gives is
the river's harmonic measure seen from the well, and the head before pumping is
that measure where one river stands at 1 m and the others at 0. Sources:

- L-shape (0,0) (2,0) (2,1) (1,1) (1,2) (0,2), in kilometres: Schwarz-Christoffel
  map with prevertices infinity, -+2/sqrt 3, -+1, 0; 14 digits.
- Ends of a 10 x 1 rectangle from its middle: the SIAM 100-digit challenge,
  problem 10 (Bornemann, Laurie, Wagon & Waldvogel 2004), 3.8375879792512261e-7.
- Square and rectangle: Fourier series. Regular pentagon: 1/5 by symmetry.

Each is held against `lightning.py` to 1e-11, the long rectangle to 1e-9. Resistances between two sides and
the L-shape with data x^2 cannot be put as plans: they have no well.
"""

import math

import mpmath as mp

import plans
from lightning import Field
from tables import HERE, write

mp.mp.dps = 30
AGREE = 1e-11
L = [(0, 0), (2, 0), (2, 1), (1, 1), (1, 2), (0, 2)]
EDGES = ["south", "east", "inner north", "inner east", "north", "west"]
SEEN = {(0.5, 0.5): (0.39449723323891, 0.013303092024033, 0.092199674737062, 0.092199674737062, 0.013303092024033,
                     0.39449723323891),
        (1.0, 0.5): (0.46627187249937, 0.056801795562386, 0.25957992660585, 0.091038108770926, 0.0079972080649131,
                     0.11831108849656),
        (1.5, 0.5): (0.36921546538373, 0.2614291217906, 0.31733331200185, 0.024866362735208, 0.00187397023343,
                     0.02528176785518)}
TWO_ENDS = {(0.5, 0.5): 0.5, (1.0, 0.5): 0.62183547605395, (1.5, 0.5): 0.80526157646408}


def plan_text(title, comment, corners, edges, wells):
    """edges: (name, stage or None for a barrier) by side, one a side."""
    lines = [f"# {comment}", "# An invented place; a local grid in metres.", "", f'title = "{title}"',
             "crs   = { origin = [8.6, 51.2] }", 'units = "metric"', "", "[aquifer]", "transmissivity = 100.0", ""]
    for kind in ("river", "barrier"):
        for (name, stage), a, b in zip(edges, corners, corners[1:] + corners[:1]):
            if (stage is None) == (kind == "barrier"):
                lines += [f"[[{kind}]]", f'name  = "{name}"', f"line  = [[{a[0]!r}, {a[1]!r}], [{b[0]!r}, {b[1]!r}]]"]
                lines += [] if stage is None else [f"stage = {float(stage)!r}"]
                lines.append("")
    for name, at in wells:
        lines += ["[[well]]", f'name    = "{name}"', f"at      = [{at[0]!r}, {at[1]!r}]", "pumping = 100.0",
                  "radius  = 0.2", ""]
    return "\n".join(lines[:-1]) + "\n"


def scaled(points, scale=1000.0):
    return [(scale * float(x), scale * float(y)) for x, y in points]


def held(name, text, rows, agree=AGREE):
    """A plan and its table, held against least squares."""
    field = Field(plans.read_text(text), poles=20)
    wells = {well.name: number for number, well in enumerate(field.plan.wells)}
    shares = field.shares()
    for kind, label, x, y, value, accuracy in rows:
        if kind == "ambient":
            ours = field.parts([complex(x, y)])[0][0]
        elif kind == "drawdown_by_well":
            ours = field.parts([complex(x, y)])[1][0, wells[label.split(" > ")[1]]]
        elif kind == "inflow_by_well":
            river, well = label.split(" > ")
            ours = 100.0 * shares[river][wells[well]]
        assert abs(ours - float(value)) < max(100 * agree, accuracy), (name, label, ours, value)
    return name, text, rows


def l_shape():
    corners = scaled(L)
    wells = [(f"L-{number}", scaled([at])[0]) for number, at in enumerate(SEEN, 1)]
    far = ("L-4", (500.0, 1500.0))
    rows = [("inflow_by_well", f"{edge} > {well[0]}", "", "", 100 * share, 2e-11)
            for well, shares in zip(wells, SEEN.values()) for edge, share in zip(EDGES, shares)]
    rows += [("ambient", f"at {well[0]}", *well[1], shares[1], 1e-13) for well, shares in zip(wells, SEEN.values())]
    rows.append(("drawdown_by_well", "east arm > L-4", 1500.0, 500.0, 0.0021350523431811, 1e-13))
    yield held("ell_all_rivers", plan_text("Ell Moor", "An L of six rivers, the eastern one at 1 m.", corners,
                                     [(edge, float(edge == "east")) for edge in EDGES], [*wells, far]), rows)
    kinds = [(edge, {"east": 1.0, "north": 0.0}.get(edge)) for edge in EDGES]
    rows = [("ambient", f"at {well[0]}", *well[1], value, 1e-13) for well, value in zip(wells, TWO_ENDS.values())]
    for well, value in zip(wells, TWO_ENDS.values()):
        rows += [("inflow_by_well", f"east > {well[0]}", "", "", 100 * value, 2e-11),
                 ("inflow_by_well", f"north > {well[0]}", "", "", 100 * (1 - value), 2e-11)]
    yield held("ell_two_ends", plan_text("Ell Moor, open at both ends", "An L between barriers, a river at each end.",
                                   corners, kinds, wells), rows)
    kinds = [(edge, 0.0 if edge == "east" else None) for edge in EDGES]
    rows = [("drawdown_by_well", "east arm > L-4", 1500.0, 500.0, 0.49826999987629, 1e-12),
            ("inflow_by_well", "east > L-4", "", "", 100.0, 1e-10)]
    yield held("ell_one_end", plan_text("Ell Moor, open at one end", "An L between barriers, a river at its eastern end.",
                                  corners, kinds, [far]), rows)


def side_measure(width, height, x, y):
    """Harmonic measure of the side x = 0 of a rectangle, by Fourier series."""
    x, y = mp.mpf(x), mp.mpf(y)
    return mp.nsum(lambda n: 4 / (mp.pi * (2 * n + 1)) * mp.sin((2 * n + 1) * mp.pi * y / height)
                   * mp.sinh((2 * n + 1) * mp.pi * (width - x) / height)
                   / mp.sinh((2 * n + 1) * mp.pi * width / height), [0, 120], method="direct")


def square_and_rectangle():
    names = ["south", "east", "north", "west"]
    corners = scaled([(0, 0), (1, 0), (1, 1), (0, 1)])
    wells = [("S-1", (250.0, 500.0)), ("S-2", (250.0, 250.0)), ("S-3", (500.0, 500.0))]
    rows = []
    for name, at in wells:
        x, y = (mp.mpf(v) / 1000 for v in at)
        seen = {"west": side_measure(1, 1, x, y), "east": side_measure(1, 1, 1 - x, y),
                "south": side_measure(1, 1, y, x), "north": side_measure(1, 1, 1 - y, x)}
        assert abs(sum(seen.values()) - 1) < mp.mpf("1e-25")
        rows.append(("ambient", f"at {name}", *at, seen["west"], 1e-14))
        rows += [("inflow_by_well", f"{side} > {name}", "", "", 100 * share, 1e-12) for side, share in seen.items()]
    assert abs(rows[0][4] - mp.mpf("0.54052921826")) < mp.mpf("1e-11")
    yield held("square_rivers", plan_text("Square Fen", "A square of four rivers, the western one at 1 m.", corners,
                                    [(side, float(side == "west")) for side in names], wells), rows)
    known = mp.mpf("3.8375879792512261034e-7")
    assert abs(2 * side_measure(10, 1, 5, mp.mpf(1) / 2) - known) < mp.mpf("1e-22")
    corners = scaled([(0, 0), (10, 0), (10, 1), (0, 1)], 100.0)
    rows = [("ambient", "middle", 500.0, 50.0, known, 1e-19),
            ("inflow_by_well", "east > R-1", "", "", 50 * known, 1e-17),
            ("inflow_by_well", "west > R-1", "", "", 50 * known, 1e-17)]
    yield held("ten_by_one", plan_text("Long Acre", "A rectangle of four rivers, ten times as long as wide, its ends at 1 m.",
                                 corners, [("south", 0.0), ("east", 1.0), ("north", 0.0), ("west", 1.0)],
                                 [("R-1", (500.0, 50.0))]), rows, 1e-9)


def pentagon():
    corners = [(1000 * math.cos(math.tau * k / 5), 1000 * math.sin(math.tau * k / 5)) for k in range(5)]
    sides = [f"side {k}" for k in range(1, 6)]
    rows = [("ambient", "centre", 0.0, 0.0, 0.2, 1e-14)]
    rows += [("inflow_by_well", f"{side} > P-1", "", "", 20.0, 1e-12) for side in sides]
    yield held("pentagon_rivers", plan_text("Five Dykes", "A regular pentagon of rivers, one of them at 1 m.", corners,
                                      [(side, float(side == "side 1")) for side in sides], [("P-1", (0.0, 0.0))]), rows)


def all_made():
    yield from l_shape()
    yield from square_and_rectangle()
    yield from pentagon()


def tables():
    """The tables; their plans must be the committed ones."""
    for name, text, rows in all_made():
        assert (HERE / f"{name}.toml").read_text(encoding="utf-8") == text, f"{name}.toml"
        yield name, rows


if __name__ == "__main__":
    for name, text, rows in all_made():
        (HERE / f"{name}.toml").write_text(text, encoding="utf-8")
        write(name, rows)
