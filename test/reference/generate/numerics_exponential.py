"""Reference for the operators of linear models: exponential, sink, input response, functional rows, steady state, area.

The matrix exponential of the augmented system by scaling, Taylor series and squaring in fixed point of 1800 bits (more than
500 digits), where the digits that squaring costs do not show; linear systems by mpmath's LU at 450 digits. Run from this folder:
python3 numerics_exponential.py
"""
import json
from fractions import Fraction

from mpmath import mp, mpf

from numerics_models import SEED, models

BITS = 1800
ONE = 1 << BITS
mp.dps = 450
MULTIPLES = [1e-3, 1.0, 37.0, 1e4, 1e8]
TINY = mpf(10) ** -290


def fixed(value):
    ratio = Fraction(value)
    return ratio.numerator * ONE // ratio.denominator


def multiply(a, b):
    columns = list(zip(*b))
    return [[sum(x * y for x, y in zip(row, column) if x and y) >> BITS for column in columns] for row in a]


def exponential(a, t):
    """exp(a t) in fixed point; a in fixed point, t a double."""
    n = len(a)
    scaled_t = fixed(t)
    at = [[(x * scaled_t) >> BITS for x in row] for row in a]
    norm = max(sum(abs(x) for x in row) for row in at) / ONE
    squarings = max(0, int(norm).bit_length() + 8)
    at = [[x >> squarings for x in row] for row in at]
    total = [[ONE if i == j else 0 for j in range(n)] for i in range(n)]
    term = total
    k = 0
    while any(any(row) for row in term):
        k += 1
        term = [[x // k for x in row] for row in multiply(term, at)]
        # Floor division leaves -1 where 0 is meant.
        term = [[0 if x == -1 else x for x in row] for row in term]
        total = [[x + y for x, y in zip(p, q)] for p, q in zip(total, term)]
    for _ in range(squarings):
        total = multiply(total, total)
    return total


def number(fixed_value):
    return mpf(fixed_value) / ONE


def written(value):
    """The nearest double; 0 where an entry is below 10^-290."""
    return 0.0 if abs(value) < TINY else float(value)


def rate_matrix(m):
    n = m["size"]
    k = [[fixed(m["between"][i * n + j]) for j in range(n)] for i in range(n)]
    for j in range(n):
        k[j][j] = -(fixed(m["out"][j]) + sum(k[i][j] for i in range(n) if i != j))
    return k


def functionals(m):
    """(source row, decay), exact rationals of the doubles that the program is given."""
    n, observed, volume = m["size"], m["observed"], m["volume"]
    rows = [([1.0 / volume if j == observed else 0.0 for j in range(n)], 0.0)]
    for rate in m["effects"]:
        rows.append(([rate / volume if j == observed else 0.0 for j in range(n)], rate))
    return rows


def augmented(m, k, rows):
    n, f, inputs = m["size"], len(rows), m["inputs"]
    size = n + 1 + f + len(inputs)
    a = [[0] * size for _ in range(size)]
    for i in range(n):
        a[i][:n] = k[i]
        a[n][i] = fixed(m["out"][i])
    for r, (weights, decay) in enumerate(rows):
        for j in range(n):
            a[n + 1 + r][j] = fixed(weights[j])
        a[n + 1 + r][n + 1 + r] = -fixed(decay)
    for c, place in enumerate(inputs):
        a[place][n + 1 + f + c] = ONE
    return a


def closed(m):
    return not any(m["out"])


def case(m, t, k, rows):
    n, f, inputs = m["size"], len(rows), m["inputs"]
    e = exponential(augmented(m, k, rows), t)
    first = n + 1 + f
    x = [[number(e[i][j]) for j in range(n)] for i in range(n)]
    for j in range(n):
        # Mass is conserved: what this misses by is the error of the reference, far beyond the digits that are kept.
        assert abs(sum(x[i][j] for i in range(n)) + number(e[n][j]) - 1) < mpf(10) ** -400
    phi = [[number(e[i][first + c]) for c in range(len(inputs))] for i in range(n)]
    result = {
        "duration": t,
        "transition": [written(v) for row in x for v in row],
        "sink": [written(number(e[n][j])) for j in range(n)],
        "response": [written(v) for row in phi for v in row],
        "sinkResponse": [written(number(e[n][first + c])) for c in range(len(inputs))],
        "rows": [written(number(e[n + 1 + r][j])) for r in range(f) for j in range(n)],
        "direct": [written(number(e[n + 1 + r][first + c])) for r in range(f) for c in range(len(inputs))],
    }
    if not closed(m):
        left = mp.matrix([[(1 if i == j else 0) - x[i][j] for j in range(n)] for i in range(n)])
        result["steadyAfterBolus"] = [written(v) for v in mp.lu_solve(left, mp.matrix([x[i][inputs[0]] for i in range(n)]))]
        result["steadyInfusion"] = [written(v) for v in mp.lu_solve(left, mp.matrix([phi[i][0] for i in range(n)]))]
    return result


def reference(m):
    k = rate_matrix(m)
    rows = functionals(m)
    n = m["size"]
    fastest = max(max(float(number(-k[j][j])) for j in range(n)), max(m["effects"]))
    entry = {key: m[key] for key in ("name", "size", "between", "out", "observed", "volume", "effects", "inputs")}
    if not closed(m):
        a = mp.matrix([[-number(k[i][j]) for j in range(n)] for i in range(n)])
        unit = mp.matrix([1 if i == m["inputs"][0] else 0 for i in range(n)])
        entry["areaToInfinity"] = [written(v) for v in mp.lu_solve(a, unit)]
    multiples = MULTIPLES if n < 24 else [1.0, 37.0, 1e8]
    entry["operators"] = [case(m, multiple / fastest, k, rows) for multiple in multiples]
    return entry


def write(name, entries):
    document = {
        "source": "matrix exponential of the augmented system in 1800-bit fixed point, linear systems at 450 digits (mpmath LU)",
        "generatedBy": "generate/numerics_exponential.py",
        "seed": SEED,
        "tolerance": "4 u (s + 12 + |ln entry|) relative in every entry, s doublings; entries below 1e-290 stand as 0",
        "cases": entries,
    }
    text = json.dumps(document, separators=(",", ":")).replace('{"name"', '\n{"name"').replace('{"duration"', '\n{"duration"')
    assert len(text) < 200_000, (name, len(text))
    with open(f"../numerics/{name}.json", "w") as file:
        file.write(text + "\n")


if __name__ == "__main__":
    entries = [reference(m) for m in models()]
    write("exponential-1-to-5", [e for e in entries if e["size"] <= 5])
    write("exponential-7-to-12", [e for e in entries if 5 < e["size"] <= 12])
    write("exponential-24", [e for e in entries if e["size"] > 12])
