"""A well beside a clogged river: G, its regular part, the river's inflow.

Half-plane x > 0, dG/dx = G/b on x = 0. The closed form with the exponential
integral (mpmath's e1) is held against the Fourier integral that defines it,
whose terms e^(-k(x + x0)) cos(k(y - y0)) satisfy the bank's condition one by
one; shares are quadrature of the inflow. Hantush, M.S. (1965), J. Geophys.
Res. 70:2829-2838 is the source of the bank's condition (from memory).
"""

import mpmath as mp

mp.mp.dps = 40
COLUMNS = ["skin", "x", "y", "pole_x", "pole_y", "value", "regular_part", "from", "to", "share"]


def scaled(w):
    return mp.exp(w) * mp.e1(w)


def value(z, pole, skin):
    """G; its regular part where z = pole."""
    mirrored = z + mp.conj(pole)
    total = mp.log(abs(mirrored)) + 2 * scaled(mirrored / skin).real
    if z != pole:
        total -= mp.log(abs(z - pole))
    return total / (2 * mp.pi)


def value_by_fourier(z, pole, skin):
    """A clean bank and what the skin adds, wave by wave."""
    mirrored = z + mp.conj(pole)
    integrand = lambda t: mp.exp(-t * mirrored.real) * mp.cos(t * mirrored.imag) / (t + 1 / skin)
    end = 60 / mirrored.real
    pieces = mp.linspace(0, end, 2 + int(end * (abs(mirrored.imag) + mirrored.real) / 4))
    added = mp.quad(integrand, pieces)
    return (mp.log(abs(mirrored) / abs(z - pole)) + 2 * added) / (2 * mp.pi)


def density(along, pole, skin):
    return scaled((pole.real + 1j * (along - pole.imag)) / skin).real / (mp.pi * skin)


def rows():
    reaches = [(-1.0, 1.0), (0.25, 3.5), (-40.0, 0.5)]
    cases = 0
    for skin in [1e-3, 0.05, 0.7, 1.0, 8.0, 1e3]:
        for x, y, pole_x, pole_y in [
            (0.5, 0.25, 1.0, 0.0),
            (0.0, 0.0, 1.0, 0.0),
            (0.0, 2.0, 1.0, 0.0),
            (2.0, -1.5, 1.0, 0.0),
            (0.125, 30.0, 0.5, 0.25),
            (60.0, 1.0, 3.0, -2.0),
        ]:
            z, pole, b = mp.mpc(x, y), mp.mpc(pole_x, pole_y), mp.mpf(skin)
            closed = value(z, pole, b)
            assert abs(closed - value_by_fourier(z, pole, b)) < mp.mpf("1e-16"), (skin, z, pole)
            start, end = reaches[cases % 3]
            ends = [mp.mpf(start), *(mp.mpf(pole_y) + k * pole_x for k in (-8, -2, 0, 2, 8)), mp.mpf(end)]
            ends = sorted(e for e in ends if start <= e <= end)
            share = mp.quad(lambda along: density(along, pole, b), ends)
            yield [skin, x, y, pole_x, pole_y, closed, value(pole, pole, b), start, end, share]
            cases += 1
