"""ln |theta_1(z, q)| of DLMF 20.2(i), by mpmath's q-series, held against the
infinite product DLMF 20.5.1."""

import mpmath as mp

mp.mp.dps = 40
COLUMNS = ["q", "re", "im", "ln_abs_theta1"]


def product(z, q):
    """DLMF 20.5.1."""
    total = 2 * mp.root(q, 4) * mp.sin(z)
    power = mp.mpf(1)
    for _ in range(400):
        power *= q**2
        total *= (1 - power) * (1 - 2 * power * mp.cos(2 * z) + power**2)
    return total


def rows():
    for q in (1e-30, 1e-9, 0.001, 0.0432139182637722, 0.25, 0.75):
        for re, im in ((0.5, 0.0), (1.5, 0.25), (3.0, -1.5), (0.001, 0.5), (-2.25, 1.0)):
            z, nome = mp.mpc(re, im), mp.mpf(q)
            value = mp.log(abs(mp.jtheta(1, z, nome)))
            assert abs(value - mp.log(abs(product(z, nome)))) < mp.mpf("1e-25")
            yield [q, re, im, value]
