"""G and its regular part in wedges of any angle, and disks.

A wedge 0 < arg z < angle becomes a half-plane or a quarter-plane by a power of
z; where the angle is pi/n (two rivers) or pi/(2n) (a river and a barrier) the
value is held against the finite sum of image wells, elsewhere against the
conditions that make it the only one: zero on rivers, no slope across barriers.
Disks are one inversion (Milne-Thomson 1940), held against the same conditions.
"""

import math

import mpmath as mp

mp.mp.dps = 40
COLUMNS = ["shape", "kinds", "size", "x", "y", "pole_x", "pole_y", "value", "regular_part"]

ANGLES_DEG = [10.0, 30.0, 36.0, 45.0, 60.0, 75.0, 100.0, 120.0, 135.0, 200.0, 270.0, 330.0, 360.0]


def wedge(z, pole, angle, kinds):
    """G by conformal map; the regular part where z = pole."""
    if kinds == "ND":
        # Turned over, the river lies on arg z = 0.
        over = lambda w: mp.conj(w) * mp.expj(angle)
        return wedge(over(z), over(pole), angle, "DN")
    power = mp.pi / angle if kinds == "DD" else mp.pi / (2 * angle)

    def mapped(w):
        turn = mp.arg(w)
        return abs(w) ** power * mp.expj(power * (turn if turn >= 0 else turn + 2 * mp.pi))

    a, b = mapped(z), mapped(pole)
    signs = [(-1, mp.conj(b))] if kinds == "DD" else [(-1, mp.conj(b)), (1, -mp.conj(b)), (-1, -b)]
    total = sum(-sign * mp.log(abs(a - image)) for sign, image in signs)
    # Near the pole a - b = (z - pole) * derivative of the map.
    total -= mp.log(abs(a - b)) if z != pole else mp.log(power * abs(b) / abs(pole))
    return total / (2 * mp.pi)


def wedge_by_images(z, pole, n, kinds):
    """2n signed wells on a circle around the apex (Ferris et al. 1962)."""
    total = mp.mpf(0)
    for j in range(n):
        turned = 2 * j * mp.pi / n
        sign = 1 if kinds == "DD" else (-1) ** j
        total -= sign * mp.log(abs(z - pole * mp.expj(turned)))
        total += sign * mp.log(abs(z - mp.conj(pole) * mp.expj(-turned)))
    return total / (2 * mp.pi)


def hold_wedge(z, pole, angle, degrees, kinds):
    n = 180.0 / degrees
    if n == int(n) and (kinds == "DD" or (kinds == "DN" and n % 2 == 0)):
        # The double nearest to the angle is not pi/n itself: 1e-15 apart.
        assert abs(wedge(z, pole, angle, kinds) - wedge_by_images(z, pole, int(n), kinds)) < mp.mpf("1e-13")
    step = mp.mpf("1e-20")
    for radius in (mp.mpf("0.3"), abs(pole), mp.mpf(7)):
        for kind, turn, inward in ((kinds[0], mp.mpf(0), 1), (kinds[1], angle, -1)):
            edge = wedge(radius * mp.expj(turn + inward * step), pole, angle, kinds)
            inside = wedge(radius * mp.expj(turn + inward * 2 * step), pole, angle, kinds)
            assert abs(edge) < mp.mpf("1e-15") if kind == "D" else abs(inside - edge) < mp.mpf("1e-30")


def disk(z, pole, radius):
    """G inside and outside a fixed-head circle; the regular part at the pole."""
    top = mp.log(abs(radius**2 - mp.conj(pole) * z) / radius)
    return (top - (mp.log(abs(z - pole)) if z != pole else 0)) / (2 * mp.pi)


def rows():
    for degrees in ANGLES_DEG:
        angle = math.radians(degrees)
        for kinds in ("DD", "DN", "ND"):
            for radius, share, pole_radius, pole_share in (
                (2.125, 0.25, 1.375, 0.5), (1.0, 0.875, 250.0, 0.125), (0.001, 0.5, 3.0, 0.0625),
            ):
                place = lambda r, part: complex(r * math.cos(part * angle), r * math.sin(part * angle))
                z, pole = mp.mpc(place(radius, share)), mp.mpc(place(pole_radius, pole_share))
                exact = mp.mpf(angle)
                hold_wedge(z, pole, exact, degrees, kinds)
                yield ["wedge", kinds, angle, z.real, z.imag, pole.real, pole.imag,
                       wedge(z, pole, exact, kinds), wedge(pole, pole, exact, kinds)]
    for shape, size, places in (
        ("disk", 2.0, [(-0.8 + 0.9j, 0.5 + 0.6j), (1.999 + 0.01j, 1.9 - 0.125j), (0.5j, 0j)]),
        ("disk-exterior", 2.0, [(2.2 + 1.9j, 3.5 + 0.6j), (2.001 + 0j, 40.5 - 3.25j), (-1000.0 + 5.0j, 2.125 + 0.25j)]),
        ("disk-exterior", 350.0, [(412.5 + 61.75j, 450.0 + 1021.0j)]),
    ):
        for z, pole in places:
            radius, z, pole = mp.mpf(size), mp.mpc(z), mp.mpc(pole)
            for turn in (0.3, 1.7, 4.0):
                assert abs(disk(radius * mp.expj(turn), pole, radius)) < mp.mpf("1e-30")
            yield [shape, "D", size, z.real, z.imag, pole.real, pole.imag,
                   disk(z, pole, radius), disk(pole, pole, radius)]
