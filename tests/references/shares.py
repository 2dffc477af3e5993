"""Shares of a well's water that reaches of an outline's sides give.

The share of a reach is the harmonic measure of the reach seen from the well,
-integral of dG/dn along it. Here it is never taken from a closed form: boxes
and half-strip bases by eigenfunction series of the harmonic function that is 1
on the reach; all others by quadrature of the normal derivative of an image
sum. Over the whole outline the shares must sum to 1, and whole sides of strips
and wedges must give the known linear laws.
"""

import math

import mpmath as mp
from potential import by_images, eigenfunction, eigenvalue, solvable
from wedges import disk, wedge

mp.mp.dps = 40
COLUMNS = ["shape", "x_kinds", "x_width", "y_kinds", "y_width", "pole_x", "pole_y", "side", "from", "to", "share"]
PI = mp.pi
TWO = ["DD", "DN", "ND", "NN"]
TOLERANCE = 1e-14
STEP = mp.mpf("1e-12")


def integral(across, kinds, width, wave, start, end):
    """Integral of an eigenfunction from start to end."""
    if wave == 0:
        return end - start
    primitive = (lambda x: -mp.cos(wave * x)) if kinds[0] == "D" else (lambda x: mp.sin(wave * x))
    return (primitive(end) - primitive(start)) / wave


def profile(far_kind, width, wave, distance):
    """Harmonic profile, 1 on the reach's side, at a distance from it; the far
    side is a river, a barrier or nowhere."""
    if far_kind == "":
        return mp.exp(-wave * distance)
    if wave == 0:
        return 1 - distance / width if far_kind == "D" else mp.mpf(1)
    shape = mp.sinh if far_kind == "D" else mp.cosh
    return shape(wave * (width - distance)) / shape(wave * width)


def reach_by_series(kinds, width, position, far_kind, depth, distance, start, end):
    """Share of start..end on a side of the given width, the pole at `position`
    along it and `distance` from it, the far side at `depth`."""
    total, n = mp.mpf(0), -1
    while True:
        n += 1
        wave = eigenvalue(kinds, width, n)
        if wave is None:
            continue
        if wave * distance > 65:
            return total
        norm = (1 if wave == 0 else 2) / width
        part = integral(None, kinds, width, wave, start, end) * eigenfunction(kinds, wave, position)
        total += norm * part * profile(far_kind, depth, wave, distance)


def box_reaches(x_kinds, a, y_kinds, b, pole):
    """side number -> function of a range, in the order x low, x high, y low, y high."""
    x, y = pole.real, pole.imag
    other = lambda kinds, side: kinds[1 - side]
    sides = []
    for side, distance in ((0, x), (1, a - x)):
        sides.append((x_kinds[side], b, lambda s, e, side=side, d=distance: reach_by_series(
            y_kinds, b, y, other(x_kinds, side), a, d, s, e)))
    for side, distance in ((0, y), (1, b - y)):
        sides.append((y_kinds[side], a, lambda s, e, side=side, d=distance: reach_by_series(
            x_kinds, a, x, other(y_kinds, side), b, d, s, e)))
    return sides


def flux(value, at, normal):
    """Inflow a length at a river: G rises from 0 along the inner normal."""
    # Two steps: the first order of the difference cancels.
    near, far = value(at + STEP * normal), value(at + 2 * STEP * normal)
    return (4 * near - far) / (2 * STEP)


def reach_by_quadrature(value, place, normal, start, end, middle, scale):
    """Integral of the flux along place(t), start <= t <= end, both perhaps infinite."""
    density = lambda t: flux(value, place(t), normal(t))
    reach = scale * mp.mpf(2) ** 10
    low, high = max(start, middle - reach), min(end, middle + reach)
    knots = {middle + sign * scale * mp.mpf(4) ** k for k in range(-1, 5) for sign in (-1, 1)} | {mp.mpf(middle)}
    points = [low] + [knot for knot in sorted(knots) if low < knot < high] + [high]
    total = mp.quad(density, points, method="gauss-legendre")
    # Beyond, t = 1/u: the density falls as a power of t or faster.
    for bound, limit in ((high, end), (low, start)):
        if bound != limit:
            ends = [0, 1 / bound] if bound > 0 else [1 / bound, 0]
            total += mp.quad(lambda u: density(1 / u) / u**2, ends, method="gauss-legendre")
    return total


def straight(outline, pole):
    """Reaches of half-planes, strips, quarter-planes and half-strips."""
    x_kinds, a, y_kinds, _ = outline
    value = lambda z: by_images(z, pole, *outline)
    sides = []
    for number, kind in enumerate(x_kinds):
        offset, inward = (mp.mpf(0), mp.mpc(1)) if number == 0 else (a, mp.mpc(-1))
        scale = abs(pole.real - offset)
        sides.append((kind, lambda s, e, o=offset, n=inward, c=scale: reach_by_quadrature(
            value, lambda t: mp.mpc(o, t), lambda t: n, s, e, pole.imag, c)))
    for kind in y_kinds:
        if len(x_kinds) == 2:
            sides.append((kind, lambda s, e: reach_by_series(x_kinds, a, pole.real, "", None, pole.imag, s, e)))
        else:
            sides.append((kind, lambda s, e: reach_by_quadrature(
                value, lambda t: mp.mpc(t, 0), lambda t: mp.mpc(0, 1), s, e, pole.real, pole.imag)))
    return sides


def row(shape, outline, pole, side, start, end, share):
    x_kinds, a, y_kinds, b = outline
    return [shape, x_kinds, a, y_kinds, b, pole.real, pole.imag, side, start, end, share]


def unbounded_rows():
    infinity = mp.inf
    for shape, x_kinds, a, y_kinds in (
        [("half-plane", "D", 0.0, "")]
        + [("strip", kinds, 3.0, "") for kinds in ("DD", "DN", "ND")]
        + [("quarter-plane", x, 0.0, y) for x in "DN" for y in "DN" if solvable(x, y)]
        + [("half-strip", x, 3.0, y) for x in TWO for y in "DN" if solvable(x, y)]
    ):
        outline, pole = (x_kinds, mp.mpf(a), y_kinds, mp.mpf(0)), mp.mpc(1.125, 0.75)
        total = mp.mpf(0)
        for side, (kind, reach) in enumerate(straight(outline, pole)):
            along_x = side >= len(x_kinds)
            low = mp.mpf(0) if along_x or y_kinds else -infinity
            high = outline[1] if along_x and len(x_kinds) == 2 else infinity
            if kind == "N":
                continue
            for start, end in ((mp.mpf(0.25), mp.mpf(1.5)), (low, high)):
                share = reach(start, end)
                yield row(shape, outline, pole, side, start, end, share)
            total += share
            if shape == "strip" and x_kinds == "DD":
                linear = pole.real / 3 if side else 1 - pole.real / 3
                assert abs(share - linear) < mp.mpf("1e-14"), (share, linear)
        assert abs(total - 1) < mp.mpf("1e-14"), (shape, x_kinds, y_kinds, total)


def box_rows():
    pole = mp.mpc(1.1, 0.7)
    for x_kinds in TWO:
        for y_kinds in TWO:
            if not solvable(x_kinds, y_kinds):
                continue
            outline = (x_kinds, mp.mpf(3), y_kinds, mp.mpf(2))
            total = mp.mpf(0)
            for side, (kind, length, reach) in enumerate(box_reaches(x_kinds, mp.mpf(3), y_kinds, mp.mpf(2), pole)):
                if kind == "N":
                    continue
                for start, end in ((mp.mpf(0.25), mp.mpf(1.5)), (mp.mpf(0), length)):
                    share = reach(start, end)
                    yield row("box", outline, pole, side, start, end, share)
                total += share
            assert abs(total - 1) < mp.mpf("1e-20"), (x_kinds, y_kinds, total)


def wedge_rows():
    for degrees in (30.0, 60.0, 100.0, 270.0):
        angle = mp.mpf(math.radians(degrees))
        pole = mp.mpc(complex(2 * math.cos(0.375 * float(angle)), 2 * math.sin(0.375 * float(angle))))
        for kinds in ("DD", "DN", "ND"):
            value = lambda z: wedge(z, pole, angle, kinds)
            total = mp.mpf(0)
            for side, (kind, turn, inward) in enumerate(((kinds[0], mp.mpf(0), 1), (kinds[1], angle, -1))):
                if kind == "N":
                    continue
                axis = mp.expj(turn)
                reach = lambda s, e: reach_by_quadrature(
                    value, lambda t: t * axis, lambda t: mp.mpc(0, inward) * axis, s, e, abs(pole), abs(pole))
                share = reach(mp.mpf(1), mp.mpf(3))
                yield row("wedge", (kinds, angle, "", mp.mpf(0)), pole, side, mp.mpf(1), mp.mpf(3), share)
                # The whole side: seen on the logarithm of z the wedge is a strip.
                exact = 1 - mp.arg(pole) / angle if side == 0 else mp.arg(pole) / angle
                exact = exact if kinds == "DD" else mp.mpf(1)
                total += exact
                yield row("wedge", (kinds, angle, "", mp.mpf(0)), pole, side, mp.mpf(0), mp.inf, exact)
            assert abs(total - 1) < mp.mpf("1e-25")


def disk_rows():
    for shape, pole in (("disk", mp.mpc(0.5, 1.25)), ("disk-exterior", mp.mpc(-2.5, 1.25))):
        radius = mp.mpf(2)
        inward = -1 if shape == "disk" else 1
        value = lambda z: disk(z, pole, radius)
        for start, end in ((0.25, 1.5), (2.0, 4.0), (0.0, 2 * math.pi)):
            share = radius * mp.quad(
                lambda t: flux(value, radius * mp.expj(t), inward * mp.expj(t)),
                mp.linspace(mp.mpf(start), mp.mpf(end), 9))
            yield row(shape, ("D", radius, "", mp.mpf(0)), pole, 0, start, end, share)


def rows():
    yield from unbounded_rows()
    yield from box_rows()
    yield from wedge_rows()
    yield from disk_rows()
