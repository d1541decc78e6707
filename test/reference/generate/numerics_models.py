"""Compartment models on which the numerical methods are tried: rates as doubles, taken as exact.

Each model: name, size, between (row-major, [i * size + j] from j to i), out, observed compartment, its volume,
effect-site rates, compartments that take an input.
"""
import random

SEED = 20260117


def model(name, size, arrows, out, observed, inputs, effects, volume=1.0):
    between = [0.0] * (size * size)
    for source, target, rate in arrows:
        between[target * size + source] = float(rate)
    leaving = [0.0] * size
    for source, rate in out:
        leaving[source] = float(rate)
    return {
        "name": name, "size": size, "between": between, "out": leaving, "observed": observed,
        "volume": float(volume), "effects": [float(e) for e in effects], "inputs": list(inputs),
    }


def both(a, b, there, back):
    return [(a, b, there), (b, a, back)]


def models():
    draw = random.Random(SEED)
    found = [
        model("one compartment", 1, [], [(0, 0.173)], 0, [0], [0.4], 17.4),
        model("two compartments, nothing leaves", 2, both(0, 1, 0.7, 0.2), [], 0, [0], [0.35], 10),
        model("depot and one compartment", 2, [(0, 1, 0.9)], [(1, 0.0863)], 1, [0, 1], [0.25, 1.7], 17.4),
        model("absorption as fast as elimination to one part in 10^9", 2, [(0, 1, 0.3 * (1 + 1e-9))], [(1, 0.3)], 1, [0, 1], [0.3], 21),
        model("depot, central, peripheral", 3, [(0, 1, 0.9)] + both(1, 2, 0.5172, 0.2368), [(1, 0.0863)], 1, [0, 1], [0.4], 17.4),
        model("remifentanil, simple model, per minute", 3,
              both(0, 1, 1.69 / 4.98, 1.69 / 9.01) + both(0, 2, 0.065 / 4.98, 0.065 / 6.54), [(0, 2.46 / 4.98)], 0, [0], [0.516], 4.98),
        model("exchange 10^8 times as fast as elimination", 3, [(0, 1, 1.0)] + both(1, 2, 6e7, 4e7), [(1, 0.37)], 1, [0, 1], [0.21, 9e7], 3),
        model("elimination 10^-8 of the exchange, from the slow side", 3, both(0, 1, 1.0, 1e-3) + both(1, 2, 2e-5, 1e-7), [(2, 1e-8)], 0, [0], [0.05], 5),
        model("bile returned to the gut", 4, [(0, 1, 1.1), (1, 2, 0.4), (2, 3, 0.25), (3, 0, 0.5)], [(1, 0.12)], 1, [0, 1], [0.6], 30),
        model("ring of four equal rates", 4, [(0, 1, 1), (1, 2, 1), (2, 3, 1), (3, 0, 1)], [(0, 0.1)], 0, [0], [1.0], 8),
        model("depot and three peripheral compartments, two of them alike", 5,
              [(0, 1, 2.0)] + both(1, 2, 1.0, 0.5) + both(1, 3, 1.0, 0.5 * (1 + 1e-10)) + both(1, 4, 3.0, 0.01), [(1, 0.2)], 1, [0, 1], [0.7], 12),
        model("transit through five stages of equal rate", 7, [(k, k + 1, 1.5) for k in range(6)], [(6, 0.11)], 6, [0], [0.9], 25),
        model("chain of exchanges, rates 10^4 to 10^-4", 8,
              [arrow for k in range(7) for arrow in both(k, k + 1, 10.0 ** (4 - k), 10.0 ** (3.5 - k))], [(0, 0.02), (7, 3e-5)], 0, [0, 7], [40.0], 6),
        model("eight compartments, all rates random over eight decades", 8,
              [(j, i, 10 ** draw.uniform(-4, 4)) for i in range(8) for j in range(8) if i != j], [(3, 10 ** draw.uniform(-4, 0))], 0, [0], [2.2], 14),
        model("ten stages of nearly equal rate", 10, [(k, k + 1, 2.0 * (1 + 1e-7 * draw.uniform(-1, 1))) for k in range(9)], [(9, 2.0)], 9, [0], [2.0], 40),
        model("blood and eleven tissues", 12,
              [arrow for k in range(1, 12) for arrow in both(0, k, 10 ** draw.uniform(-1, 2), 10 ** draw.uniform(-3, 1))], [(0, 0.05), (5, 1.3)], 0, [0, 3], [0.8], 5.2),
        model("transit through twenty-one stages, then exchange", 24,
              [(k, k + 1, 6.0) for k in range(22)] + both(22, 23, 0.4, 0.07), [(22, 0.15)], 22, [0], [0.5], 60),
        model("ring of twenty-four", 24, [(k, (k + 1) % 24, 3.0 + 0.05 * k) for k in range(24)], [(11, 0.02)], 0, [0], [0.3], 9),
    ]
    return found
