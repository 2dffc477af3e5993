"""Green's functions of axis-parallel outlines, to 40 digits, each in two ways.

-div grad G = delta; a side is 'D' (fixed head, G = 0) or 'N' (no flow). Kinds
come as text: 'D' or 'DN' for the sides across an axis, '' for none; widths
where there are two.

One way sums image wells through sin and theta functions (DLMF 20.2, 20.5);
the other sums eigenfunctions and knows nothing of images. They must agree.
"""

import mpmath as mp

mp.mp.dps = 40
PI = mp.pi


def images(kinds, width, position):
    """Period (0 for none), signed places of one period, centre of antisymmetry."""
    sign = {"D": -1, "N": 1}
    if kinds == "":
        return 0, [(1, position)], 0
    if len(kinds) == 1:
        return 0, [(1, position), (sign[kinds], -position)], 0
    if kinds[0] == kinds[1]:
        return 2 * width, [(1, position), (sign[kinds[0]], -position)], 0
    if kinds == "DN":
        return 4 * width, [(1, position), (-1, -position), (1, 2 * width - position), (-1, position - 2 * width)], 0
    return 4 * width, [(1, position), (1, -position), (-1, 2 * width - position), (-1, 2 * width + position)], width


def by_images(z, pole, x_kinds, x_width, y_kinds, y_width, rim=None):
    """G by image wells; with z = pole and no rim, the regular part of G."""
    if len(x_kinds) < len(y_kinds) or (len(x_kinds) == len(y_kinds) == 2 and x_width > y_width):
        # The shorter period, or the only one, goes along x.
        turned = lambda w: mp.mpc(w.imag, w.real)
        return by_images(turned(z), turned(pole), y_kinds, y_width, x_kinds, x_width, rim)
    x_period, columns, _ = images(x_kinds, x_width, pole.real)
    y_period, rows, centre = images(y_kinds, y_width, pole.imag)
    nome = mp.exp(-PI * y_period / x_period) if y_period else mp.mpf(0)

    def logarithm(w):
        """ln |kernel| of one row or lattice of wells; at 0 its regular part."""
        if not x_period:
            return mp.log(abs(w)) if w else mp.mpf(0)
        if not y_period:
            return mp.log(abs(2 * mp.sin(PI * w / x_period))) if w else mp.log(2 * PI / x_period)
        if not w:
            return mp.log(PI / x_period * mp.jtheta(1, 0, nome, 1))
        return mp.log(abs(mp.jtheta(1, PI * w / x_period, nome)))

    total, moment = mp.mpf(0), mp.mpf(0)
    for column_sign, x in columns:
        for row_sign, y in rows:
            total -= column_sign * row_sign * logarithm(z - mp.mpc(x, y))
            moment += column_sign * row_sign * y
    if y_period:
        total -= 2 * PI / (x_period * y_period) * moment * (z.imag - centre)
    return total / (2 * PI)


def eigenvalue(kinds, width, n):
    """n-th wave number across an axis of two sides; none for n = 0 of two rivers."""
    if kinds == "DD":
        return n * PI / width if n else None
    return n * PI / width if kinds == "NN" else (n + mp.mpf(1) / 2) * PI / width


def eigenfunction(kinds, wave, x):
    return mp.sin(wave * x) if kinds[0] == "D" else mp.cos(wave * x)


def along(kinds, width, wave, y, pole_y):
    """Green's function of -g'' + wave^2 g = delta along the other axis."""
    low, high = min(y, pole_y), max(y, pole_y)
    if kinds == "":
        return mp.exp(-wave * (high - low)) / (2 * wave)
    bottom = mp.sinh if kinds[0] == "D" else mp.cosh
    if len(kinds) == 1:
        return bottom(wave * low) * mp.exp(-wave * high) / wave
    if wave == 0:
        return {"DD": low * (width - high) / width, "DN": low, "ND": width - high}[kinds]
    top = mp.sinh if kinds[1] == "D" else mp.cosh
    whole = mp.sinh if kinds[0] == kinds[1] else mp.cosh
    return bottom(wave * low) * top(wave * (width - high)) / (wave * whole(wave * width))


def by_series(z, pole, x_kinds, x_width, y_kinds, y_width):
    """G by eigenfunctions across x; None where the series is too slow."""
    apart = abs(z.imag - pole.imag)
    terms = int(60 * x_width / (PI * apart)) + 2 if apart else 10**9
    if terms > 4000:
        return None
    if x_kinds == "NN" and len(y_kinds) < 2:
        return strip_of_barriers_by_series(z, pole, x_width, y_kinds, terms)
    total = mp.mpf(0)
    for n in range(terms):
        wave = eigenvalue(x_kinds, x_width, n)
        if wave is None:
            continue
        norm = (1 if wave == 0 else 2) / x_width
        across = eigenfunction(x_kinds, wave, z.real) * eigenfunction(x_kinds, wave, pole.real)
        total += norm * across * along(y_kinds, y_width, wave, z.imag, pole.imag)
    return total


def strip_of_barriers_by_series(z, pole, width, base, terms):
    """Half-strip between barriers: its lowest term is that of a line, min(y, y0)."""
    assert base == "D", "between barriers only a river at the base holds the head"
    total = min(z.imag, pole.imag) / width
    for n in range(1, terms):
        wave = n * PI / width
        across = mp.cos(wave * z.real) * mp.cos(wave * pole.real)
        total += 2 / width * across * along(base, None, wave, z.imag, pole.imag)
    return total


def solvable(x_kinds, y_kinds):
    """Whether the head is held: a river somewhere."""
    return "D" in x_kinds + y_kinds
