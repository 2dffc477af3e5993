"""G and its regular part for the open to the closed axis-parallel outlines.

The half-plane, the strip, the quarter-plane, the half-strip and the box, every
combination of rivers (D) and barriers (N) that has a steady state. Each value
comes from image wells to 40 digits and is held against the eigenfunction
series to 1e-20 wherever that converges; the regular part against G at 1e-15
from the pole.
"""

import mpmath as mp
from potential import by_images, by_series, solvable

COLUMNS = ["shape", "x_kinds", "x_width", "y_kinds", "y_width", "x", "y", "pole_x", "pole_y", "value", "regular_part"]
TWO = ["DD", "DN", "ND", "NN"]

# shape, kinds across x, width, kinds across y, width, places (z, pole).
# All numbers are doubles: what stands in the table is exactly what was used.
NEAR = [(2.2 + 1.45j, 1.1 + 0.7j), (0.001 + 0.7j, 1.1 + 0.7001j), (2.999 + 1.999j, 2.9 + 1.5j), (1.5 + 1.0j, 1.5 + 1.125j)]
FAR = [(2.2 + 41.45j, 1.1 + 0.7j), (0.25 + 0.0625j, 2.75 + 30.5j)]
LARGE = [(412.5 + 61.75j, 450.0 + 1021.0j), (0.5 + 5.0j, 40.25 + 4.75j)]


def cases():
    for kind in "D":
        for z, pole in NEAR + FAR + LARGE:
            yield "half-plane", kind, 0.0, "", 0.0, z, pole
    for x_kinds in ("DD", "DN", "ND"):
        for z, pole in NEAR + FAR:
            yield "strip", x_kinds, 3.0, "", 0.0, z, pole
        for z, pole in LARGE:
            yield "strip", x_kinds, 900.0, "", 0.0, z, pole
    for x_kinds in "DN":
        for y_kinds in "DN":
            for z, pole in NEAR + FAR + LARGE:
                if solvable(x_kinds, y_kinds):
                    yield "quarter-plane", x_kinds, 0.0, y_kinds, 0.0, z, pole
    for x_kinds in TWO:
        for y_kinds in "DN":
            for z, pole in NEAR + FAR:
                if solvable(x_kinds, y_kinds):
                    yield "half-strip", x_kinds, 3.0, y_kinds, 0.0, z, pole
    for x_kinds in TWO:
        for y_kinds in TWO:
            if not solvable(x_kinds, y_kinds):
                continue
            for z, pole in NEAR:
                yield "box", x_kinds, 3.0, y_kinds, 2.0, z, pole
            for z, pole in FAR:
                yield "box", x_kinds, 3.0, y_kinds, 50.0, z, pole
            for z, pole in LARGE:
                yield "box", x_kinds, 900.0, y_kinds, 1200.0, z, pole


def rows():
    for shape, x_kinds, x_width, y_kinds, y_width, z, pole in cases():
        exact = [mp.mpc(z), mp.mpc(pole)]
        outline = (x_kinds, mp.mpf(x_width), y_kinds, mp.mpf(y_width))
        value = by_images(*exact, *outline)
        if len(x_kinds) == 2:
            series = by_series(*exact, *outline)
            assert series is None or abs(series - value) < mp.mpf("1e-20"), (shape, outline, z, pole)
        regular = by_images(exact[1], exact[1], *outline)
        small = mp.mpf("1e-15")
        beside = by_images(exact[1] + small, exact[1], *outline) + mp.log(small) / (2 * mp.pi)
        assert abs(beside - regular) < mp.mpf("1e-12"), (shape, outline, pole)
        yield [shape, x_kinds, x_width, y_kinds, y_width, z.real, z.imag, pole.real, pole.imag, value, regular]
