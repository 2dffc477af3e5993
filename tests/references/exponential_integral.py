"""e^w E1(w) in the right half-plane (DLMF 6.2.1), mpmath's e1 held against the
integral of e^(-t)/(w + t) that DLMF 6.2.2 and 6.7.1 make of it."""

import mpmath as mp

mp.mp.dps = 40
COLUMNS = ["w_re", "w_im", "re", "im"]


def rows():
    for size in [2**-30, 2**-10, 0.125, 0.5, 1.0, 1.25, 1.2578125, 1.5, 2.0, 4.0, 8.0, 16.0, 40.0, 128.0, 4096.0, 2.0**60]:
        for turn in [(1, 0), (0.96875, 0.25), (0.625, 0.75), (0.1875, -1), (0.0078125, 1), (2**-20, -1), (2**-40, 1)]:
            w = mp.mpc(size * turn[0], size * turn[1])
            value = mp.exp(w) * mp.e1(w)
            if 1 <= size <= 8:
                ends = [0, 1, 2, 4, 8, 16, 32, 64, 128]
                if abs(w.imag) > 10 * w.real:
                    # Away from the pole at t = -w, along a turned ray.
                    ray = mp.expj(mp.sign(w.imag) * mp.mpf("0.7"))
                else:
                    ray = mp.mpf(1)
                integral = mp.quad(lambda t: mp.exp(-ray * t) / (w + ray * t) * ray, ends)
                assert abs(integral - value) < mp.mpf("1e-20"), (w, value, integral)
            yield [w.real, w.imag, value.real, value.imag]
