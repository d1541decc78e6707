"""
Recompute what the model files expect of themselves, and what the worked studies give, by independent.py.

    python3 test/reference/models/recompute.py            compare every check of models/drugs, print the worst
    python3 test/reference/models/recompute.py studies    also write studies.json, the worked studies' courses

A check `printed in the source` is compared within its own tolerance; all others must agree to 1e-12.
"""
import json
import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
from independent import D, Linear, Person, canonical, hours, mp, mpf, simulate, steady_state_auc24

ROOT = Path(__file__).resolve().parents[3]


def expectation(model, check):
    """What a check of a model file should read, in the unit that it states."""
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


def compare():
    worst = mpf(0)
    for path in sorted((ROOT / "models/drugs").glob("*.json")):
        model = json.loads(path.read_text())
        for check in model.get("checks", []):
            got, expected = expectation(model, check), D(check["expected"]["value"])
            difference = abs(got - expected) / abs(expected)
            printed = check["from"] == "printed in the source"
            allowed = D(check["relativeTolerance"]) if printed else mpf("1e-12")
            assert difference <= allowed, f"{path.name}: {check['what']}: {mp.nstr(got, 12)}, file says {expected}"
            worst = worst if printed else max(worst, difference)
            if printed:
                print(f"{path.stem}: {check['what']}: {mp.nstr(got, 6)} {check['expected']['unit']}, printed {check['expected']['value']}")
    print(f"worst difference of the other checks: {mp.nstr(worst, 3)}")


def studies():
    """Courses of the worked studies at times that fall on no sampling grid of theirs, and around it."""
    out = []
    for path in sorted((ROOT / "models/studies").glob("*.json")):
        study = json.loads(path.read_text())
        model = json.loads((ROOT / f"models/drugs/{study['model']}.json").read_text())
        until = hours(study["sampling"]["until"])
        every = hours(study["sampling"]["every"])
        steps = int(until / every)
        times = sorted({every * (steps * k // 24) for k in range(1, 25)} | {until})
        for regimen in study["regimens"]:
            rows, _ = simulate(model, study, regimen, times, until)
            for t in times:
                row = rows[t]
                balance = sum(row["amounts"].values()) + row["eliminated"] - row["entered"]
                assert abs(balance) <= mpf("1e-25") * row["entered"], (path.name, t)
            out.append({
                "study": path.stem, "regimen": regimen["name"],
                "rows": [{"time_h": float(t), "concentration_mg_L": float(rows[t]["concentration"]),
                          "effectSites_mg_L": {k: float(v) for k, v in rows[t]["sites"].items()},
                          "auc_mg_h_L": float(rows[t]["area"]), "eliminated_mg": float(rows[t]["eliminated"])} for t in times],
            })
    note = ("courses of the worked studies, recomputed in 40-digit arithmetic by recompute.py; "
            "a value at a dose's or a change's time is the one just before it")
    text = json.dumps({"note": note, "courses": out}, indent=1)
    (Path(__file__).parent / "studies.json").write_text(text + "\n")


if __name__ == "__main__":
    compare()
    if "studies" in sys.argv:
        studies()
