"""Reference for eigenvalues and response coefficients: mpmath's QR algorithm and eigenvectors at 240 digits.

Eigenvalues are listed for each strongly connected component (the matrix is block triangular over them); a component of
one compartment has its outflow. Coefficients of weights . exp(K t) e_from belong to the listed eigenvalues and are given
where all eigenvalues on the path are distinct. Run from this folder: python3 numerics_spectrum.py
"""
import json

from mpmath import mp, mpf

from numerics_models import SEED, model, both, models

mp.dps = 240


def outflow(m, j):
    n = m["size"]
    return mpf(m["out"][j]) + sum(mpf(m["between"][i * n + j]) for i in range(n))


def reach(m):
    n = m["size"]
    to = [[i == j or m["between"][i * n + j] > 0 for j in range(n)] for i in range(n)]
    for k in range(n):
        for i in range(n):
            for j in range(n):
                to[i][j] = to[i][j] or (to[i][k] and to[k][j])
    return to


def components(m, to):
    n = m["size"]
    found = []
    for j in range(n):
        group = [i for i in range(n) if to[i][j] and to[j][i]]
        if group not in found:
            found.append(group)
    return found


def matrix(m, members):
    n = m["size"]
    return mp.matrix([[outflow(m, j) if i == j else -mpf(m["between"][i * n + j]) for j in members] for i in members])


def eigenvalues(m, groups):
    values = []
    for group in groups:
        if len(group) == 1:
            values.append(mp.mpc(outflow(m, group[0])))
        else:
            values.extend(mp.mpc(v) for v in mp.eig(matrix(m, group), left=False, right=False))
    # As doubles: the real parts of a pair differ in their last digits.
    return sorted((pair(v) for v in values), key=lambda v: (-v[0], -v[1]))


def coefficients(m, to, weights, source):
    n = m["size"]
    passed = [i for i in range(n) if to[i][source] and any(weights[r] and to[r][i] for r in range(n))]
    values, left, right = mp.eig(matrix(m, passed), left=True, right=True)
    for a in range(len(values)):
        for b in range(a):
            if abs(values[a] - values[b]) < mpf(10) ** -15 * abs(values[a]):
                return None
    found = []
    for k, value in enumerate(values):
        overlap = sum(left[k, i] * right[i, k] for i in range(len(passed)))
        seen = sum(mpf(weights[i]) * right[row, k] for row, i in enumerate(passed))
        found.append((value, seen * left[k, passed.index(source)] / overlap))
    return sorted(found, key=lambda pair: -pair[0].real)


def pair(value):
    """[real, imaginary] as doubles; an imaginary part that is nothing but rounding at 240 digits is 0."""
    imaginary = 0.0 if abs(value.imag) < mpf(10) ** -100 * abs(value) else float(value.imag)
    real = 0.0 if abs(value.real) < mpf(10) ** -200 else float(value.real)
    return [real, imaginary]


def entry(m):
    to = reach(m)
    groups = components(m, to)
    weights = [1.0 / m["volume"] if i == m["observed"] else 0.0 for i in range(m["size"])]
    result = {key: m[key] for key in ("name", "size", "between", "out")}
    result["eigenvalues"] = eigenvalues(m, groups)
    result["responses"] = []
    for source in sorted({m["observed"], m["inputs"][0]}):
        if m["size"] == 24:
            continue
        found = coefficients(m, to, weights, source)
        terms = None if found is None else [{"rate": pair(v), "coefficient": pair(c)} for v, c in found]
        result["responses"].append({"from": source, "weights": weights, "terms": terms})
    return result


def stiff():
    """Beside the models of the exponential: stiffness to 10^12, and rings whose eigenvalues are real, complex or nearly equal."""
    return [
        model("exchange 10^12 times as fast as elimination", 3, both(0, 1, 3e11, 7e10) + both(1, 2, 4.0, 0.3), [(1, 0.5)], 0, [0], [], 2),
        model("one-way ring over fourteen decades", 4, [(0, 1, 1e7), (1, 2, 1e2), (2, 3, 1e-2), (3, 0, 1e-5)], [(2, 1e-7)], 0, [0], [], 3),
        model("triangle of exchanges with a net circulation", 3, both(0, 1, 5.0, 0.1) + both(1, 2, 4.0, 0.2) + both(2, 0, 6.0, 0.15), [(0, 0.4)], 0, [0], [], 7),
        model("two exchanges one after the other", 5, [(0, 1, 0.8)] + both(1, 2, 0.5, 0.2) + [(1, 3, 0.1)] + both(3, 4, 0.7, 0.05), [(3, 0.9)], 3, [0], [], 11),
    ]


if __name__ == "__main__":
    document = {
        "source": "eigenvalues of the rate matrix with the sign turned, and residues of the response (mpmath QR at 240 digits)",
        "generatedBy": "generate/numerics_spectrum.py",
        "seed": SEED,
        "tolerance": "eigenvalues 4e-16 relative to their absolute value; coefficients 1e-13 of the largest on the path",
        "cases": [entry(m) for m in models() + stiff()],
    }
    text = json.dumps(document, separators=(",", ":")).replace('{"name"', '\n{"name"')
    assert len(text) < 200_000
    with open("../numerics/spectrum.json", "w") as file:
        file.write(text + "\n")
