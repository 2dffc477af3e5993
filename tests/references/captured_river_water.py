"""Share of a well's water that is river water, against ambient flow to the river.

A well at d from a straight river pumps beta times the critical rate pi d q0,
with q0 the ambient flow a unit of width toward the river (Newsom & Wilson
1988, Ground Water 26(6), from memory; Wilson 1993). The closed form is held
against quadrature of the net inflow over the losing reach.
"""

import mpmath as mp

mp.mp.dps = 30
COLUMNS = ["beta", "river_share", "losing_half_reach_over_d", "stagnation_over_d"]


def rows():
    for beta in (0.5, 0.75, 1.5, 2.0, 3.0, 5.0, 10.0, 100.0):
        ratio = mp.mpf(beta)
        if ratio < 1:
            yield [beta, 0, 0, mp.sqrt(1 - ratio)]
            continue
        reach = mp.sqrt(ratio - 1)
        share = 2 / mp.pi * (mp.atan(reach) - reach / ratio)
        # d = q0 = 1: inflow by the well minus the ambient outflow.
        net = mp.quad(lambda y: ratio / (1 + y * y) - 1, [-reach, 0, reach]) / (ratio * mp.pi)
        assert abs(net - share) < mp.mpf("1e-20")
        yield [beta, share, reach, 0]
