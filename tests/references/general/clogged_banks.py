#!/usr/bin/env python3
"""Tables for clogged banks and recharge: a box, a strip, a half-plane; mpmath.

    python tests/references/general/clogged_banks.py

On a clogged bank h - l dh/dx = stage (aquifer at larger x), l = K c.

- Box: eigenfunctions sin((n + 1/2) pi y / b) across, hyperbolic kernels along x.
- Strip: the same kernels under a Fourier integral in y.
- Half-plane: ln(r'/r) + 2 Re e^(zeta/l) E1(zeta/l), zeta = (x + x0) + i (y - y0);
  Hantush (1965) gives the setting; held against the Fourier integral.

Recharge adds what one-dimensional flow gives, and in the box a series that
settles the clogged bank. Each is held against the bank's condition by a
difference quotient, and against a known value.
"""

import mpmath as mp
import plans
from tables import HERE, inflows, superposed, write

mp.mp.dps = 30


def inner(k, x, skin):
    """Solution with h = l h' at x = 0, scaled by e^(-k x)."""
    fade = mp.exp(-2 * k * x)
    return (1 - fade) / 2 + skin * k * (1 + fade) / 2


class Box:
    """x = 0 clogged, x = a barrier, y = 0 river, y = b barrier; recharge."""

    def __init__(self, a, b, skin, west, south, recharge_over_t):
        self.a, self.b, self.skin = mp.mpf(a), mp.mpf(b), mp.mpf(skin)
        self.west, self.south, self.rate = mp.mpf(west), mp.mpf(south), mp.mpf(recharge_over_t)

    def terms(self, apart):
        for n in range(int(70 * self.b / (mp.pi * apart)) + 2):
            yield (n + mp.mpf(1) / 2) * mp.pi / self.b

    def green(self, x, y, x0, y0):
        low, high = mp.mpf(min(x, x0)), mp.mpf(max(x, x0))
        total = mp.mpf(0)
        for k in self.terms(high - low):
            fall = mp.exp(-2 * k * (self.a - high))
            whole = (1 + mp.exp(-2 * k * self.a)) / 2 + self.skin * k * (1 - mp.exp(-2 * k * self.a)) / 2
            along = inner(k, low, self.skin) * (1 + fall) / 2 * mp.exp(-k * (high - low)) / (k * whole)
            total += 2 / self.b * mp.sin(k * y) * mp.sin(k * y0) * along
        return total

    def west_decay(self, k, x):
        """cosh k(a - x) / (cosh k a + l k sinh k a)."""
        whole = (1 + mp.exp(-2 * k * self.a)) + self.skin * k * (1 - mp.exp(-2 * k * self.a))
        return mp.exp(-k * x) * (1 + mp.exp(-2 * k * (self.a - x))) / whole

    def ambient(self, x, y):
        x, y = mp.mpf(x), mp.mpf(y)
        total = self.south + self.rate * (self.b * y - y * y / 2)
        for k in self.terms(x):
            part = 2 / self.b * ((self.west - self.south) / k - self.rate / k**3)
            total += part * mp.sin(k * y) * self.west_decay(k, x)
        return total

    def west_share(self, x0, y0):
        return sum(2 / self.b * mp.sin(k * y0) / k * self.west_decay(k, mp.mpf(x0)) for k in self.terms(mp.mpf(x0)))


class Strip:
    """x = 0 clogged, x = a river; recharge."""

    def __init__(self, a, skin, west, east, recharge_over_t):
        self.a, self.skin, self.west, self.east = mp.mpf(a), mp.mpf(skin), mp.mpf(west), mp.mpf(east)
        self.rate = mp.mpf(recharge_over_t)

    def green(self, x, y, x0, y0):
        low, high, across = mp.mpf(min(x, x0)), mp.mpf(max(x, x0)), mp.mpf(y) - mp.mpf(y0)

        def integrand(k):
            if k == 0:
                return (low + self.skin) * (self.a - high) / (self.a + self.skin)
            last = mp.exp(-2 * k * (self.a - high))
            end = mp.exp(-2 * k * self.a)
            whole = (1 - end) / 2 + self.skin * k * (1 + end) / 2
            kernel = inner(k, low, self.skin) * (1 - last) / 2 / (k * whole)
            return mp.cos(k * across) * kernel * mp.exp(-k * (high - low))

        step = 1 / max(abs(across) / 3, self.skin / 2, (high - low) / 8)
        count = int(60 / (high - low) / step) + 2
        return mp.quad(integrand, [step * j for j in range(count + 1)]) / mp.pi

    def ambient(self, x, y):
        # h = A + B x - rate x^2 / 2
        a, skin, rate = self.a, self.skin, self.rate
        slope = (self.east - self.west + rate * a * a / 2) / (a + skin)
        return self.west + skin * slope + slope * x - rate * mp.mpf(x) ** 2 / 2

    def west_share(self, x0, y0):
        return (self.a - mp.mpf(x0)) / (self.a + self.skin)


class HalfPlane:
    def __init__(self, skin, west):
        self.skin, self.west = mp.mpf(skin), mp.mpf(west)

    def green(self, x, y, x0, y0):
        zeta = mp.mpc(mp.mpf(x) + mp.mpf(x0), mp.mpf(y) - mp.mpf(y0))
        near = abs(mp.mpc(mp.mpf(x) - mp.mpf(x0), mp.mpf(y) - mp.mpf(y0)))
        w = zeta / self.skin
        return (mp.log(abs(zeta) / near) + 2 * mp.re(mp.exp(w) * mp.e1(w))) / (2 * mp.pi)

    def ambient(self, x, y):
        return self.west

    def west_share(self, x0, y0):
        return mp.mpf(1)


def assert_bank(domain, value, places):
    """h - l dh/dx is the stage (0 for Green's functions) at x = 0, the slope
    by a one-sided difference of fourth order over 0.1 m."""
    step = mp.mpf("0.1")
    for y in places:
        at = [value(j * step, y) for j in range(5)]
        slope = sum(c * h for c, h in zip((-25, 48, -36, 16, -3), at)) / (12 * step)
        assert abs(at[0] - domain.skin * slope) < mp.mpf("1e-10"), (y, at[0] - domain.skin * slope)


def wells_of(plan):
    return [(well.name, (well.at.real, well.at.imag), mp.mpf(well.pumping)) for well in plan.wells]


def box():
    plan = plans.read(HERE / "clogged_box.toml")
    skin = next(edge.skin for edge in plan.edges if edge.skin)
    domain = Box(1000, 700, skin, "411.3", "410.6", mp.mpf("0.0006") / 300)
    at = [("middle", 500.0, 350.0), ("west", 60.0, 600.0), ("north-east", 970.0, 690.0), ("south-east", 930.0, 20.0),
          ("2 mm from the mill race", 410.0, 0.002), ("1 mm from the clay, north", 330.0, 699.999),
          ("3 mm from the clay, east", 999.997, 410.0), ("near the south-west corner", 15.0, 0.003),
          ("near the silted bank", 12.0, 350.0), ("south-west", 120.0, 90.0), ("in the corner of the clay", 999.998, 699.999)]
    green = domain.green
    assert abs(green(500.0, 350.0, 240.0, 330.0) - green(240.0, 330.0, 500.0, 350.0)) < mp.mpf("1e-25")
    mp.mp.dps = 20
    # Against the image sum where the skin is nothing: x DN, y DN.
    bare = Box(3, 2, 0, 0, 0, 0)
    assert abs(bare.green(2.2, 1.45, 1.1, 0.7) - mp.mpf("0.12845483556125")) < mp.mpf("1e-14")
    mp.mp.dps = 30
    assert_bank(domain, lambda x, y: domain.green(x, y, 240.0, 330.0), [mp.mpf(350), mp.mpf(40)])
    # Each term of the ambient head meets the bank's condition.
    for k in list(domain.terms(10))[:20]:
        decay = domain.west_decay(k, mp.mpf(0))
        assert abs(decay * (1 + domain.skin * k * mp.tanh(k * domain.a)) - 1) < mp.mpf("1e-25")
    # Laplace's equation by differences, and the recharge.
    ambient = domain.ambient
    curvature = sum(ambient(500 + dx, 350 + dy) for dx, dy in ((1, 0), (-1, 0), (0, 1), (0, -1))) - 4 * ambient(500, 350)
    assert abs(curvature + domain.rate) < mp.mpf("1e-11"), curvature
    shares = lambda x, y: {"silted Ketter": domain.west_share(x, y), "mill race": 1 - domain.west_share(x, y)}
    wells = wells_of(plan)
    rows = superposed(at, wells, plan.transmissivity, domain.ambient, domain.green, 1e-12)
    return "clogged_box", rows + inflows(wells, shares, 1e-10)


def strip():
    # Its two lines are no ring, so the numbers of the plan stand here again.
    domain = Strip(600, 80, "411.3", "410.9", mp.mpf("0.0004") / 400)
    mp.mp.dps = 20
    bare = Strip(3, 0, 0, 0, 0)
    assert abs(bare.green(2.2, 1.45, 1.1, 0.7) - mp.mpf("0.072253911402")) < mp.mpf("1e-12")
    wells = [("KS-1", (170.0, 40.0), mp.mpf(750)), ("KS-2", (420.0, -210.0), mp.mpf(380))]
    at = [("middle", 300.0, 0.0), ("on the silted bank, 1 mm off", 0.001, 60.0), ("2 mm from the canal", 599.998, -190.0),
          ("north", 90.0, 340.0), ("south", 500.0, -520.0), ("far north", 250.0, 1500.0)]
    assert_bank(domain, lambda x, y: domain.green(x, y, 170.0, 40.0), [mp.mpf(60)])
    shares = lambda x, y: {"silted Ketter": domain.west_share(x, y), "east canal": 1 - domain.west_share(x, y)}
    rows = superposed(at, wells, mp.mpf(400), domain.ambient, domain.green, 1e-12)
    mp.mp.dps = 30
    return "clogged_strip", rows + inflows(wells, shares, 1e-10)


def half_plane():
    plan = plans.read(HERE / "clogged_bank.toml")
    skin = next(edge.skin for edge in plan.edges if edge.skin)
    assert abs(HalfPlane("0.7", 0).green(0.5, 0.3, 1, 0) - mp.mpf("0.259888691167")) < mp.mpf("1e-11")
    domain = HalfPlane(skin, "411.3")
    assert_bank(domain, lambda x, y: domain.green(x, y, 200.0, 0.0), [mp.mpf(0), mp.mpf(150)])
    at = [("between", 100.0, 40.0), ("on the bank, 1 mm off", 0.001, 0.0), ("down the bank, 2 mm off", 0.002, 700.0),
          ("behind", 700.0, -300.0), ("far", 9000.0, 4000.0), ("1 m from KE-1", 201.0, 0.0)]
    wells = wells_of(plan)
    rows = superposed(at, wells, plan.transmissivity, domain.ambient, domain.green, 1e-12)
    return "clogged_bank", rows + inflows(wells, lambda x, y: {"silted Ketter": mp.mpf(1)}, 1e-10)


def tables():
    yield box()
    yield strip()
    yield half_plane()


if __name__ == "__main__":
    for made in tables():
        write(*made)
