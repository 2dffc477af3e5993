"""The mound that recharge builds between rivers, and where its water goes.

T div grad u = -N with u = 0 on rivers and no flow across barriers; the columns
hold u T/N, its slopes, and the area whose recharge leaves through a reach.
Everything is summed from eigenfunctions. A barrier mirrors its river, so boxes
unfold to boxes of four rivers: a parabola along y and the waves in y that take
it to zero at both ends of x, held against the same with x and y exchanged. The
water through a reach is the waves' normal derivative, integrated term by term.
"""

import itertools

import mpmath as mp

mp.mp.dps = 40
COLUMNS = "x_kinds x_width y_kinds y_width x y rise slope_x slope_y side from to area".split()
PI = mp.pi
ENOUGH = 55


def odd():
    return itertools.count(1, 2)


def unfold(kinds, width):
    """Distance of the two rivers, and the map of a position to that from a river."""
    if kinds == "DD":
        return width, lambda a: a
    return 2 * width, (lambda a: a) if kinds == "DN" else (lambda a: width - a)


def waves(along, span, distance, end):
    """Sum of the waves sin(k along)/n^3, k = n pi/span, that start at distance
    0 and, unless `end` is None, at distance `end` too."""
    total = mp.mpf(0)
    for n in odd():
        k = n * PI / span
        near = distance if end is None else min(distance, end - distance)
        if k * near > ENOUGH:
            return 4 * span**2 / PI**3 * total
        fade = mp.exp(-k * distance)
        if end is not None:
            fade = (fade + mp.exp(-k * (end - distance))) / (1 + mp.exp(-k * end))
        total += mp.sin(k * along) * fade / n**3


def rise(x, y, w, v):
    """u T/N between rivers at 0 and w, and at 0 and v (None: one river at y = 0;
    0: none)."""
    if v == 0:
        return x * (w - x) / 2
    if v is None:
        return x * (w - x) / 2 - waves(x, w, y, None)
    return y * (v - y) / 2 - waves(y, v, x, w)


def polylog_sum(angle):
    """Sum of cos(n angle)/n^3 over odd n."""
    z = mp.expj(angle)
    return (mp.polylog(3, z) - mp.polylog(3, z * z) / 8).real


def drained_on_x(start, end, w, v):
    """Area drained by the river x = 0 between start and end."""
    if v == 0:
        return w / 2 * (end - start)
    if v is None:
        # w/2 - sum of (4w/pi^2) e^(-ky)/n^2, integrated.
        part = lambda y: mp.nsum(lambda m: mp.exp(-(2 * m + 1) * PI * y / w) / (2 * m + 1) ** 3, [0, mp.inf]) if y else 7 * mp.zeta(3) / 8
        return w / 2 * (end - start) + 4 * w**2 / PI**3 * (part(end) - part(start))
    # Waves in y: sum of (4v/pi^2) tanh(kw/2) sin(ky)/n^2, integrated.
    total = polylog_sum(PI * start / v) - polylog_sum(PI * end / v)
    for n in odd():
        k = n * PI / v
        if k * w > ENOUGH + 40:
            return 4 * v**2 / PI**3 * total
        total -= 2 / (mp.exp(k * w) + 1) * (mp.cos(k * start) - mp.cos(k * end)) / n**3


def drained_on_base(start, end, w, v):
    """Area drained by the river y = 0 between x = start and end."""
    if v is None:
        return 4 * w**2 / PI**3 * (polylog_sum(PI * start / w) - polylog_sum(PI * end / w))
    return drained_on_x(start, end, v, w)


def drained(side, start, end, x_kinds, a, y_kinds, b):
    kinds = x_kinds + y_kinds
    if kinds[side] == "N":
        return mp.mpf(0)
    if x_kinds == "NN":
        return drained(side - 2, start, end, y_kinds, b, x_kinds, a)
    w, from_x = unfold(x_kinds, a)
    ordered = lambda f: sorted([f(mp.mpf(start)), f(mp.mpf(end))])
    if y_kinds in ("", "N", "NN"):
        return drained_on_x(start, end, w, 0)
    if y_kinds == "D":
        v, from_y = None, lambda y: y
    else:
        v, from_y = unfold(y_kinds, b)
    if side < 2:
        return drained_on_x(*ordered(from_y), w, v)
    return drained_on_base(*ordered(from_x), w, v)


def mound(x, y, x_kinds, a, y_kinds, b):
    if x_kinds == "NN":
        return mound(y, x, y_kinds, b, x_kinds, a)
    w, from_x = unfold(x_kinds, a)
    if y_kinds in ("", "N", "NN"):
        return rise(from_x(x), y, w, 0)
    if y_kinds == "D":
        return rise(from_x(x), y, w, None)
    v, from_y = unfold(y_kinds, b)
    one, other = rise(from_x(x), from_y(y), w, v), rise(from_y(y), from_x(x), v, w)
    assert abs(one - other) < mp.mpf("1e-20"), (x_kinds, y_kinds, x, y, one, other)
    return one


def rows():
    pairs = ["DD", "DN", "ND", "NN"]
    outlines = [(x, y) for x in pairs for y in ["", "D", "N", *pairs]]
    outlines = [(x, y) for x, y in outlines if "D" in x or ("D" in y and len(y) == 2)]
    for x_kinds, y_kinds in outlines:
        for a, b in [(3.0, 2.0), (2.0, 3.0), (1.0, 7.0)]:
            if len(y_kinds) < 2 and a == 2.0:
                continue
            for fx, fy in [(0.375, 0.5), (0.125, 0.0625), (0.75, 0.9375)]:
                x, y = mp.mpf(fx) * mp.mpf(a), mp.mpf(fy) * mp.mpf(b)
                here = lambda x, y: mound(x, y, x_kinds, mp.mpf(a), y_kinds, mp.mpf(b))
                step = mp.mpf("1e-9")
                slope_x = (here(x + step, y) - here(x - step, y)) / (2 * step)
                slope_y = (here(x, y + step) - here(x, y - step)) / (2 * step)
                side = [0, 1, 2, 3][int(fx * 8) % max(2, 2 + len(y_kinds))]
                length = b if side < 2 else a
                start, end = length * 0.25, length * 0.625
                area = drained(side, start, end, x_kinds, mp.mpf(a), y_kinds, mp.mpf(b))
                yield [x_kinds, a, y_kinds, b, x, y, here(x, y), slope_x, slope_y, side, start, end, area]
