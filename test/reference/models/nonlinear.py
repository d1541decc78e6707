"""
An independent reading of model and study files whose elimination or binding saturates, by general-purpose solvers.

It shares no code and no method with the program: covariates, parameters and doses are read by independent.py; the amounts
are integrated by SciPy's Radau (implicit Runge-Kutta of order 5) at a relative tolerance of 1e-13 with its own difference
Jacobian, restarted at every dose and switch, and once more by another method (DOP853, explicit of order 8, or LSODA where
binding makes the model stiff), which must agree. Constant states are roots in mpmath at 40 digits.
Written from the description of the file formats alone: a saturable transfer is maximumRate C^h / (halfSaturation^h + C^h);
target and complex are in drug-equivalent mass in the volume of the drug; in quasi-steady state, free drug x free target =
Kss x complex in concentrations, Kss = (dissociation + first-order rates out of the complex) / association.

    python3 test/reference/models/nonlinear.py      writes nonlinear.json
"""
import json
import sys
from pathlib import Path

import numpy as np
from mpmath import findroot, mpf
from scipy.integrate import solve_ivp

sys.path.insert(0, str(Path(__file__).parent))
from independent import D, Person, canonical, hours, inputs_of, mp, patient_at

ROOT = Path(__file__).resolve().parents[3]
KINDS = ("saturable", "binding", "production")


def is_nonlinear(model):
    return any(t["kind"] in KINDS for t in model["transfers"])


class Body:
    """The right side for one individual; `number` makes its constants doubles or multiple precision."""

    def __init__(self, model, patient, number=float):
        p = {name: number(value) for name, value in Person(model, patient).parameters().items()}
        sites = {t["to"]: t for t in model["transfers"] if t["kind"] == "effect"}
        self.names = [c["id"] for c in model["compartments"] if c["id"] not in sites]
        self.sites = [c["id"] for c in model["compartments"] if c["id"] in sites]
        self.volume = {c["id"]: p[c["volume"]] for c in model["compartments"] if "volume" in c}
        self.bindings = [t for t in model["transfers"] if t["kind"] == "binding"]
        self.targets = {b["target"] for b in self.bindings}
        for b in self.bindings:
            for role in ("target", "complex"):
                self.volume[b[role]] = self.volume[b["drug"]]
        self.observed = next(c["id"] for c in model["compartments"] if c.get("observed"))
        self.observations = [(o["of"], next(self.volume[c] for c in o["of"] if c in self.volume)) for o in model.get("observations", [])]
        self.index = {name: i for i, name in enumerate(self.names)}
        self.p, self.number = p, number
        self.effects = [(sites[s]["from"], p[sites[s]["rate"]]) for s in self.sites]
        self.flows, self.made = [], {}
        out_of = {name: number(0) for name in self.names}
        for t in model["transfers"]:
            kind = t["kind"]
            if kind == "exchange":
                for a, b in (t["between"], t["between"][::-1]):
                    self.flows.append((a, b, "first", (p[t["clearance"]] / self.volume[a],)))
            elif kind in ("first-order", "elimination", "clearance"):
                rate = p[t["clearance"]] / self.volume[t["from"]] if kind == "clearance" else p[t["rate"]]
                self.flows.append((t["from"], t.get("to"), "first", (rate,)))
                out_of[t["from"]] += rate
            elif kind == "saturable":
                hill = t.get("hill", 1)
                hill = p[hill] if isinstance(hill, str) else number(hill)
                self.flows.append((t["from"], t.get("to"), "saturable", (p[t["maximumRate"]], p[t["halfSaturation"]] * self.volume[t["from"]], hill)))
            elif kind == "production":
                self.made[t["into"]] = self.made.get(t["into"], 0) + p[t["rate"]]
        self.fast = [b for b in self.bindings if b.get("approximation") == "quasi-steady-state"]
        self.kss = {b["complex"]: (p[b["dissociation"]] + out_of[b["complex"]]) / p[b["association"]] * self.volume[b["drug"]] for b in self.fast}

    def free(self, y):
        """Amounts from states: where binding is in quasi-steady state these are totals at the places of drug and target."""
        x = list(y[: len(self.names)])
        for b in self.fast:
            d, r, c = (self.index[b[role]] for role in ("drug", "target", "complex"))
            total, target, k = x[d], x[r], self.kss[b["complex"]]
            # Free drug is the positive root of f^2 + (target + k - total) f - k total.
            h = target + k - total
            root = (h * h + 4 * k * total) ** 0.5 if self.number is float else mp.sqrt(h * h + 4 * k * total)
            f = 2 * k * total / (h + root) if h > 0 else (root - h) / 2
            x[d], x[r], x[c] = f, k * target / (k + f), target * f / (k + f)
        return x

    def derivative(self, y, inputs):
        """Amounts, effect sites, area, eliminated drug."""
        x, n = self.free(y), len(self.names)
        change = [inputs[i] + self.made.get(name, 0) for i, name in enumerate(self.names)]
        gone = 0 * x[0]
        for a, b, kind, k in self.flows:
            amount = x[self.index[a]]
            if kind == "first":
                flow = k[0] * amount
            elif amount <= 0:
                flow = 0 * amount
            else:
                most, half, hill = k
                part = (half / amount) ** hill if hill != 1 else half / amount
                flow = most / (1 + part)
            change[self.index[a]] -= flow
            if b is not None:
                change[self.index[b]] += flow
            elif a not in self.targets:
                gone = gone + flow
        for b in self.bindings:
            d, r, c = (self.index[b[role]] for role in ("drug", "target", "complex"))
            if b in self.fast:
                change[d] += change[c]
                change[r] += change[c]
                change[c] = 0 * change[c]
            else:
                net = self.p[b["association"]] / self.volume[b["drug"]] * x[d] * x[r] - self.p[b["dissociation"]] * x[c]
                change[d] -= net
                change[r] -= net
                change[c] += net
        sites = [rate * (x[self.index[a]] / self.volume[a] - y[n + i]) for i, (a, rate) in enumerate(self.effects)]
        return change + sites + [x[self.index[self.observed]] / self.volume[self.observed], gone]

    def drug_free(self):
        """Without drug a target is where production and its first-order losses balance."""
        y = [self.number(0)] * (len(self.names) + len(self.sites) + 2)
        for name, rate in self.made.items():
            losses = [k[0] for a, b, kind, k in self.flows if a == name and kind == "first" and b is None]
            assert all(kind == "first" for a, b, kind, _ in self.flows if a == name) and sum(losses) > 0
            y[self.index[name]] = rate / sum(losses)
        return y


def solve(body, y, length, inputs, method):
    """One stretch with constant inputs."""
    scale = float(np.max(np.abs(y))) or 1.0
    tight = {"rtol": 1e-13, "atol": 1e-18 * scale}
    right = lambda t, z: np.array([float(v) for v in body.derivative(list(z), inputs)])
    # Rows of the area and the eliminated amount feed nothing back.
    run = solve_ivp(right, (0, length), y, method=method, **tight)
    assert run.success, run.message
    return run.y[:, -1]


def simulate(model, study, regimen, times, until, method):
    """At each time, before any bolus there: concentration, effect sites, observations, area so far, amount gone."""
    boluses, infusions, _ = inputs_of(model, study, regimen, until)
    assert "changes" not in study["patient"] and "sessions" not in study["patient"]
    body = Body(model, patient_at(study, mpf(0)))
    switches = {mpf(0), until, *times} | {t for t, _, _ in boluses} | {t for a, b, _, _ in infusions for t in (a, b)}
    switches = sorted(t for t in switches if 0 <= t <= until)
    y, rows = np.array(body.drug_free()), {}
    entered = sum(v for name, v in zip(body.names, y) if name not in body.targets)
    for k, t in enumerate(switches):
        if t in times:
            x = body.free(list(y))
            n = len(body.names)
            drug = sum(v for name, v in zip(body.names, x) if name not in body.targets)
            assert abs(drug + y[-1] - entered) <= 1e-11 * max(entered, 1e-300), (model["id"], t, drug + y[-1], entered)
            rows[t] = {
                "time_h": float(t), "concentration_mg_L": x[body.index[body.observed]] / body.volume[body.observed],
                "effectSites_mg_L": [float(v) for v in y[n: n + len(body.sites)]],
                "observations_mg_L": [sum(x[body.index[c]] for c in of) / volume for of, volume in body.observations],
                "auc_mg_h_L": y[-2], "eliminated_mg": y[-1]}
        for time, into, mass in boluses:
            if time == t:
                # A bolus adds to the free drug and so to the total, where that is the state.
                y[body.index[into]] += float(mass)
                entered += float(mass)
        if k + 1 == len(switches):
            break
        inputs = [0.0] * len(body.names)
        for a, b, into, rate in infusions:
            if a <= t and switches[k + 1] <= b:
                inputs[body.index[into]] += float(rate)
                entered += float(rate * (switches[k + 1] - t))
        y = solve(body, y, float(switches[k + 1] - t), inputs, method)
    return [rows[t] for t in times]


def flat(row):
    return [row["concentration_mg_L"], *row["effectSites_mg_L"], *row["observations_mg_L"], row["auc_mg_h_L"], row["eliminated_mg"]]


def twice(model, study, regimen, times, until, worst):
    """By two methods; gives the first and keeps the largest relative difference."""
    other = "LSODA" if any(t["kind"] == "binding" for t in model["transfers"]) else "DOP853"
    one = simulate(model, study, regimen, times, until, "Radau")
    two = simulate(model, study, regimen, times, until, other)
    for a, b in zip(one, two):
        for u, v in zip(flat(a), flat(b)):
            difference = abs(u - v) / max(abs(u), 1e-300) if u or v else 0.0
            if difference > worst.get(other, (0,))[0]:
                worst[other] = (difference, model["id"], a["time_h"])
    return one


def constant_state(model, patient, lines):
    """Observed concentration under an endless infusion, 40 digits: the root that a long integration leads to."""
    regimen = {"doses": lines}
    line = lines[0]
    assert len(lines) == 1 and hours(line["over"]) == hours(line["every"])
    _, infusions, _ = inputs_of(model, {"patient": patient}, regimen, hours(line["every"]) / 2)
    exact = Body(model, patient, mpf)
    inputs = [mpf(0)] * len(exact.names)
    for _, _, into, rate in infusions:
        inputs[exact.index[into]] += rate
    near = Body(model, patient)
    y = solve(near, np.array(near.drug_free()), 20000.0, [float(v) for v in inputs], "LSODA")
    # What is state and not derived from totals.
    active = [i for i, name in enumerate(exact.names) if name not in exact.kss]
    def change(*values):
        state = [mpf(0)] * len(y)
        for i, v in zip(active, values):
            state[i] = v
        slopes = [exact.derivative(state, inputs)[i] for i in active]
        return slopes if len(active) > 1 else slopes[0]
    start = [mpf(float(y[i])) for i in active]
    root = findroot(change, start if len(start) > 1 else start[0], tol=mpf("1e-50"))
    root = list(root) if len(start) > 1 else [root]
    state = [mpf(0)] * len(y)
    for i, v in zip(active, root):
        state[i] = v
    return exact.free(state)[exact.index[exact.observed]] / exact.volume[exact.observed]


def expectation(model, check):
    """What a check of a model file should read, in the unit that it states."""
    patient, what, unit = check["patient"], check["what"], check["expected"]["unit"]
    scale = canonical(unit, model["drug"].get("molarMass", {}).get("value"))
    if what.startswith("parameter "):
        return Person(model, patient).parameters()[what.removeprefix("parameter ")] / scale
    if what == "average at steady state":
        return constant_state(model, patient, check["doses"]) / scale
    if what == "concentration at time":
        at = hours(check["at"])
        [row] = twice(model, {"patient": patient}, {"doses": check["doses"]}, [at], at, {})
        return D(row["concentration_mg_L"]) / scale
    raise ValueError(what)


# Amount [mg], interval and unit of the times, both in hours, where 100 mg every 8 h would say little.
SCALES = {"pw-111": (150, 336, 14), "pw-112": (150, 336, 14), "omalizumab-hayashi-2007": (300, 672, 28), "ethanol-norberg-2000": (40000, 8, 1)}


def courses():
    """Every nonlinear model, by every one of its routes, in the patient of its first check; every worked study of one."""
    hour = lambda x: {"value": x, "unit": "h"}
    cases, worst = [], {}
    for path in sorted((ROOT / "models/drugs").glob("*.json")):
        model = json.loads(path.read_text())
        if not is_nonlinear(model):
            continue
        amount, every, scale = SCALES.get(model["id"], (100, 8, 1))
        regimens = []
        for route in model["routes"]:
            dose = {"route": route["name"], "amount": {"value": amount, "unit": "mg"}, "at": hour(0), "every": hour(every), "count": 3}
            if route.get("input") == "infusion":
                dose["over"] = hour(0.5 * scale)
            if "products" in model["drug"]:
                dose["product"] = model["drug"]["products"][0]["name"]
            regimens.append({"name": route["name"], "doses": [dose]})
        until = 30 * scale if every == 8 else 4 * every
        study = {
            "format": "phasewise-study", "version": 1, "title": model["title"], "model": model["id"],
            "patient": model["checks"][0]["patient"], "regimens": regimens, "sampling": {"until": hour(until), "every": hour(scale)},
        }
        # Before and after each dose, inside an infusion, at a dose, and long after the last.
        parts = [D(t) / 8 * every for t in ("0.25", "0.5", "2", "8", "8.25", "11", "16.5", "24")] + [D(until)]
        cases.append(case(model, study, parts, worst))
    for path in sorted((ROOT / "models/studies").glob("*.json")):
        study = json.loads(path.read_text())
        model = json.loads((ROOT / "models/drugs" / f"{study['model']}.json").read_text())
        if is_nonlinear(model):
            until = hours(study["sampling"]["until"])
            cases.append(case(model, study, [until * k / 12 for k in range(1, 13)], worst))
    for method, (difference, name, time) in worst.items():
        print(f"Radau against {method}: at most {difference:.2e}, {name} at {time} h")
        assert difference <= 2e-11
    note = "every model whose elimination or binding saturates, by every route, and the worked studies of such models; by nonlinear.py; a value at a dose's time is the one just before it"
    (Path(__file__).parent / "nonlinear.json").write_text(json.dumps({"note": note, "cases": cases}, indent=1) + "\n")


def case(model, study, times, worst):
    assert all(r.get("start", "empty") == "empty" for r in study["regimens"])
    until = hours(study["sampling"]["until"])
    expected = [{"regimen": r["name"], "rows": twice(model, study, r, times, until, worst)} for r in study["regimens"]]
    return {"study": study, "expected": expected}


if __name__ == "__main__":
    courses()
