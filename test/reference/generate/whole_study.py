"""
Concentrations and areas of every study of a linear model in models/studies, from the files alone, in 40-digit arithmetic.

An independent reading of the file formats: the state, the effect sites, the area under the observed concentration and the
amount eliminated form one linear system, advanced by mpmath's matrix exponential with the inputs in an extra column. It
shares no code with the program. Peaks come from a dense grid refined by golden-section search on that same system.

    python3 test/reference/generate/whole_study.py        writes test/reference/studies/<name>.json
"""

import json
import pathlib

import mpmath as mp

mp.mp.dps = 40
ROOT = pathlib.Path(__file__).resolve().parents[3]

TIME = {"s": mp.mpf(1) / 3600, "min": mp.mpf(1) / 60, "h": 1, "d": 24, "wk": 168}
UNITS = {
    "L/h": 1, "L/min": 60, "mL/min": mp.mpf(60) / 1000, "L/d": mp.mpf(1) / 24, "mL/h": mp.mpf(1) / 1000, "mL/d": mp.mpf(1) / 24000,
    "L": 1, "mL": mp.mpf(1) / 1000, "/h": 1, "/min": 60, "/d": mp.mpf(1) / 24, "1": 1, "h": 1, "min": mp.mpf(1) / 60, "d": 24,
    "kg": 1, "g": mp.mpf(1) / 1000, "cm": 1, "m": 100, "a": 1, "mg/dL": 1, "umol/L": 1 / mp.mpf("88.4"), "g/L": 1, "m2": 1,
    "wk": 1, "kg/m2": 1,
}
AMOUNT = {"g": 1000, "mg": 1, "ug": mp.mpf(1) / 1000, "ng": mp.mpf(10) ** -6}


def number(x):
    """The decimal that was typed, as the double that a program reads."""
    return mp.mpf(float(x))


def hours(q):
    return number(q["value"]) * TIME[q["unit"]]


def quantity(q):
    return number(q["value"]) * UNITS[q["unit"]]


class Person:
    def __init__(self, typed, model):
        self.typed, self.model = typed, model

    def has(self, name):
        return name in self.typed

    def __getitem__(self, name):
        if name in self.typed:
            value = self.typed[name]
            return quantity(value) if isinstance(value, dict) else value
        choices = self.model.get("covariates", {}).get(name, {})
        sex = self.typed.get("sex")
        if name == "bodyMassIndex":
            return self["weight"] / (self["height"] / 100) ** 2
        if name == "bodySurfaceArea":
            assert choices.get("equation", "mosteller") == "mosteller"
            return mp.sqrt(self["weight"] * self["height"] / 3600)
        if name == "idealWeight":
            return (50 if sex == "male" else mp.mpf("45.5")) + mp.mpf("2.3") * (self["height"] / mp.mpf("2.54") - 60)
        if name == "leanWeight":
            assert choices.get("equation", "janmahasatian") == "janmahasatian"
            a, b = (6680, 216) if sex == "male" else (8780, 244)
            return 9270 * self["weight"] / (a + b * self["bodyMassIndex"])
        if name == "creatinineClearance":
            assert choices["equation"] == "cockcroft-gault"
            weight = {"actual": "weight", "ideal": "idealWeight", "lean": "leanWeight"}[choices["weight"]]
            creatinine = self["serumCreatinine"]
            if "creatinineAtLeast" in choices:
                creatinine = max(creatinine, quantity(choices["creatinineAtLeast"]))
            value = (140 - self["age"]) * self[weight] / (72 * creatinine) * (mp.mpf("0.85") if sex == "female" else 1)
            if "atMost" in choices:
                value = min(value, quantity(choices["atMost"]) / UNITS["mL/min"])
            return value * UNITS["mL/min"]
        raise KeyError(name)


def factor(f, person):
    x = person[f["covariate"]]
    if f["kind"] == "category":
        return number(f["values"][x])
    beside = f.get("reference") or f.get("half") or f.get("at")
    x = x / UNITS[beside["unit"]]
    if f["kind"] == "power":
        return (x / number(beside["value"])) ** number(f["exponent"])
    if f["kind"] == "linear":
        return 1 + number(f["slope"]) * (x - number(beside["value"]))
    if f["kind"] == "exponential":
        return mp.exp(number(f["rate"]) * (x - number(beside["value"])))
    if f["kind"] == "maturation":
        e = number(f["exponent"])
        return x**e / (x**e + number(beside["value"]) ** e)
    if f["kind"] == "step":
        return number(f["from"] if x >= number(beside["value"]) else f["below"])
    raise KeyError(f["kind"])


def parameters(model, person):
    values = {}
    for name, p in model["parameters"].items():
        total = mp.mpf(0)
        for term in p["typical"]:
            product = number(term["value"])
            for f in term.get("factors", []):
                product *= factor(f, person)
            total += product
        values[name] = total * UNITS[p["unit"]]
    return values


def system(model, p, extra_clearance):
    """Rate matrix over compartments, transit stages, effect sites, area, eliminated; and the index of each name."""
    effects = [t for t in model["transfers"] if t["kind"] == "effect"]
    effect_names = {t["to"] for t in effects}
    names = [c["id"] for c in model["compartments"] if c["id"] not in effect_names]
    stages = []
    for t in model["transfers"]:
        if t["kind"] == "transit":
            stages += [f"{t['from']}>{t['to']}#{i}" for i in range(t["stages"])]
    order = names + stages + sorted(effect_names) + ["#area", "#out"]
    index = {n: i for i, n in enumerate(order)}
    volume = {c["id"]: p[c["volume"]] for c in model["compartments"] if "volume" in c}
    a = mp.zeros(len(order))

    def move(source, target, rate):
        a[index[source], index[source]] -= rate
        a[index[target] if target else index["#out"], index[source]] += rate

    observed = next(c["id"] for c in model["compartments"] if c.get("observed"))
    for t in model["transfers"]:
        kind = t["kind"]
        if kind == "first-order":
            move(t["from"], t["to"], p[t["rate"]])
        elif kind == "exchange":
            x, y = t["between"]
            there, back = (p[r] for r in t["rates"]) if "rates" in t else (p[t["clearance"]] / volume[x], p[t["clearance"]] / volume[y])
            move(x, y, there)
            move(y, x, back)
        elif kind == "clearance":
            move(t["from"], None, p[t["clearance"]] / volume[t["from"]])
        elif kind == "elimination":
            move(t["from"], None, p[t["rate"]])
        elif kind == "transit":
            chain = [t["from"]] + [f"{t['from']}>{t['to']}#{i}" for i in range(t["stages"])] + [t["to"]]
            for x, y in zip(chain, chain[1:]):
                move(x, y, p[t["rate"]])
        elif kind == "effect":
            i = index[t["to"]]
            a[i, i] -= p[t["rate"]]
            a[i, index[t["from"]]] += p[t["rate"]] / volume[t["from"]]
        else:
            raise KeyError(kind)
    if extra_clearance:
        move(observed, None, extra_clearance / volume[observed])
    a[index["#area"], index[observed]] = 1 / volume[observed]
    return a, index, observed, volume[observed]


def repeats(line, until):
    at = hours(line["at"])
    if "every" not in line:
        return [at]
    every, times, k = line["every"], [], 0
    while True:
        t = at + number(float(f"{k * every['value']:.15g}")) * TIME[every["unit"]]
        if ("count" in line and k >= line["count"]) or ("count" not in line and t >= until):
            return times
        times.append(t)
        k += 1


def reckon(q, person):
    unit, _, rest = q["unit"].partition("/")
    value = number(q["value"]) * AMOUNT[unit]
    for part in filter(None, rest.split("/")):
        value = value * person["weight"] if part == "kg" else value * person["bodySurfaceArea"] if part == "m2" else value / TIME[part]
    return value


def run(study, model):
    until = hours(study["sampling"]["until"])
    changes = [(mp.mpf(0), dict(study["patient"]))]
    sessions = study["patient"].get("sessions", [])
    changes[0][1].pop("changes", None)
    for change in study["patient"].get("changes", []):
        later = dict(changes[-1][1])
        later.update({k: v for k, v in change.items() if k != "at"})
        changes.append((hours(change["at"]), later))
    people = [(t, Person(typed, model)) for t, typed in changes]

    def person_at(t):
        return [p for start, p in people if start <= t][-1]

    session_times = [(t, t + hours(s["for"]), quantity(s["clearance"])) for s in sessions for t in repeats(s, until)]
    results = []
    for regimen in study["regimens"]:
        assert regimen.get("start", "empty") == "empty"
        doses = []
        for line in regimen["doses"]:
            exceptions = {e["number"]: e for e in line.get("exceptions", [])}
            assert all(set(e) <= {"number", "missed", "lateBy"} for e in exceptions.values())
            for k, t in enumerate(repeats(line, until), 1):
                e = exceptions.get(k, {})
                t = t + (hours(e["lateBy"]) if "lateBy" in e else 0)
                if e.get("missed") or t >= until:
                    continue
                person = person_at(t)
                p = parameters(model, person)
                route = next(r for r in model["routes"] if r["name"] == line["route"])
                over = hours(line["over"]) if "over" in line else 0
                amount = reckon(line["amount"], person) if "amount" in line else reckon(line["rate"], person) * over
                if "atMost" in line:
                    amount = min(amount, reckon(line["atMost"], person))
                if "product" in line:
                    amount *= number(next(x["fraction"] for x in model["drug"]["products"] if x["name"] == line["product"]))
                amount *= p[route["bioavailability"]] if "bioavailability" in route else 1
                start = t + (p[route["lag"]] if "lag" in route else 0)
                assert "parts" not in route
                doses.append((start, over, amount, route["into"]))
        events = sorted({mp.mpf(0), until, *(t for t, _ in changes), *(x for s in session_times for x in s[:2]),
                         *(d[0] for d in doses), *(d[0] + d[1] for d in doses)})
        events = [t for t in events if t <= until]
        state, pieces = None, []
        for start, end in zip(events, events[1:]):
            person = person_at(start)
            clearance = sum((c for s, e, c in session_times if s <= start < e), mp.mpf(0))
            a, index, observed, volume = system(model, parameters(model, person), clearance)
            n = a.rows
            state = mp.zeros(n, 1) if state is None else state
            b = mp.zeros(n, 1)
            for at, over, amount, into in doses:
                if over == 0 and at == start:
                    state[index[into]] += amount
                elif over and at <= start < at + over:
                    b[index[into]] += amount / over
            augmented = mp.zeros(n + 1)
            augmented[:n, :n] = a
            augmented[:n, n] = b
            pieces.append((start, end, augmented, state.copy(), index, observed, volume))
            state = advance(augmented, state, end - start)
        results.append((regimen["name"], pieces))
    return until, results


def advance(augmented, state, t):
    n = state.rows
    x = mp.zeros(n + 1, 1)
    x[:n, 0] = state
    x[n] = 1
    return (mp.expm(augmented * t) * x)[:n, 0]


def at(pieces, t):
    """Name -> value just before what happens at t."""
    start, _, augmented, state, index, observed, volume = [p for p in pieces if p[0] < t or p[0] == 0][-1]
    x = advance(augmented, state, t - start)
    return {"concentration": x[index[observed]] / volume, "auc": x[index["#area"]], "eliminated": x[index["#out"]]}


def highest(pieces, refine=40):
    """Highest concentration anywhere: ends of pieces, and a refined look inside those that rise and fall."""
    best = (mp.mpf(0), mp.mpf(0))
    for start, end, augmented, state, index, observed, volume in pieces:
        def c(t):
            return advance(augmented, state, t)[index[observed]] / volume
        d = end - start
        grid = [d * i / 12 for i in range(13)]
        values = [c(t) for t in grid]
        k = max(range(13), key=lambda i: values[i])
        if values[k] < best[0] * mp.mpf("0.98"):
            continue
        lo, hi = grid[max(k - 1, 0)], grid[min(k + 1, 12)]
        if 0 < k < 12:
            ratio = (mp.sqrt(5) - 1) / 2
            x1, x2 = hi - ratio * (hi - lo), lo + ratio * (hi - lo)
            f1, f2 = c(x1), c(x2)
            for _ in range(refine):
                if f1 < f2:
                    lo, x1, f1 = x1, x2, f2
                    x2 = lo + ratio * (hi - lo)
                    f2 = c(x2)
                else:
                    hi, x2, f2 = x2, x1, f1
                    x1 = hi - ratio * (hi - lo)
                    f1 = c(x1)
            t, v = (x1, f1) if f1 > f2 else (x2, f2)
        else:
            t, v = grid[k], values[k]
        if v > best[0]:
            best = (v, start + t)
    return best


def main():
    for path in sorted((ROOT / "models/studies").glob("*.json")):
        study = json.loads(path.read_text())
        model = json.loads((ROOT / f"models/drugs/{study['model']}.json").read_text())
        if any(t["kind"] in ("saturable", "binding") for t in model["transfers"]):
            continue  # no linear system; test/reference/models/nonlinear.py
        until, results = run(study, model)
        cases = []
        for name, pieces in results:
            peak, peak_time = highest(pieces)
            step = study["sampling"]["every"]
            count = int(until / hours(step) + mp.mpf("1e-9"))
            picked = sorted({max(1, count * i // 24) for i in range(1, 25)})
            rows = []
            for k in picked:
                t = number(float(f"{k * step['value']:.15g}")) * TIME[step["unit"]]
                rows.append([float(t), *(float(v) for v in at(pieces, t).values())])
            cases.append({"regimen": name, "peak_mg_L": float(peak), "peakTime_h": float(peak_time),
                          "columns": ["time_h", "concentration_mg_L", "auc_mg_h_L", "eliminated_mg"], "rows": rows})
        out = {"source": "independent reading of the file by mpmath, 40 digits", "generatedBy": "test/reference/generate/whole_study.py",
               "tolerance": "1e-11 relative", "study": path.name, "cases": cases}
        (ROOT / "test/reference/studies" / path.name).write_text(json.dumps(out, indent=1) + "\n")
        print(path.name, [(c["regimen"], c["peak_mg_L"], c["rows"][-1]) for c in cases])


main()
