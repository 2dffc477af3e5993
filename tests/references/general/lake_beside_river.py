#!/usr/bin/env python3
"""Tables for a round lake beside a straight river or barrier, to 30 digits.

    python tests/references/general/lake_beside_river.py

zeta = (z - a)/(z + a) (bipolar coordinates) maps the half-plane less the lake to
an annulus, and log zeta = -t + i theta that to a strip 0 < t < L of period 2 pi.
Green's function: images at +-t0 + 2 k L, each a row ln|1 - e^(-|t - t_k| + i theta)|
of that period, plus the part that does not depend on theta. Held against the
Fourier series in theta, and against both edges.
"""

import mpmath as mp
import plans
from tables import HERE, inflows, superposed, write

mp.mp.dps = 30
ACCURACY = 1e-12  # doubles of the table, and the plan's own coordinates


class Annulus:
    """The half-plane left of a line (its edge), less a circle."""

    def __init__(self, origin, direction, centre, radius, edge_kind):
        self.origin = mp.mpc(origin)
        self.direction = mp.mpc(direction) / abs(mp.mpc(direction))
        self.kind = edge_kind
        middle = self.local(centre)
        self.shift = mp.im(middle)
        distance = mp.re(middle)
        self.a = mp.sqrt(distance**2 - mp.mpf(radius) ** 2)
        near = distance - radius
        self.width = mp.log(abs((near + self.a) / (near - self.a)))

    def local(self, z):
        """The edge on the imaginary axis, the aquifer (left of it) on the right."""
        return -1j * (mp.mpc(z) - self.origin) / self.direction

    def strip(self, x, y):
        z = self.local(mp.mpc(x, y)) - 1j * self.shift
        log = mp.log((z - self.a) / (z + self.a))
        return -mp.re(log), mp.im(log)

    def mean(self, t, t0):
        if self.kind == "river":
            return min(t, t0) * (self.width - max(t, t0)) / self.width
        return self.width - max(t, t0)

    def signs(self, k):
        """Signs of the images t0 + 2 k L and -t0 + 2 k L."""
        if self.kind == "river":
            return 1, -1
        return (-1) ** k, (-1) ** k

    def green(self, x, y, x0, y0):
        (t, turn), (t0, turn0) = self.strip(x, y), self.strip(x0, y0)
        total = mp.mpf(0)
        for k in range(-60, 61):
            for sign, place in zip(self.signs(k), (t0, -t0)):
                gap = abs(t - place - 2 * k * self.width)
                if gap < 75:
                    total -= sign * mp.log(abs(1 - mp.exp(mp.mpc(-gap, turn - turn0))))
        return (self.mean(t, t0) + total) / (2 * mp.pi)

    def by_series(self, x, y, x0, y0):
        (t, turn), (t0, turn0) = self.strip(x, y), self.strip(x0, y0)
        total = self.mean(t, t0)
        low, high, width = min(t, t0), max(t, t0), self.width
        edge, whole = (mp.sinh, mp.sinh) if self.kind == "river" else (mp.cosh, mp.cosh)
        for n in range(1, int(75 / abs(t - t0)) + 2):
            total += 2 * mp.cos(n * (turn - turn0)) * edge(n * low) * mp.sinh(n * (width - high)) / (n * whole(n * width))
        return total / (2 * mp.pi)


def places(annulus, plan):
    found = [("between", 150.0, 20.0), ("north", 420.0, 330.0), ("behind the lake", 520.0, -150.0),
             ("far", 6000.0, -4000.0), ("south", 40.0, -320.0), ("1 m from HB-1", 111.0, 30.0)]
    # A few millimetres off the straight edge and off the shore.
    found += [("5 mm from the straight edge", 30.0 + 0.004, 40.0 - 0.003),
              ("2.5 mm from the straight edge, afar", -150.0 + 0.002, -200.0 - 0.0015)]
    lake = plan.lakes[0]
    for name, dx, dy in (("shore west", -0.8, 0.6), ("shore south", 0.28, -0.96)):
        found.append((f"2 mm from {name}", lake.centre.real + dx * (lake.radius + 0.002),
                      lake.centre.imag + dy * (lake.radius + 0.002)))
    return found


def table(name, kind):
    plan = plans.read(HERE / f"{name}.toml")
    lake, edge = plan.lakes[0], next(edge for edge in plan.outer if edge.length < 1e9)
    annulus = Annulus(edge.start, edge.heading, lake.centre, lake.radius, kind)
    wells = [(well.name, (well.at.real, well.at.imag), mp.mpf(well.pumping)) for well in plan.wells]
    at = places(annulus, plan)
    # Both edges, and the series.
    for _, well, _ in wells:
        for _, x, y in at:
            value = annulus.green(x, y, *well)
            assert value > 0 and abs(value - annulus.green(*well, x, y)) < mp.mpf("1e-24")
            if abs(annulus.strip(x, y)[0] - annulus.strip(*well)[0]) > 0.02:
                assert abs(value - annulus.by_series(x, y, *well)) < mp.mpf("1e-22"), (name, x, y)
    level = edge.stages[0] if kind == "river" else lake.stage
    rise = lambda x, y: (mp.mpf(lake.stage) - level) * annulus.strip(x, y)[0] / annulus.width
    ambient = lambda x, y: level + rise(x, y)

    def shares(x, y):
        if kind == "barrier":
            return {lake.name: mp.mpf(1)}
        share = annulus.strip(x, y)[0] / annulus.width
        return {edge.name: 1 - share, lake.name: share}

    rows = superposed(at, wells, plan.transmissivity, ambient, annulus.green, ACCURACY)
    return name, rows + inflows(wells, shares, 1e-10)


def tables():
    yield table("heron_bank", "river")
    yield table("heron_dyke", "barrier")


if __name__ == "__main__":
    for made in tables():
        write(*made)
