"""The two problems of test/bench/rosenbrockProblems.ts by SciPy's LSODA, restarted at each dose, with analytic Jacobian.

PROBLEM RELATIVE REPEATS: prints microseconds of processor time a solve, then what is compared at the end of every interval.
"""

import sys
import time

import numpy as np
from scipy.integrate import solve_ivp


def saturable(_t, y):
    exchanged = 5 * y[1] - 0.5 * y[2]
    absorbed = 1.1 * y[0]
    eliminated = 18 * y[1] / (50 + y[1]) if y[1] > 0 else 0.36 * y[1]
    return [-absorbed, absorbed - exchanged - eliminated, exchanged]


def saturable_jacobian(_t, y):
    slope = 900 / (50 + y[1]) ** 2 if y[1] > 0 else 0.36
    return [[-1.1, 0, 0], [1.1, -5 - slope, 0.5], [0, 5, -0.5]]


def target(_t, y):
    exchanged = 0.007 * y[0] - 0.01 * y[1]
    bound = 10 / 3 * y[0] * y[2] - 0.5 * y[3]
    return [
        -exchanged - bound - 0.003 * y[0],
        exchanged,
        0.06 - bound - 0.02 * y[2],
        bound - 0.005 * y[3],
    ]


def target_jacobian(_t, y):
    a, b = 10 / 3 * y[2], 10 / 3 * y[0]
    return [
        [-0.01 - a, 0.01, -b, 0.5],
        [0.007, -0.01, 0, 0],
        [-a, 0, -b - 0.02, 0.5],
        [a, 0, b, -0.505],
    ]


PROBLEMS = {
    "saturable": (saturable, saturable_jacobian, [0, 0, 0], 180, 12, 28, 1),
    "target-mediated": (target, target_jacobian, [0, 0, 3, 0], 30, 336, 6, 0),
}
f, jacobian, initial, dose, every, doses, compared = PROBLEMS[sys.argv[1]]
relative = float(sys.argv[2])
repeats = int(sys.argv[3])
start = time.process_time()
for _ in range(repeats):
    y = np.array(initial, dtype=float)
    ends = []
    for _ in range(doses):
        y[0] += dose
        y = solve_ivp(
            f, (0, every), y, method="LSODA", jac=jacobian, rtol=relative, atol=1e-3 * relative * dose
        ).y[:, -1]
        ends.append(float(y[compared]))
print((time.process_time() - start) / repeats * 1e6, *ends)
