"""
An independent reading of model and study files in arbitrary precision, for linear models.

It shares no code and no method with the program: covariates and parameters are computed in mpmath from the
published equations, and the amounts by mpmath's own matrix exponential of one augmented matrix per stretch
(amounts, effect sites, area under the curve, constant inputs). Written from the descriptions of the file formats and
of the words (interval, steady state, distribution volumes) alone. 40 digits.

Equations: Cockcroft & Gault 1976 Nephron 16:31-41; Mosteller 1987 N Engl J Med 317:1098; Janmahasatian et al. 2005
Clin Pharmacokinet 44:1051-1065; Inker et al. 2021 N Engl J Med 385:1737-1749 (creatinine, without race).
"""
from mpmath import mp, mpf, matrix, expm, lu_solve, eye, exp, log, polyroots

mp.dps = 40
D = lambda x: mpf(str(x))

TIME = {"h": mpf(1), "min": mpf(1) / 60, "s": mpf(1) / 3600, "d": mpf(24), "wk": mpf(168)}
AGE = {"a": mpf(1), "mo": mpf("30.4375") / mpf("365.25"), "wk": 7 / mpf("365.25"), "d": 1 / mpf("365.25")}
MASS = {"mg": mpf(1), "g": mpf(1000), "ug": mpf("1e-3"), "ng": mpf("1e-6")}
VOLUME = {"L": mpf(1), "mL": mpf("1e-3")}
BODY = {"kg": mpf(1), "g": mpf("1e-3")}
MOLES = {"mmol": mpf(1), "umol": mpf("1e-3"), "nmol": mpf("1e-6")}  # x molar mass [g/mol] = mg


def canonical(unit, molar_mass=None):
    """Factor from a parameter's or quantity's unit to h, mg, L."""
    if unit == "1":
        return mpf(1)
    if unit.startswith("/"):
        return 1 / TIME[unit[1:]]
    out = mpf(1)
    for place, part in enumerate(unit.split("/")):
        factor = mpf(1)
        for atom in part.split("."):
            if atom in MOLES:
                factor *= MOLES[atom] * D(molar_mass)
            else:
                factor *= {**TIME, **MASS, **VOLUME}[atom]
        out = out * factor if place == 0 else out / factor
    return out


AGES = ("age", "gestationalAge", "postnatalAge", "postmenstrualAge")


def in_unit(covariate, value, unit, want):
    """A covariate's value from one unit to another of its kind."""
    if unit == want:
        return value
    if covariate in AGES:
        return value * AGE[unit] / AGE[want]
    if covariate in ("weight", "leanWeight", "idealWeight", "adjustedWeight"):
        return value * BODY[unit] / BODY[want]
    if covariate == "serumCreatinine":
        to = {"mg/dL": mpf(1), "umol/L": 1 / mpf("88.4")}
        return value * to[unit] / to[want]
    if covariate in ("creatinineClearance", "absoluteGfr"):
        return value * canonical(unit) / canonical(want)
    raise ValueError(f"{covariate}: {unit} to {want}")


class Person:
    def __init__(self, model, patient):
        self.model, self.patient = model, patient

    def typed(self, name, want):
        if name not in self.patient:
            return None
        given = self.patient[name]
        return in_unit(name, D(given["value"]), given["unit"], want)

    def number(self, name, want):
        direct = self.typed(name, want)
        if direct is not None:
            return direct
        if name == "postmenstrualAge":
            weeks = self.typed("gestationalAge", "wk") + self.typed("postnatalAge", "wk")
            return in_unit(name, weeks, "wk", want)
        choice = self.model.get("covariates", {}).get(name, {})
        female = self.patient.get("sex") == "female"
        if name == "creatinineClearance":
            assert choice["equation"] == "cockcroft-gault" and choice["weight"] == "actual"
            age, weight, creatinine = self.typed("age", "a"), self.typed("weight", "kg"), self.typed("serumCreatinine", "mg/dL")
            value = (140 - age) * weight / (72 * creatinine) * (mpf("0.85") if female else 1)
            return in_unit(name, value, "mL/min", want)
        if name == "bodySurfaceArea":
            return mp.sqrt(self.typed("weight", "kg") * D(self.patient["height"]["value"]) / 3600)
        if name == "leanWeight":
            weight, height = self.typed("weight", "kg"), D(self.patient["height"]["value"]) / 100
            index = weight / height**2
            return 9270 * weight / (8780 + 244 * index) if female else 9270 * weight / (6680 + 216 * index)
        if name == "estimatedGfr":
            assert choice["equation"] == "ckd-epi-2021-creatinine"
            age, creatinine = self.typed("age", "a"), self.typed("serumCreatinine", "mg/dL")
            kappa, alpha = (mpf("0.7"), mpf("-0.241")) if female else (mpf("0.9"), mpf("-0.302"))
            ratio = creatinine / kappa
            return (142 * min(ratio, mpf(1)) ** alpha * max(ratio, mpf(1)) ** mpf("-1.2") * mpf("0.9938") ** age
                    * (mpf("1.012") if female else 1))
        raise ValueError(f"no value for {name}")

    def factor(self, f):
        kind, covariate = f["kind"], f["covariate"]
        if kind == "category":
            return D(f["values"][self.patient[covariate]])
        beside = f.get("reference") or f.get("half") or f.get("at")
        x, number = self.number(covariate, beside["unit"]), D(beside["value"])
        if kind == "power":
            return (x / number) ** D(f["exponent"])
        if kind == "linear":
            return 1 + D(f["slope"]) * (x - number)
        if kind == "exponential":
            return exp(D(f["rate"]) * (x - number))
        if kind == "maturation":
            e = D(f["exponent"])
            return x**e / (x**e + number**e)
        if kind == "step":
            return D(f["from"]) if x >= number else D(f["below"])
        raise ValueError(kind)

    def parameters(self):
        molar = self.model["drug"].get("molarMass", {}).get("value")
        out = {}
        for name, parameter in self.model["parameters"].items():
            total = mpf(0)
            for term in parameter["typical"]:
                product = D(term["value"])
                for f in term.get("factors", []):
                    product *= self.factor(f)
                total += product
            assert total > 0, f"{name} comes out {total}"
            out[name] = total * canonical(parameter["unit"], molar)
        return out


class Linear:
    """Rates of one individual: `A` over amounts then effect sites; `out` is the rate out of the body per state."""

    def __init__(self, model, patient, extra_clearance=mpf(0)):
        self.p = p = Person(model, patient).parameters()
        compartments = model["compartments"]
        sites = {t["to"] for t in model["transfers"] if t["kind"] == "effect"}
        self.names = [c["id"] for c in compartments if c["id"] not in sites]
        self.volume = {c["id"]: p[c["volume"]] for c in compartments if "volume" in c}
        self.observed = next(c["id"] for c in compartments if c.get("observed"))
        arrows = []
        effects = []
        for t in model["transfers"]:
            kind = t["kind"]
            if kind == "first-order":
                arrows.append((t["from"], t["to"], p[t["rate"]]))
            elif kind == "exchange":
                a, b = t["between"]
                there, back = ([p[r] for r in t["rates"]] if "rates" in t
                               else [p[t["clearance"]] / self.volume[c] for c in (a, b)])
                arrows += [(a, b, there), (b, a, back)]
            elif kind == "clearance":
                arrows.append((t["from"], None, p[t["clearance"]] / self.volume[t["from"]]))
            elif kind == "elimination":
                arrows.append((t["from"], None, p[t["rate"]]))
            elif kind == "transit":
                stages = [f"{t['from']}>{t['to']}#{i + 1}" for i in range(t["stages"])]
                self.names += stages
                chain = [t["from"], *stages, t["to"]]
                arrows += [(chain[i], chain[i + 1], p[t["rate"]]) for i in range(len(chain) - 1)]
            elif kind == "effect":
                effects.append((t["from"], t["to"], p[t["rate"]]))
            else:
                raise ValueError(kind)
        if extra_clearance:
            arrows.append((self.observed, None, extra_clearance / self.volume[self.observed]))
        self.drug_states = len(self.names)
        self.names = self.names + [to for _, to, _ in effects]
        self.index = {name: i for i, name in enumerate(self.names)}
        n = len(self.names)
        self.A = matrix(n, n)
        self.out = [mpf(0)] * n
        for a, b, rate in arrows:
            i = self.index[a]
            self.A[i, i] -= rate
            if b is None:
                self.out[i] += rate
            else:
                self.A[self.index[b], i] += rate
        for a, b, rate in effects:
            i = self.index[b]
            self.A[i, self.index[a]] += rate / self.volume[a]
            self.A[i, i] -= rate

    def disposition(self):
        """The states that a bolus into the observed compartment reaches, and their matrix."""
        reach, grown = {self.index[self.observed]}, True
        while grown:
            grown = False
            for j in list(reach):
                for i in range(self.drug_states):
                    if i not in reach and self.A[i, j] != 0:
                        reach.add(i)
                        grown = True
        rows = sorted(reach)
        return rows, matrix([[self.A[i, j] for j in rows] for i in rows])

    def moments(self):
        """Terminal half-life, CL, mean residence time, Vss of the disposition."""
        rows, K = self.disposition()
        n = len(rows)
        # Characteristic polynomial by Faddeev-LeVerrier, then its roots.
        M, c, coefficients = matrix(n, n), mpf(1), [mpf(1)]
        for k in range(1, n + 1):
            M = K * M + c * eye(n)
            c = -sum((K * M)[i, i] for i in range(n)) / k
            coefficients.append(c)
        roots = [mp.re(r) for r in polyroots(coefficients, maxsteps=500, extraprec=400)]
        terminal = log(2) / min(-r for r in roots)
        start = matrix(n, 1)
        start[rows.index(self.index[self.observed])] = 1
        x = lu_solve(-K, start)  # area of the amounts after a unit bolus
        volume = self.volume[self.observed]
        area = x[rows.index(self.index[self.observed])] / volume
        clearance = 1 / area
        mrt = sum(x[i] for i in range(n))
        return {"halfLife": terminal, "clearance": clearance, "mrt": mrt, "vss": clearance * mrt}


def hours(quantity):
    return D(quantity["value"]) * TIME[quantity["unit"]]


def milligrams(quantity, model, patient, line, over=None):
    """Amount of one dose in moiety mass; `over` [h] for a rate."""
    unit, value = quantity["unit"], D(quantity["value"])
    parts = unit.split("/")
    molar = model["drug"].get("molarMass", {}).get("value")
    amount = value * (MASS[parts[0]] if parts[0] in MASS else MOLES[parts[0]] * D(molar))
    person = Person(model, patient)
    for part in parts[1:]:
        if part == "kg":
            assert "by" not in line or line["by"] == "actual"
            amount *= person.typed("weight", "kg")
        elif part == "m2":
            amount *= person.number("bodySurfaceArea", "m2")
        else:
            amount *= over / TIME[part]
    if "atMost" in line:
        amount = min(amount, D(line["atMost"]["value"]) * MASS[line["atMost"]["unit"]])
    return amount


def fraction_of(model, line):
    products = model["drug"].get("products", [])
    if not products:
        return mpf(1)
    return next(D(p["fraction"]) for p in products if p["name"] == line["product"])


def patient_at(study, time):
    patient = {k: v for k, v in study["patient"].items() if k not in ("changes", "sessions")}
    for change in sorted(study["patient"].get("changes", []), key=lambda c: hours(c["at"])):
        if hours(change["at"]) <= time:
            patient.update({k: v for k, v in change.items() if k != "at"})
    return patient


def repeats(line, until):
    at = hours(line["at"])
    if "every" not in line:
        return [at]
    every, out, k = hours(line["every"]), [], 0
    while (at + k * every < until) and ("count" not in line or k < line["count"]):
        out.append(at + k * every)
        k += 1
    return out


def inputs_of(model, study, regimen, until):
    """Boluses (time, compartment, mg) and infusions (from, to, compartment, mg/h) that enter the body."""
    boluses, infusions, given = [], [], []
    for line in regimen["doses"]:
        route = next(r for r in model["routes"] if r["name"] == line["route"])
        shift = mpf(0)
        for k, scheduled in enumerate(repeats(line, until)):
            exception = next((e for e in line.get("exceptions", []) if e["number"] == k + 1), {})
            if exception.get("missed"):
                continue
            late = hours(exception["lateBy"]) if "lateBy" in exception else mpf(0)
            time = scheduled + shift + late
            if exception.get("shiftsLater"):
                shift += late
            if time >= until:
                continue
            patient = patient_at(study, time)
            over = hours(exception.get("over") or line["over"]) if ("over" in line or "over" in exception) else mpf(0)
            quantity = exception.get("amount") or line.get("amount") or line["rate"]
            amount = milligrams(quantity, model, patient, line, over) * fraction_of(model, line)
            amount *= D(exception.get("fractionTaken", 1))
            if "stoppedAfter" in exception:
                kept = hours(exception["stoppedAfter"])
                amount, over = amount * kept / over, kept
            p = Person(model, patient).parameters()
            value = lambda x: p[x] if isinstance(x, str) else D(x)
            bio = value(route["bioavailability"]) if "bioavailability" in route else mpf(1)
            lag = value(route["lag"]) if "lag" in route else mpf(0)
            given.append((time, over, amount))
            for part in route.get("parts") or [{"into": route["into"], "fraction": 1}]:
                start = time + lag + (value(part["lag"]) if "lag" in part else 0)
                mass = amount * bio * value(part["fraction"])
                length = value(part["over"]) if "over" in part else over
                if length == 0:
                    boluses.append((start, part["into"], mass))
                else:
                    infusions.append((start, start + length, part["into"], mass / length))
    return boluses, infusions, given


def sessions_of(study, until):
    out = []
    for s in study["patient"].get("sessions", []):
        for t in repeats(s, until):
            out.append((t, t + hours(s["for"]), D(s["clearance"]["value"]) * canonical(s["clearance"]["unit"])))
    return out


def simulate(model, study, regimen, times, until):
    """At each time, before any bolus there: concentration, effect sites, area so far, amount gone from the body."""
    boluses, infusions, given = inputs_of(model, study, regimen, until)
    sessions = sessions_of(study, until)
    changes = [hours(c["at"]) for c in study["patient"].get("changes", [])]
    switches = {mpf(0), until, *times, *changes}
    switches |= {t for t, _, _ in boluses} | {t for a, b, _, _ in infusions for t in (a, b)}
    switches |= {t for a, b, _ in sessions for t in (a, b)}
    switches = sorted(t for t in switches if 0 <= t <= until)
    state, area, gone, entered, rows = None, mpf(0), mpf(0), mpf(0), {}
    for k, t in enumerate(switches):
        extra = sum((c for a, b, c in sessions if a <= t < b), mpf(0))
        linear = Linear(model, patient_at(study, t), extra)
        n = len(linear.names)
        if state is None:
            state = matrix(n, 1)
        observed = linear.index[linear.observed]
        if t in times:
            # The concentration just before `t` belongs to the stretch that ends there.
            before = previous if k else linear
            rows[t] = {
                "concentration": state[observed] / before.volume[before.observed],
                "sites": {name: state[linear.index[name]] for name in linear.names[linear.drug_states:]},
                "amounts": {name: state[linear.index[name]] for name in linear.names[:linear.drug_states]},
                "area": area, "eliminated": gone, "entered": entered,
            }
        for time, into, mass in boluses:
            if time == t:
                state[linear.index[into]] += mass
                entered += mass
        if k + 1 == len(switches):
            break
        length = switches[k + 1] - t
        # Augmented: states, area, eliminated, constant 1.
        B = matrix(n + 3, n + 3)
        for i in range(n):
            for j in range(n):
                B[i, j] = linear.A[i, j]
            B[n + 1, i] = linear.out[i]
        B[n, observed] = 1 / linear.volume[linear.observed]
        for a, b, into, rate in infusions:
            if a <= t and switches[k + 1] <= b:
                B[linear.index[into], n + 2] += rate
                entered += rate * length
        start = matrix(n + 3, 1)
        for i in range(n):
            start[i] = state[i]
        start[n + 2] = 1
        end = expm(B * length, method="taylor") * start
        for i in range(n):
            state[i] = end[i]
        area += end[n]
        gone += end[n + 1]
        previous = linear
    return rows, given


def steady_state_auc24(model, patient, line):
    """Area over a period at steady state per 24 h: by linearity, that of one dose to infinity x 24 / period."""
    study = {"patient": patient}
    linear = Linear(model, patient)
    once = {k: v for k, v in line.items() if k not in ("every", "count")}
    boluses, infusions, _ = inputs_of(model, study, {"doses": [{**once, "at": {"value": 0, "unit": "h"}}]}, mpf("1e9"))
    n = linear.drug_states
    load = matrix(n, 1)
    for _, into, mass in boluses:
        load[linear.index[into]] += mass
    for a, b, into, rate in infusions:
        load[linear.index[into]] += rate * (b - a)
    K = matrix([[linear.A[i, j] for j in range(n)] for i in range(n)])
    x = lu_solve(-K, load)
    area = x[linear.index[linear.observed]] / linear.volume[linear.observed]
    return area * 24 / hours(line["every"])
