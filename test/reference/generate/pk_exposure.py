"""
Exposure, steady state, phases' parts and decrement times of two and three compartments, as sums of exponentials in
32-digit arithmetic: mpmath only, no code of the program. Roots by mpmath's findroot from brackets on a dense grid.

Two compartments: the woman of 71 years of the PW-101 model (invented), CL 1.5016171875 L/h, V1 17.4 L, Q 9 L/h, V2 38 L;
depot with ka 0.9 /h, F 0.62. Three: remifentanil, Minto CF et al. 1997 Anesthesiology 86:10-23 (abstract: parameters of
the simple model), minutes. All inputs are the doubles that a program reads.

    python3 test/reference/generate/pk_exposure.py        writes test/reference/pk/exposure.json
"""

import json
import pathlib

import mpmath as mp

mp.mp.dps = 32
f = lambda x: mp.mpf(float(x))


def disposition(volumes, clearance, exchanges):
    """Exponents, fastest first, and coefficients of the concentration after a unit bolus: eigenvalues of the symmetric form."""
    n = len(volumes)
    k = mp.zeros(n)
    k[0, 0] = -(clearance + sum(exchanges)) / volumes[0]
    for i, q in enumerate(exchanges, 1):
        k[i, i] = -q / volumes[i]
        k[0, i] = k[i, 0] = q / mp.sqrt(volumes[0] * volumes[i])
    values, vectors = mp.eigsy(k)
    order = sorted(range(n), key=lambda i: values[i])
    return [-values[i] for i in order], [vectors[0, i] ** 2 / volumes[0] for i in order]


class Dose:
    """What one dose adds to the exponential of each phase, at t after it."""

    def __init__(self, at, amount, over=None, ka=None):
        self.at, self.amount, self.over, self.ka = f(at), f(amount), None if over is None else f(over), ka

    def parts(self, t, rates, coefficients):
        t = t - self.at
        if t < 0:
            return [mp.mpf(0)] * len(rates)
        if self.ka is not None:
            return [self.amount * c * self.ka / (self.ka - r) * (mp.exp(-r * t) - mp.exp(-self.ka * t)) for r, c in zip(rates, coefficients)]
        if self.over is None:
            return [self.amount * c * mp.exp(-r * t) for r, c in zip(rates, coefficients)]
        on = min(t, self.over)
        return [self.amount / self.over * c / r * (-mp.expm1(-r * on)) * mp.exp(-r * (t - on)) for r, c in zip(rates, coefficients)]

    def area(self, t, rates, coefficients):
        """Area up to t."""
        t = t - self.at
        if t <= 0:
            return mp.mpf(0)
        total = mp.mpf(0)
        for r, c in zip(rates, coefficients):
            if self.ka is not None:
                total += self.amount * c * self.ka / (self.ka - r) * (-mp.expm1(-r * t) / r + mp.expm1(-self.ka * t) / self.ka)
            elif self.over is None:
                total += self.amount * c * -mp.expm1(-r * t) / r
            else:
                on = min(t, self.over)
                rising = on + mp.expm1(-r * on) / r
                falling = -mp.expm1(-r * on) * -mp.expm1(-r * (t - on)) / r
                total += self.amount / self.over * c / r * (rising + falling)
        return total


class Course:
    def __init__(self, doses, phases):
        self.doses, self.phases = doses, phases

    def parts(self, t):
        own = [dose.parts(t, *self.phases) for dose in self.doses]
        return [sum(p[i] for p in own) for i in range(len(self.phases[0]))]

    def level(self, t):
        return sum(self.parts(t))

    def area(self, a, b):
        return sum(dose.area(b, *self.phases) - dose.area(a, *self.phases) for dose in self.doses)

    def cuts(self, a, b):
        times = {a, b}
        for dose in self.doses:
            for t in (dose.at, dose.at + (dose.over or 0)):
                if a < t < b:
                    times.add(t)
        return sorted(times)

    def just_before(self, t):
        """Value before a dose at t."""
        return Course([dose for dose in self.doses if dose.at < t], self.phases).level(t)


def bracketed(function, a, b, points=40):
    """Roots of a continuous function in (a, b), by sign changes on a grid."""
    roots = []
    grid = [a + (b - a) * mp.mpf(i) / points for i in range(points + 1)]
    values = [function(t) for t in grid]
    for k in range(points):
        if values[k] * values[k + 1] < 0:
            roots.append(mp.findroot(function, (grid[k], grid[k + 1]), solver="anderson", tol=mp.mpf(10) ** -60, verify=False))
    return roots


def crossings(course, level, a, b):
    found = []
    cuts = course.cuts(a, b)
    for start, end in zip(cuts, cuts[1:]):
        found += bracketed(lambda t: course.level(t) - level, start, end)
    return found


def time_above(course, level, a, b):
    edges = sorted(set(course.cuts(a, b) + crossings(course, level, a, b)))
    return sum(end - start for start, end in zip(edges, edges[1:]) if course.level((start + end) / 2) > level)


def turning_points(course, a, b):
    found = []
    cuts = course.cuts(a, b)
    for start, end in zip(cuts, cuts[1:]):
        slope = lambda t: slope_of(course, t, (start + end) / 2)
        found += bracketed(slope, start, end)
    return found


def slope_of(course, t, inside):
    """Time derivative on the smooth stretch that `inside` lies in: by the exponentials' own decay and the inputs in force."""
    rates, coefficients = course.phases
    total = mp.mpf(0)
    for dose in course.doses:
        if dose.at > inside:
            continue
        for r, c, part in zip(rates, coefficients, dose.parts(t, rates, coefficients)):
            entering = mp.mpf(0)
            if dose.ka is not None:
                entering = dose.amount * dose.ka * mp.exp(-dose.ka * (t - dose.at))
            elif dose.over is not None and dose.at + dose.over > inside:
                entering = dose.amount / dose.over
            total += c * entering - r * part
    return total


def peak(course, a, b):
    times = course.cuts(a, b)[:-1] + turning_points(course, a, b)
    best = max(times, key=course.level)
    end = course.just_before(b)
    return (course.level(best), best) if course.level(best) >= end else (end, b)


def lowest(course, a, b):
    times = course.cuts(a, b)[:-1] + turning_points(course, a, b)
    return min([course.level(t) for t in times] + [course.just_before(b)] + [course.just_before(t) for t in course.cuts(a, b)[1:-1]])


two = disposition([f(17.4), f(38)], f(1.5016171875), [f(9)])
ka, bioavailability = f(0.9), f(0.62)
out = {}

# A regimen as given: a load, a missed dose, a late one.
given = Course([Dose(0, 1500, 2), Dose(12, 750, 1), Dose(36, 750, 1), Dose(50, 750, 1), Dose(60, 750, 1)], two)
starts = [mp.mpf(t) for t in (0, 12, 36, 50, 60)]
ends = starts[1:] + [mp.mpf(72)]
out["given"] = {
    "intervals": [
        {
            "auc": given.area(a, b), "peak": peak(given, a, b)[0], "peakTime": peak(given, a, b)[1],
            "trough": None if b == 72 else given.just_before(b), "minimum": lowest(given, a, b),
        }
        for a, b in zip(starts, ends)
    ],
    "days": [
        {
            "auc": given.area(24 * n, 24 * n + 24),
            "timeAbove": time_above(given, 40, mp.mpf(24 * n), mp.mpf(24 * n + 24)) / 24,
            "timeBelow": 1 - time_above(given, 20, mp.mpf(24 * n), mp.mpf(24 * n + 24)) / 24,
        }
        for n in range(3)
    ],
    "timeAbove": time_above(given, 40, mp.mpf(0), mp.mpf(72)) / 72,
    "timeBelow": 1 - time_above(given, 20, mp.mpf(0), mp.mpf(72)) / 72,
    "timeToReach": min(crossings(given, 20, mp.mpf(0), mp.mpf(72))),
}
rises = []
for start, end in zip(*(lambda cuts: (cuts, cuts[1:]))(sorted({t for s in (0, 24) for t in [c - s for c in given.cuts(mp.mpf(0), mp.mpf(72))] if 0 <= t <= 48}))):
    rises += bracketed(lambda t: given.level(t + 24) - given.level(t), start, end) + [start, end]
best = max(rises, key=lambda t: given.area(t, t + 24))
out["given"]["highestRunningAuc24"] = {"auc": given.area(best, best + 24), "from": best}


def steady(pattern, period, periods):
    """The last of many periods; enough that the first dose has no digit left in it."""
    return Course([Dose(d[0] + k * period, *d[1:]) for k in range(periods) for d in pattern], two), (periods - 1) * mp.mpf(period)


def operational(pattern, most):
    single = max(Course([Dose(*pattern)], two).level(t) for t in [mp.mpf(pattern[2] or 0)] + turning_points(Course([Dose(*pattern)], two), mp.mpf(0), mp.mpf(most)))

    def excess(tau):
        rates, coefficients = two
        # Sum over all earlier doses, in closed form: e^(-r t) -> e^(-r t) / (1 - e^(-r tau)), each exponential by itself.
        amount, over, absorption = f(pattern[1]), pattern[2], pattern[3] if len(pattern) > 3 else None

        def level(t):
            total = mp.mpf(0)
            for r, c in zip(rates, coefficients):
                fold = lambda rate: mp.exp(-rate * t) / -mp.expm1(-rate * tau)
                if absorption is not None:
                    total += amount * c * absorption / (absorption - r) * (fold(r) - fold(absorption))
                else:
                    # at t >= over within the period
                    total += amount / over * c / r * mp.expm1(r * over) * fold(r)
            return total

        if absorption is None:
            return level(mp.mpf(over)) / single - 2
        slope = lambda t: mp.diff(level, t)
        tops = bracketed(slope, mp.mpf("1e-6"), tau, 60)
        return max(level(t) for t in tops) / single - 2

    return mp.findroot(excess, (mp.mpf(8), mp.mpf(20)), solver="anderson", tol=mp.mpf(10) ** -40, verify=False)


out["steadyState"] = []
for tau in (12, 24):
    course, start = steady([(0, 750, 1)], tau, 1700 // tau)
    first = Course([Dose(0, 750, 1)], two)
    tau = mp.mpf(tau)
    auc, auc1 = course.area(start, start + tau), first.area(0, tau)
    high, trough = peak(course, start, start + tau)[0], course.just_before(start + tau)
    ratio = auc / auc1
    windows = [course.area(k * tau, (k + 1) * tau) for k in range(24)]
    troughs = [course.just_before((k + 1) * tau) for k in range(24)]
    reached = lambda values, goal: (max([k for k in range(24) if abs(values[k] - goal) > goal / 10], default=-1) + 2) * tau
    out["steadyState"].append({
        "period": tau, "auc": auc, "peak": high, "trough": trough, "average": auc / tau, "fluctuation": (high - trough) * tau / auc,
        "swing": (high - trough) / trough, "accumulationRatio": ratio, "peakRatio": high / peak(first, mp.mpf(0), tau)[0],
        "troughRatio": trough / first.just_before(tau), "effectiveHalfLife": tau * mp.log(2) / mp.log(ratio / (ratio - 1)),
        "reached90": reached(windows, auc), "reached90ByTrough": reached(troughs, trough),
    })
out["operationalHalfLife"] = {"infusion": operational((0, 750, 1), 48), "oral": operational((0, 310, None, ka), 48)}

# 500 mg over 1 h every 12 h from 0, and 300 mg by mouth every 8 h from 2 h: one period of 24 h.
pattern = [(0, 500, 1), (12, 500, 1)] + [(2 + 8 * k, 300 * 0.62, None, ka) for k in range(3)]
course, start = steady(pattern, 24, 70)
high, when = peak(course, start, start + 24)
out["together"] = {
    "auc": course.area(start, start + 24), "peak": high, "peakTime": when - start, "minimum": lowest(course, start, start + 24),
    "troughs": [course.just_before(start + t) for t in (2, 10, 12, 18, 24)],
}

# Distribution over: parts of the fast phase below 5 % of the whole, single doses, time from the end of the input.
over = {}
for name, dose, begin in [("bolus", Dose(0, 1), 0), ("infusion", Dose(0, 1, 1), 1)] + [(f"oral ka {k}", Dose(0, 1, None, f(k)), 0) for k in (0.9, 0.3, 0.05)]:
    course = Course([dose], two)
    excess = lambda t: course.parts(t)[0] - course.level(t) / 20
    over[name] = max(bracketed(excess, mp.mpf(begin) + mp.mpf("1e-3"), mp.mpf(100), 200)) - begin
out["distributionOver"] = over

# Decrement times of remifentanil, plasma and effect site, minutes.
three = disposition([f(4.98), f(9.01), f(6.54)], f(2.46), [f(1.69), f(0.065)])
ke0 = f(0.516)


def site(t, length):
    """Effect site after a constant-rate infusion of `length`: each exponential through the site's own."""
    total = mp.mpf(0)
    for r, c in zip(*three):
        unit = lambda s: c * ke0 * ((-mp.expm1(-r * s) / r) - (-mp.expm1(-ke0 * s) / ke0)) / (ke0 - r) if s > 0 else mp.mpf(0)
        total += unit(t) - unit(t - length)
    return total


out["decrements"] = []
for length in (1, 10, 60, 480):
    plasma = Course([Dose(0, length, length)], three)
    for name, curve in (("plasma", plasma.level), ("effect", lambda t: site(t, mp.mpf(length)))):
        falls = []
        for share in ("0.2", "0.5", "0.8"):
            level = (1 - mp.mpf(float(share))) * curve(mp.mpf(length))
            falls.append(min(bracketed(lambda t: curve(length + t) - level, mp.mpf("1e-9"), mp.mpf(120), 240)))
        out["decrements"].append({"site": name, "infusion": length, "falls": falls})


def plain(value):
    if isinstance(value, dict):
        return {key: plain(each) for key, each in value.items()}
    if isinstance(value, list):
        return [plain(each) for each in value]
    return value if value is None or isinstance(value, str) else float(value)


target = pathlib.Path(__file__).resolve().parents[1] / "pk" / "exposure.json"
document = {
    "source": "sums of exponentials in 32-digit arithmetic (mpmath)", "generatedBy": "generate/pk_exposure.py", "seed": None,
    "tolerance": "1e-12 relative; times of roots 1e-11", "cases": plain(out),
}
target.write_text(json.dumps(document, indent=1) + "\n")
print(target)
