#!/usr/bin/env python3
"""Tables of heads, drawdowns and river inflow for the invented outlines.

    python tests/references/general/invented_outlines.py [NAME ...] [--check]

Reads NAME.toml and writes NAME.csv. Every plan is solved twice, with fewer and
with more functions (`lightning.py`), and the accuracy of a value is four times
the sum of the residuals on the edges, or ten times what the two solutions
differ by, whichever is larger: heads in metres, inflow in m3/d. --check compares
with an independent finite-element solution (`elements.py`) and writes nothing.
"""

import argparse
import math

import numpy as np

import plans
from lightning import Field
from tables import HERE, write

SEE_FROM = {"fen_bends": 100 - 700j, "quarry_bend": 100 - 700j, "withy_reach": 100 - 900j, "crag_side": 400 - 700j}
NAMES = ["sallow_fold", "sallow_fold_clogged", "sallow_fold_recharge", "ostrey_vale", "fen_bends", "quarry_bend",
         "withy_reach", "crag_side"]
# Solved once more in some seconds: `tests/references/check.py` does.
QUICK = ["fen_bends", "quarry_bend", "withy_reach", "crag_side"]
FLOOR_M = 1e-11
FLOWS = {"inflow", "inflow_by_well", "exchange"}


def halton(index, base):
    value, fraction = 0.0, 1.0
    while index:
        fraction /= base
        value += fraction * (index % base)
        index //= base
    return value


def places(field, inside_count=24):
    """Names and places: open ground, 1 to 5 mm from edges, 3 mm from corners."""
    plan = field.plan
    corners = [edge.end for edge in plan.edges if edge.end is not None] + [w.at for w in plan.wells]
    low = complex(min(c.real for c in corners), min(c.imag for c in corners))
    size = complex(max(c.real for c in corners), max(c.imag for c in corners)) - low
    if plan.is_open:
        low, size = low - 0.5 * size, 2 * size
    found = []
    index = 0
    while len(found) < inside_count:
        index += 1
        z = complex(round(low.real + size.real * halton(index, 2), 3), round(low.imag + size.imag * halton(index, 3), 3))
        if field.inside(z)[0] and all(abs(z - well.at) > 2 * well.radius for well in plan.wells):
            found.append((f"ground {len(found) + 1}", z))
    for number, edge in enumerate(plan.edges, 1):
        along = 0.37 * edge.length if edge.length < math.inf else 430.0
        start = edge.end - along * edge.heading if edge.start is None else edge.start + along * edge.heading
        offset = 1e-3 * (1 + number % 5)
        found.append((f"{1 + number % 5} mm from {edge.name}, edge {number}", start + 1j * edge.heading * offset))
    for number, lake in enumerate(plan.lakes, 1):
        turn = np.exp(1.1j)
        found.append((f"2 mm from {lake.name}", complex(lake.centre + (lake.radius + 2e-3) * turn)))
    number = 0
    for ring in [plan.outer, *plan.islands]:
        for before, after in zip(ring[-1:] + ring[:-1], ring):
            if before.end is None:
                continue
            number += 1
            angle = float(np.angle(-before.heading / after.heading) % (2 * math.pi))
            bisector = complex(after.heading * np.exp(0.5j * angle))
            found.append((f"3 mm from corner {number}", before.end + 3e-3 * bisector))
    if plan.is_open:
        middle = plan.wells[0].at
        found.append(("far away", middle + 20000j))
    for well in plan.wells:
        found.append((f"1 m from {well.name}", well.at + 1.0))
    return found


def solve(name, poles):
    plan = plans.read(HERE / f"{name}.toml")
    return Field(plan, poles=poles, about=SEE_FROM.get(name))


def values(field, at):
    """(kind, name, x, y, value) of all answers."""
    plan = field.plan
    z = np.array([place for _, place in at])
    ambient, green = field.parts(z)
    rates = np.array([well.pumping for well in plan.wells])
    drawdown = green @ rates / plan.transmissivity
    rows = []
    for (name, place), before, fall in zip(at, ambient, drawdown):
        rows.append(("ambient", name, place.real, place.imag, before))
        rows.append(("head", name, place.real, place.imag, before - fall))
        rows.append(("drawdown", name, place.real, place.imag, fall))
    for well, own in zip(plan.wells, field.own_drawdowns()):
        rows.append(("own_drawdown", well.name, well.at.real, well.at.imag, own))
    for river, shares in field.shares().items():
        rows.append(("inflow", river, "", "", float(shares @ rates)))
        for well, share in zip(plan.wells, shares):
            rows.append(("inflow_by_well", f"{river} > {well.name}", "", "", float(share * well.pumping)))
    rows += [("exchange", river, "", "", plan.transmissivity * rise) for river, rise in field.exchanges().items()]
    return rows


def table(name):
    coarse, fine = solve(name, 16), solve(name, 20)
    plan = fine.plan
    at = places(fine)
    rates = np.abs([well.pumping for well in plan.wells]) / plan.transmissivity
    bound_m = 4 * max(f.residual_head + f.residual_unit @ rates for f in (coarse, fine)) + FLOOR_M
    shares = fine.shares()
    missing = np.abs(sum(shares.values()) - 1).max() * np.abs([well.pumping for well in plan.wells]).sum()
    rows = []
    for old, new in zip(values(coarse, at), values(fine, at)):
        apart = abs(old[-1] - new[-1])
        is_flow = new[0] in FLOWS
        accuracy = max(10 * apart, 10 * missing + 1e-9 if is_flow else bound_m)
        rows.append((*new, float(f"{accuracy:.1e}")))
    worst_m = max(row[-1] for row in rows if row[0] not in FLOWS)
    worst_flow = max(row[-1] for row in rows if row[0] in FLOWS)
    print(f"{name}: {fine.size[0]} conditions, {fine.size[1]} functions, {len(at)} places, {len(rows)} values; "
          f"head residual {fine.residual_head:.1e} m, drawdown residual {float(fine.residual_unit @ rates):.1e} m, "
          f"accuracy {worst_m:.1e} m and {worst_flow:.1e} m3/d")
    assert worst_m < 1e-6 and worst_flow < 1e-3, (worst_m, worst_flow)
    return rows


def tables():
    """The tables that are quickly made; their accuracy is not measured anew."""
    for name in QUICK:
        field = solve(name, 20)
        yield name, values(field, places(field))


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("names", nargs="*", default=NAMES)
    parser.add_argument("--check", action="store_true", help="compare with finite elements")
    arguments = parser.parse_args()
    for name in arguments.names or NAMES:
        if arguments.check:
            import elements

            print(name, elements.compare(HERE / f"{name}.toml", HERE / f"{name}.csv", SEE_FROM.get(name)))
        else:
            write(name, table(name))


if __name__ == "__main__":
    main()
