"""The half-plane sum of `kernels.rs` in numpy: prints nanoseconds a node and well."""
import statistics
import time

import numpy as np

SIDE, WELLS, REPEATS = 1000, 20, 5

column = np.arange(SIDE) + 100.5
x, y = np.meshgrid(column, column)
number = np.arange(WELLS)
well_x = 600.0 + 90.0 * np.sqrt(number) * np.cos(2.4 * number)
well_y = 600.0 + 90.0 * np.sqrt(number) * np.sin(2.4 * number)
strength = 1.0 + 0.1 * number


def half_plane():
    total = np.zeros_like(x)
    for a, b, q in zip(well_x, well_y, strength):
        squared = np.maximum((x - a) ** 2 + (y - b) ** 2, 0.04)
        total += q / (4.0 * np.pi) * np.log1p(4.0 * a * x / squared)
    return total


half_plane()
times = []
for _ in range(REPEATS):
    start = time.perf_counter()
    half_plane()
    times.append(time.perf_counter() - start)
print(statistics.median(times) * 1e9 / (SIDE * SIDE * WELLS))
