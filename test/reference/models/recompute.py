"""
Recompute what the model files expect of themselves, and the course of every linear model, by independent.py.

    python3 test/reference/models/recompute.py            compare every check of models/drugs, print the worst
    python3 test/reference/models/recompute.py courses    also write courses.json, every linear model by every route

A check `printed in the source` is compared within its own tolerance; all others must agree to 1e-12. Models whose
elimination or binding saturates are those of nonlinear.py, by general-purpose solvers: their levels must agree to 2e-11,
and what has a closed form, written out here, to 1e-12.
"""
import json
import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
import nonlinear
from independent import D, Linear, Person, canonical, hours, inputs_of, mp, mpf, simulate, steady_state_auc24
from nonlinear import is_nonlinear

ROOT = Path(__file__).resolve().parents[3]


def expectation(model, check):
    """What a check of a model file should read, in the unit that it states."""
    if is_nonlinear(model):
        return nonlinear.expectation(model, check)
    patient, what, unit = check["patient"], check["what"], check["expected"]["unit"]
    molar = model["drug"].get("molarMass", {}).get("value")
    scale = canonical(unit, molar)
    if what.startswith("parameter "):
        return Person(model, patient).parameters()[what.removeprefix("parameter ")] / scale
    linear = Linear(model, patient)
    if what == "terminal half-life":
        return linear.moments()["halfLife"] / scale
    if what == "Vss":
        return linear.moments()["vss"] / scale
    if what == "mean residence time":
        return linear.moments()["mrt"] / scale
    if what in ("AUC24 at steady state", "average at steady state"):
        total = sum(steady_state_auc24(model, patient, line) for line in check["doses"] if "every" in line)
        return (total if what.startswith("AUC24") else total / 24) / scale
    if what == "concentration at time":
        at = hours(check["at"])
        rows, _ = simulate(model, {"patient": patient}, {"doses": check["doses"]}, [at], at)
        return rows[at]["concentration"] / scale
    raise ValueError(what)


def closed_form(model, check):
    """Level under an endless input at the rate R of the check, by hand."""
    p = Person(model, check["patient"]).parameters()
    line = check["doses"][0]
    over = hours(line["over"])
    entered, _, _ = inputs_of(model, {"patient": check["patient"]}, {"doses": [{**line, "bolus": True, "over": {"value": 0, "unit": "h"}}]}, over / 2) if "amount" in line else (None, None, None)
    R = sum(mass for _, _, mass in entered) / over if entered else D(line["rate"]["value"]) * canonical(line["rate"]["unit"])
    if model["id"] in ("pw-109", "phenytoin-grasela-1983"):
        most = p["Vmax"] if "Vmax" in p else p["Vm"]
        return p["Km"] * R / (most - R)
    if model["id"] == "ethanol-norberg-2000":
        # CLr C^2 + (Vmax + CLr Km - R) C - R Km = 0
        b = p["Vmax"] + p["CLr"] * p["Km"] - R
        return (-b + mp.sqrt(b * b + 4 * p["CLr"] * R * p["Km"])) / (2 * p["CLr"])
    if model["id"] == "omalizumab-hayashi-2007":
        # Drug CLx X + kc V X E / K = R; target CLe E + kc V X E / K = P.
        K = (p["koff"] + p["kc"]) / p["kon"]
        a = p["kc"] * p["Vx"] / K
        b = p["CLx"] * p["CLe"] + a * (p["P"] - R)
        return (-b + mp.sqrt(b * b + 4 * p["CLx"] * a * R * p["CLe"])) / (2 * p["CLx"] * a)
    raise ValueError(model["id"])


def compare():
    worst = mpf(0)
    for path in sorted((ROOT / "models/drugs").glob("*.json")):
        model = json.loads(path.read_text())
        for check in model.get("checks", []):
            got, expected = expectation(model, check), D(check["expected"]["value"])
            difference = abs(got - expected) / abs(expected)
            printed = check["from"] == "printed in the source"
            solved = is_nonlinear(model) and check["what"] == "concentration at time"
            allowed = D(check["relativeTolerance"]) if printed else mpf("2e-11" if solved else "1e-12")
            assert difference <= allowed, f"{path.name}: {check['what']}: {mp.nstr(got, 12)}, file says {expected}"
            worst = worst if printed or solved else max(worst, difference)
            if is_nonlinear(model) and check["from"] == "closed form" and not check["what"].startswith("parameter "):
                closed = closed_form(model, check)
                assert abs(closed - expected) <= mpf("1e-12") * expected, (path.name, closed, expected)
            if printed:
                print(f"{path.stem}: {check['what']}: {mp.nstr(got, 6)} {check['expected']['unit']}, printed {check['expected']['value']}")
    print(f"worst difference of the other checks: {mp.nstr(worst, 3)}")


def courses():
    """Every linear model, by every one of its routes, in the patient of its first check: three doses of 100 mg."""
    hour = lambda x: {"value": x, "unit": "h"}
    cases = []
    for path in sorted((ROOT / "models/drugs").glob("*.json")):
        model = json.loads(path.read_text())
        if is_nonlinear(model):
            continue
        regimens = []
        for route in model["routes"]:
            dose = {"route": route["name"], "amount": {"value": 100, "unit": "mg"}, "at": hour(0), "every": hour(8), "count": 3}
            if route.get("input") == "infusion":
                dose["over"] = hour(0.5)
            if "products" in model["drug"]:
                dose["product"] = model["drug"]["products"][0]["name"]
            regimens.append({"name": route["name"], "doses": [dose]})
        study = {
            "format": "phasewise-study", "version": 1, "title": model["title"], "model": model["id"],
            "patient": model["checks"][0]["patient"], "regimens": regimens, "sampling": {"until": hour(30), "every": hour(1)},
        }
        # Before and after each dose, inside an infusion, at a dose, and long after the last.
        times = [D(t) for t in ("0.25", "0.75", "2", "8", "8.25", "11", "16.5", "24", "30")]
        for regimen in regimens:
            rows, _ = simulate(model, study, regimen, times, times[-1])
            for t in times:
                balance = sum(rows[t]["amounts"].values()) + rows[t]["eliminated"] - rows[t]["entered"]
                assert abs(balance) <= mpf("1e-25") * rows[t]["entered"], (path.name, t)
            regimen["expected"] = [
                {"time_h": float(t), "concentration_mg_L": float(rows[t]["concentration"]),
                 "effectSites_mg_L": [float(v) for v in rows[t]["sites"].values()],
                 "observations_mg_L": [float(v) for v in observed(model, study, rows[t])],
                 "auc_mg_h_L": float(rows[t]["area"]), "eliminated_mg": float(rows[t]["eliminated"])} for t in times]
        expected = [{"regimen": r["name"], "rows": r.pop("expected")} for r in regimens]
        cases.append({"study": study, "expected": expected})
    note = ("every linear model by every route, recomputed in 40-digit arithmetic by recompute.py; "
            "a value at a dose's time is the one just before it")
    (Path(__file__).parent / "courses.json").write_text(json.dumps({"note": note, "cases": cases}, indent=1) + "\n")


def observed(model, study, row):
    """Each of the model's observations: the amounts in its compartments over the volume that they share."""
    volume = Linear(model, study["patient"]).volume
    return [sum(row["amounts"][c] for c in o["of"]) / volume[o["of"][0]] for o in model.get("observations", [])]


if __name__ == "__main__":
    compare()
    if "courses" in sys.argv:
        courses()
