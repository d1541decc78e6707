"""Reference for the elementary functions and the normal quantile: mpmath at 50 digits. Run: python3 numerics_functions.py"""
import json
import random

from mpmath import mp, mpf

SEED = 20260118
mp.dps = 50


def write(name, document):
    with open(f"../numerics/{name}.json", "w") as file:
        file.write(json.dumps(document, separators=(",", ":")) + "\n")


def quantile(p):
    """Root of the distribution function, by Newton's method in its logarithm."""
    p = mpf(p)
    if p > 0.5:
        return -quantile(1 - p)
    x = -mp.sqrt(-2 * mp.log(p)) if p < 0.05 else mp.sqrt(2) * (p - 0.5) * 2
    for _ in range(200):
        value = mp.erfc(-x / mp.sqrt(2)) / 2
        step = mp.log(value / p) * value / mp.npdf(x)
        x -= step
        if abs(step) < mpf(10) ** -45:
            return x
    raise ArithmeticError(p)


def functions(draw):
    wide = [draw.uniform(-700, 700) for _ in range(40)] + [draw.choice((-1, 1)) * 10 ** draw.uniform(-18, 1) for _ in range(60)]
    positive = [10 ** draw.uniform(-300, 300) for _ in range(40)] + [1 + draw.choice((-1, 1)) * 10 ** draw.uniform(-12, -0.4) for _ in range(60)]
    above_minus_one = [x for x in wide if x > -1]
    inside = [draw.uniform(-1, 1) for _ in range(60)] + [1 - 10 ** draw.uniform(-12, -1) for _ in range(20)]
    powers = [(10 ** draw.uniform(-3, 3), draw.uniform(-4, 4)) for _ in range(100)]
    return {
        "exp": [[x, float(mp.exp(x))] for x in wide],
        "expm1": [[x, float(mp.expm1(x))] for x in wide],
        "ln": [[x, float(mp.log(x))] for x in positive],
        "log1p": [[x, float(mp.log1p(x))] for x in above_minus_one],
        "cos": [[x, float(mp.cos(x))] for x in wide],
        "acos": [[x, float(mp.acos(x))] for x in inside],
        "pow": [[x, float(mp.power(x, y)), y] for x, y in powers],
    }


if __name__ == "__main__":
    draw = random.Random(SEED)
    points = [10 ** draw.uniform(-300, -1) for _ in range(60)] + [draw.uniform(0.001, 0.999) for _ in range(120)]
    points += [0.075, 0.925, 0.0749999, 1 - 2.0 ** -53, 1 - 1e-9, 1.3887943864964e-11]
    write("normal-quantile", {
        "source": "root of the normal distribution function, mpmath at 50 digits", "generatedBy": "generate/numerics_functions.py",
        "seed": SEED, "tolerance": 2e-15, "cases": [[p, float(quantile(p))] for p in points if p != 0.5],
    })
    write("elementary", {
        "source": "mpmath at 50 digits", "generatedBy": "generate/numerics_functions.py", "seed": SEED,
        "tolerance": "relative, in rounding units of 2.2e-16: see the test", "cases": functions(draw),
    })
