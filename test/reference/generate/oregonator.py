"""End value of the Oregonator (Hairer & Wanner 1996, IV.10) at t = 360 from (1, 2, 3).

Two unrelated integrators of SciPy (implicit Runge-Kutta of order 5, and backward differentiation in LSODA) must agree with each other and with the published value; the script fails where they do not.
"""

import numpy as np
from scipy.integrate import solve_ivp

PUBLISHED = np.array([0.1000814870318523e1, 0.1228178521549917e4, 0.1320554942846706e3])


def f(_t, y):
    return [
        77.27 * (y[1] + y[0] * (1 - 8.375e-6 * y[0] - y[1])),
        (y[2] - (1 + y[0]) * y[1]) / 77.27,
        0.161 * (y[0] - y[2]),
    ]


for method, rtol in (("Radau", 1e-11), ("LSODA", 1e-12)):
    end = solve_ivp(f, (0, 360), [1, 2, 3], method=method, rtol=rtol, atol=1e-14).y[:, -1]
    error = np.max(np.abs(end / PUBLISHED - 1))
    print(method, end.tolist(), f"relative difference from the published value {error:.2e}")
    assert error < 1e-8
