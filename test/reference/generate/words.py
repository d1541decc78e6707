"""
Every word for exposure and phases, worked out from scratch for studies of one to three compartments, with depot, lag, transit
stages, effect site, release in parts, missed and late doses, infusions that overlap, lines of different intervals, endless
infusions, starts in steady state, changes of the patient and repeating dialysis.

An independent reading of the files and of the definitions: eigenvectors in mpmath at 50 digits (130 where transit stages share
a rate, which are set apart by 1e-22), so that every concentration is a sum of exponentials; turning points and crossings by
root search from a dense grid; the periodic state by solving (I - A) x = b over one period. It shares no code with the program.

    python3 test/reference/generate/words.py        writes test/reference/words/<name>.json
"""

import copy
import json
import math
import pathlib
import sys
from fractions import Fraction

import mpmath as mp

mp.mp.dps = 50
F = lambda x: mp.mpf(float(x))
TIME = {"s": mp.mpf(1)/3600, "min": mp.mpf(1)/60, "h": mp.mpf(1), "d": mp.mpf(24), "wk": mp.mpf(168)}
PU = {"L/h": 1, "L": 1, "/h": 1, "1": 1, "h": 1, "mL/min": mp.mpf(60)/1000, "L/min": 60, "mL": mp.mpf(1)/1000, "min": mp.mpf(1)/60, "/min": 60, "L/d": mp.mpf(1)/24, "/d": mp.mpf(1)/24}
AM = {"g": 1000, "mg": 1, "ug": mp.mpf(1)/1000, "ng": mp.mpf(10)**-6, "kg": 10**6}
def hours(q): return F(q["value"]) * TIME[q["unit"]]
def near(a, b): return abs(a-b) <= mp.mpf(10)**-12 * max(abs(a), abs(b))
def before(a, b): return a < b and not near(a, b)

class Model:
    """amount system M (with effect sites appended), V, obs"""
    def __init__(self, names, K, e, V, obs, effects):
        self.names, self.K, self.e, self.V, self.obs, self.effects = names, K, e, V, obs, effects
        n, m = len(names), len(effects)
        self.n, self.N = n, n+m
        M = mp.zeros(n+m)
        for j in range(n):
            out = e[j]
            for i in range(n):
                if i != j:
                    M[i, j] = K[i][j]; out += K[i][j]
            M[j, j] = -out
        for k, (nm, src, ke0) in enumerate(effects):
            M[n+k, src] = ke0 / V[src]; M[n+k, n+k] = -ke0
        self.M = M
        self._eig = None
    def eig(self):
        if self._eig is None:
            M = self.M.copy()
            d = [M[i, i] for i in range(self.N)]
            # perturb equal diagonals (defective chains) by tiny relative amounts
            seen = {}
            for i in range(self.N):
                key = mp.nstr(M[i, i], 25)
                c = seen.get(key, 0); seen[key] = c+1
                if c: M[i, i] *= (1 + c*PERT)
            rep = max(seen.values())
            with mp.workdps(mp.mp.dps + 25*(rep-1)*2):
                E, P = mp.eig(M)
                for j in range(self.N):
                    big = max(range(self.N), key=lambda i: abs(P[i, j])); x = P[big, j]
                    for i in range(self.N): P[i, j] = mp.re(P[i, j]/x)
                Pi = P**-1
                D = mp.diag([mp.re(x) for x in E])
                res = mp.norm(M*P-P*D, 1); assert res < mp.mpf(10)**-40*mp.norm(M, 1), res
                assert mp.norm(P*Pi-mp.eye(self.N), 1) < mp.mpf(10)**-25
            self._eig = ([-mp.re(x) for x in E], P.apply(mp.re), Pi.apply(mp.re), max(abs(mp.im(x)) for x in E))
        return self._eig
    def with_clearance(self, cl):
        if cl == 0: return self
        e = list(self.e); e[self.obs] += cl / self.V[self.obs]
        return Model(self.names, self.K, e, self.V, self.obs, self.effects)
PERT = mp.mpf(10)**-22

class Seg:
    def __init__(self, t0, t1, model, x0, inp):
        self.t0, self.t1, self.m, self.inp = t0, t1, model, inp
        lam, P, Pi, _ = model.eig()
        self.lam, self.P = lam, P
        N = model.N
        b = mp.zeros(N, 1)
        for i in range(model.n): b[i] = inp[i]
        y0 = Pi * x0; r = Pi * b
        # y(t) = y0 e^-lt + r (1-e^-lt)/l
        self.c = [y0[i] - r[i]/lam[i] for i in range(N)]
        self.s = [r[i]/lam[i] for i in range(N)]
        self.x0 = x0
        self._sig = {}
    def state(self, t):
        tau = t - self.t0
        if tau == 0: return self.x0
        y = mp.matrix([self.s[i] + self.c[i]*mp.exp(-self.lam[i]*tau) for i in range(len(self.lam))])
        return self.P * y
    def coeffs(self, sig):
        if sig not in self._sig:
            row, sc = (self.m.obs, self.m.V[self.m.obs]) if sig == 'obs' else (self.m.n+sig, 1)
            k = sum(self.P[row, i]*self.s[i] for i in range(len(self.lam)))/sc
            self._sig[sig] = (k, [(self.P[row, i]*self.c[i]/sc, self.lam[i]) for i in range(len(self.lam))])
        return self._sig[sig]
    def val(self, sig, t):
        k, cs = self.coeffs(sig); tau = t-self.t0
        return k + sum(c*mp.exp(-l*tau) for c, l in cs)
    def slope(self, sig, t):
        k, cs = self.coeffs(sig); tau = t-self.t0
        return -sum(c*l*mp.exp(-l*tau) for c, l in cs)
    def turns(self, sig):
        if ('t', sig) not in self._sig:
            g = grid(self.t0, self.t1); sl = [self.slope(sig, t) for t in g]; out = []
            for i in range(len(g)-1):
                if sl[i]*sl[i+1] < 0: out.append(root(lambda t: self.slope(sig, t), g[i], g[i+1]))
            self._sig[('t', sig)] = out
        return self._sig[('t', sig)]
    def area(self, sig, a, b):
        k, cs = self.coeffs(sig)
        return k*(b-a) + sum(c/l*(mp.exp(-l*(a-self.t0))-mp.exp(-l*(b-self.t0))) for c, l in cs)

def grid(a, b, seg=None, n=40):
    pts = {a, b}
    L = b-a
    for k in range(1, n): pts.add(a + L*k/n)
    for k in range(1, 34):
        h = L * mp.mpf(2)**(-k); pts.add(a+h); pts.add(a + h*mp.mpf('1.4'))
        pts.add(b-h)
    return sorted(p for p in pts if a <= p <= b)

def root(f, a, b):
    """Where f changes sign between a and b: secants, with a halving every fourth time."""
    fa, fb = f(a), f(b)
    if fa == 0: return a
    if fb == 0: return b
    for k in range(400):
        c = (a*fb - b*fa)/(fb-fa)
        if k % 4 == 3 or not (a < c < b): c = (a+b)/2
        fc = f(c)
        if fc == 0: return c
        if fa*fc < 0: b, fb = c, fc
        else: a, fa = c, fc
        if b-a < mp.mpf(10)**-35*max(abs(b), mp.mpf(10)**-12): break
    return (a+b)/2

class Course:
    def __init__(self, segs, x_init): self.segs, self.init = segs, x_init; self.end = segs[-1].t1; self.begin = segs[0].t0
    def within(self, a, b):
        for s in self.segs:
            lo, hi = max(a, s.t0), min(b, s.t1)
            if lo < hi: yield s, lo, hi
    def final(self): return self.segs[-1].state(self.end)
    def after(self, sig, t):
        for s in reversed(self.segs):
            if s.t0 <= t or near(s.t0, t): return s.val(sig, max(t, s.t0))
    def beforev(self, sig, t):
        """before anything given at t, but after a change of the model at t"""
        for i, s in enumerate(self.segs):
            if near(s.t0, t):
                if i == 0: x = self.init
                else: x = self.segs[i-1].state(s.t0)
                return x[s.m.obs]/s.m.V[s.m.obs] if sig == 'obs' else x[s.m.n+sig]
        for s in self.segs:
            if s.t0 < t <= s.t1*(1+mp.mpf(10)**-13): return s.val(sig, min(t, s.t1))
    def area(self, sig, a, b): return sum((s.area(sig, lo, hi) for s, lo, hi in self.within(a, b)), mp.mpf(0))
    def points(self, sig, a, b):
        """per segment list of monotone breakpoints"""
        out = []
        for s, lo, hi in self.within(a, b):
            pts = [lo] + [t for t in s.turns(sig) if lo < t < hi]
            pts.append(hi)
            out.append((s, pts))
        return out
    def extremes(self, sig, a, b):
        c = []
        P = self.points(sig, a, b)
        for i, (s, pts) in enumerate(P):
            for t in pts: c.append((t, s.val(sig, t)))
            # change of volume at the end counts
            c.append((pts[-1], self.beforev(sig, pts[-1])))
        c = [(t, v if v > mp.mpf(10)**-30 else mp.mpf(0)) for t, v in c]
        mx = max(v for _, v in c); mn = min(v for _, v in c)
        tol = mp.mpf(10)**-15
        return dict(peak=mx, peakTime=min(t for t, v in c if v >= mx*(1-tol)), minimum=mn, minimumTime=min(t for t, v in c if v <= mn*(1+tol)+mp.mpf(10)**-300))
    def crossings(self, sig, level, a, b):
        out = []; below = self.beforev(sig, a) < level
        for s, pts in self.points(sig, a, b):
            v = s.val(sig, pts[0])
            if (v < level) != below:
                below = v < level; out.append((pts[0], 'down' if below else 'up'))
            for p, q in zip(pts, pts[1:]):
                vq = s.val(sig, q)
                if (vq < level) != below:
                    t = root(lambda t: s.val(sig, t)-level, p, q)
                    below = vq < level; out.append((t, 'down' if below else 'up'))
        return out
    def time_side(self, sig, level, a, b, side):
        tot = mp.mpf(0)
        for s, pts in self.points(sig, a, b):
            for p, q in zip(pts, pts[1:]):
                fp, fq = side*(s.val(sig, p)-level), side*(s.val(sig, q)-level)
                if fp > 0 and fq > 0: tot += q-p
                elif fp <= 0 and fq <= 0: pass
                else:
                    t = root(lambda t: s.val(sig, t)-level, p, q)
                    tot += (t-p) if fp > 0 else (q-t)
        return tot

def propagate(x0, t0, t1, boluses, infusions, models, sessions):
    """boluses (t, comp, amt); infusions (t0,t1,comp,rate); models [(from, Model)]; sessions (t0,t1,cl)."""
    cuts = [t0, t1]
    cand = [t for t, _, _ in boluses] + [t for i in infusions for t in i[:2]] + [t for t, _ in models] + [t for s in sessions for t in s[:2]]
    for t in sorted(cand):
        if before(t0, t) and before(t, t1): cuts.append(t)
    cuts.sort()
    u = [cuts[0]]
    for t in cuts[1:]:
        if before(u[-1], t): u.append(t)
    u[-1] = t1
    segs = []; x = x0
    for a, b in zip(u, u[1:]):
        mid = (a+b)/2
        mod = [m for f, m in models if f <= mid][-1]
        cl = sum((c for s, e, c in sessions if s < mid < e), mp.mpf(0))
        if not hasattr(mod, 'wcache'): mod.wcache = {}
        if cl not in mod.wcache: mod.wcache[cl] = mod.with_clearance(cl)
        md = mod.wcache[cl]
        x = x.copy()
        for t, c, amt in boluses:
            if near(t, a) or t == a: x[c] += amt
        inp = [mp.mpf(0)]*md.n
        for s, e, c, r in infusions:
            if s < mid < e: inp[c] += r
        segs.append(Seg(a, b, md, x, inp))
        x = segs[-1].state(b)
    return Course(segs, x0)

def param(p, patient):
    u = PU[p["unit"]]; tot = mp.mpf(0)
    for t in p["typical"]:
        v = F(t["value"])
        for f in t.get("factors", []):
            x = F(patient[f["covariate"]]["value"]); ref = F(f["reference"]["value"])
            if f["kind"] == "power": v *= (x/ref)**F(f["exponent"])
            elif f["kind"] == "linear": v *= 1 + F(f["slope"])*(x-ref)
            elif f["kind"] == "exponential": v *= mp.exp(F(f["rate"])*(x-ref))
            else: raise Exception(f["kind"])
        tot += v
    return tot*u
def build(m, patient):
    P = {k: param(v, patient) for k, v in m["parameters"].items()}
    names = []; V = []; obs = None; eff = []
    eids = {t["to"]: t for t in m["transfers"] if t["kind"] == "effect"}
    for c in m["compartments"]:
        if c["id"] in eids: continue
        names.append(c["id"]); V.append(P[c["volume"]] if "volume" in c else None)
        if c.get("observed"): obs = len(names)-1
    arrows = []; outs = []
    for t in m["transfers"]:
        k = t["kind"]; ix = names.index
        if k == "first-order": arrows.append((ix(t["from"]), ix(t["to"]), P[t["rate"]]))
        elif k == "exchange":
            a, b = map(ix, t["between"])
            if "clearance" in t: q = P[t["clearance"]]; arrows += [(a, b, q/V[a]), (b, a, q/V[b])]
            else: arrows += [(a, b, P[t["rates"][0]]), (b, a, P[t["rates"][1]])]
        elif k == "clearance": outs.append((ix(t["from"]), P[t["clearance"]]/V[ix(t["from"])]))
        elif k == "elimination": outs.append((ix(t["from"]), P[t["rate"]]))
        elif k == "transit":
            prev = ix(t["from"]); r = P[t["rate"]]
            for s in range(t["stages"]):
                names.append(f'{t["from"]}_{t["to"]}_{s+1}'); V.append(None)
                arrows.append((prev, len(names)-1, r)); prev = len(names)-1
            arrows.append((prev, ix(t["to"]), r))
        elif k == "effect": eff.append((t["to"], ix(t["from"]), P[t["rate"]]))
        else: raise Exception(k)
    n = len(names); K = [[mp.mpf(0)]*n for _ in range(n)]; e = [mp.mpf(0)]*n
    for a, b, r in arrows: K[b][a] += r
    for a, r in outs: e[a] += r
    mod = Model(names, K, e, V, obs, eff); mod.P = P
    routes = {}
    for r in m["routes"]:
        parts = r.get("parts") or [{"into": r["into"], "fraction": 1}]
        g = lambda v: P[v] if isinstance(v, str) else (F(v) if not isinstance(v, dict) else hours(v))
        routes[r["name"]] = dict(F=P[r["bioavailability"]] if "bioavailability" in r else mp.mpf(1), lag=P[r["lag"]] if "lag" in r else mp.mpf(0),
            parts=[dict(into=names.index(p["into"]), fraction=g(p["fraction"]), lag=g(p["lag"]) if "lag" in p else mp.mpf(0), over=g(p["over"]) if "over" in p else None) for p in parts])
    mod.routes = routes
    return mod

class Study:
    def __init__(self, s, regimen=0):
        self.s = s; m = s["model"]; self.m = m
        self.until = hours(s["sampling"]["until"])
        pat = dict(s["patient"]); ch = sorted(pat.pop("changes", []), key=lambda c: hours(c["at"]))
        self.sessions = pat.pop("sessions", [])
        self.models = [(mp.mpf(0), build(m, pat))]; self.pats = [pat]
        for c in ch:
            if before(self.until, hours(c["at"])): continue
            pat = {**pat, **{k: v for k, v in c.items() if k != "at"}}
            t = hours(c["at"])
            if near(t, self.models[-1][0]): self.models[-1] = (t, build(m, pat)); self.pats[-1] = pat
            else: self.models.append((t, build(m, pat))); self.pats.append(pat)
        self.reg = s["regimens"][regimen]
        self.lines = self.reg["doses"]
        self.fu = F(m["drug"].get("fractionUnbound", 1))
        self.ss_model = [x for f, x in self.models if f <= self.until or near(f, self.until)][-1]
        self.admins = self.administrations(self.until)
    def at(self, t):
        k = [i for i, (f, _) in enumerate(self.models) if f <= t or near(f, t)][-1]
        return self.models[k][1], self.pats[k]
    def giving(self, line, ex, t, model=None, pat=None):
        """(duration, [inputs]) with inputs (kind, start, into, amount, duration)"""
        if model is None: model, pat = self.at(t)
        ex = ex or {}
        w = F(pat["weight"]["value"]) if "weight" in pat else None
        def amount(q):
            u = q["unit"].split('/'); a = F(q["value"])*AM[u[0]]
            if len(u) > 1 and u[1] == 'kg':
                a *= F(pat["dosingWeight"]["value"]) if "dosingWeight" in pat else w
            return a
        over = hours(line["over"]) if "over" in line else mp.mpf(0)
        if "rate" in line:
            q = line["rate"]; parts = q["unit"].split('/'); a = F(q["value"])*AM[parts[0]]
            if 'kg' in parts: a *= w
            a = a*over/TIME[parts[-1]]
        else: a = amount(line["amount"])
        if "atMost" in line: a = min(a, amount(line["atMost"]))
        if "amount" in ex: a = amount(ex["amount"])
        if "over" in ex: over = hours(ex["over"])
        if "stoppedAfter" in ex:
            st = hours(ex["stoppedAfter"])
            if st < over: a *= st/over; over = st
        if "fractionTaken" in ex: a *= F(ex["fractionTaken"])
        r = model.routes[line["route"]]
        inputs = []
        for p in r["parts"]:
            d = p["over"] if p["over"] is not None else over
            amt = a*r["F"]*p["fraction"]; st = t + r["lag"] + p["lag"]
            inputs.append(("inf" if d > 0 else "bol", st, p["into"], amt, d))
        return over, a, inputs
    def administrations(self, end, cont=None):
        """cont: lines that repeat, continued past until"""
        out = []
        for li, L in enumerate(self.lines):
            ev = hours(L["every"]) if "every" in L else None
            cnt = L.get("count") if ev is not None else 1
            if cont and li in cont: cnt = None
            exs = {x["number"]: x for x in L.get("exceptions", [])}
            shift = mp.mpf(0)
            k = 0
            while cnt is None or k < cnt:
                t = hours(L["at"]) + (ev*k if ev is not None else 0)
                k += 1
                if cnt is None and not before(t+shift, end) and not before(t, end): break
                ex = exs.get(k, {})
                tt = t + shift
                if "lateBy" in ex:
                    tt += hours(ex["lateBy"])
                    if ex.get("shiftsLater"): shift += hours(ex["lateBy"])
                if ex.get("missed"): continue
                if not before(tt, end): continue
                d, a, inp = self.giving(L, ex, tt)
                if a == 0: continue
                out.append(dict(line=li, at=tt, dur=d, amount=a, inputs=inp))
        out.sort(key=lambda x: x["at"])
        return out
    def session_spans(self, end, cont=None):
        out = []
        for i, S in enumerate(self.sessions):
            ev = hours(S["every"]) if "every" in S else None
            cnt = S.get("count") if ev is not None else 1
            if cont and i in cont: cnt = None
            k = 0
            while cnt is None or k < cnt:
                t = hours(S["at"]) + (ev*k if ev is not None else 0); k += 1
                if not before(t, end): break
                out.append((t, t+hours(S["for"]), F(S["clearance"]["value"])*PU[S["clearance"]["unit"]]))
        return out
    @staticmethod
    def split(inputs):
        b = [(s, c, a) for k, s, c, a, d in inputs if k == 'bol']
        f = [(s, s+d, c, a/d) for k, s, c, a, d in inputs if k == 'inf']
        return b, f
    def start(self):
        m0 = self.models[0][1]; x = mp.zeros(m0.N, 1); carried = []
        if self.reg.get("start") == "steady-state":
            for L in self.lines:
                if "every" not in L: continue
                ev = hours(L["every"]); at = hours(L["at"])
                if not before(at, ev): continue
                d, a, inp = self.giving(L, None, at, *self.at(0))
                x = x + periodic(m0, ev, inp, [])[0]
                k = 1
                while True:
                    any_ = False
                    for kind, s, c, amt, dd in inp:
                        s2 = s - k*ev
                        if kind == 'bol':
                            if s2 >= 0: carried.append((kind, s2, c, amt, dd)); any_ = True
                        elif s2+dd > 0 and not near(s+dd, k*ev):
                            carried.append((kind, s2, c, amt, dd)); any_ = True
                    if not any_: break
                    k += 1
        self.carried = carried
        return x
    def course(self, end=None, cont=None, scont=None, extend=()):
        end = end or self.until
        ad = self.administrations(end, cont)
        x = self.start()
        inp = [i for a in ad for i in a["inputs"]]
        ext = []
        for a in ad:
            for i in a["inputs"]:
                k, s, c, amt, d = i
                if (a["line"]) in extend and k == 'inf' and not before(s+d, self.until): ext.append((k, s, c, amt/d*(end-s), end-s))
                else: ext.append(i)
        b, f = self.split(ext + self.carried)
        f = [(max(s, mp.mpf(0)), e, c, r) for s, e, c, r in f]
        return propagate(x, mp.mpf(0), end, b, f, self.models, self.session_spans(end, scont)), ad

def periodic(model, T, inputs, sessions, endless=None):
    """periodic state at 0 and its course; inputs with starts in [0, T + ...), wrapped."""
    bol = []; inf = []
    for k, s, c, a, d in inputs:
        if k == 'bol':
            p = s - mp.floor(s/T)*T
            if near(s, mp.nint(s/T)*T): p = mp.mpf(0)
            bol.append((p, c, a))
        else:
            r = a/d; j = 0
            while True:
                s2 = s - j*T
                if s2 + d <= 0: break
                if s2 < T: inf.append((max(s2, mp.mpf(0)), min(s2+d, T), c, r))
                j += 1
    ses = []
    for s, e, cl in sessions:
        j = 0
        while e - j*T > 0:
            ses.append((max(s-j*T, mp.mpf(0)), min(e-j*T, T), cl)); j += 1
    for c, r in enumerate(endless or []):
        if r: inf.append((mp.mpf(0), T, c, r))
    mods = [(mp.mpf(0), model)]
    N = model.N
    zero = mp.zeros(N, 1)
    base = propagate(zero, mp.mpf(0), T, bol, inf, mods, ses).final()
    A = mp.zeros(N)
    for j in range(N):
        x = mp.zeros(N, 1); x[j] = 1
        col = propagate(x, mp.mpf(0), T, [], [], mods, ses).final()
        for i in range(N): A[i, j] = col[i]
    x = mp.lu_solve(mp.eye(N)-A, base)
    return x, propagate(x, mp.mpf(0), T, bol, inf, mods, ses), ses

def frac(q): return Fraction(repr(q["value"])) * {"s": Fraction(1,3600), "min": Fraction(1,60), "h": Fraction(1), "d": Fraction(24), "wk": Fraction(168)}[q["unit"]]
def lcm(a, b):
    return Fraction(math.lcm(a.numerator*b.denominator, b.numerator*a.denominator), a.denominator*b.denominator)

def starts(ad):
    out = []
    for a in ad:
        if out and near(out[-1][0], a["at"]): out[-1][1].append(a)
        else: out.append((a["at"], [a]))
    return out
def covered(spans, a, b):
    sp = sorted(spans); cur = None
    for s, e in sp:
        if cur is None or before(cur[1], s): cur = [s, e]
        else: cur[1] = max(cur[1], e)
        if not before(a, cur[0]) and not before(cur[1], b): return True
    return False
def intervals(course, ad, sig, end, recurs, spans):
    st = [x for x in starts(ad) if before(x[0], end)]
    out = []
    for i, (t, tog) in enumerate(st):
        nxt = st[i+1][0] if i+1 < len(st) else end
        inc = i+1 == len(st) and not recurs
        ex = course.extremes(sig, t, nxt); auc = course.area(sig, t, nxt)
        run = covered(spans, t, nxt)
        out.append(dict(start=t, end=nxt, incomplete=inc, auc=auc, average=auc/(nxt-t), tog=tog,
             trough=None if inc or run else course.beforev(sig, nxt), **ex))
    return out
def shares(course, sig, low, high, a, b):
    ab = course.time_side(sig, high, a, b, 1)/(b-a) if high is not None else mp.mpf(0)
    be = course.time_side(sig, low, a, b, -1)/(b-a) if low is not None else mp.mpf(0)
    return 1-ab-be, ab, be
def running(course, end):
    if before(end, mp.mpf(24)): return None
    last = end-24
    if last == 0 or near(end, mp.mpf(24)): return (course.area('obs', mp.mpf(0), mp.mpf(24)), mp.mpf(0))
    cuts = sorted({mp.mpf(0), last} | {s.t0 for s in course.segs if 0 < s.t0 < last} | {s.t0-24 for s in course.segs if 0 < s.t0-24 < last})
    c = set(cuts)
    for a, b in zip(cuts, cuts[1:]):
        if near(a, b): continue
        mid = (a+b)/2
        s1 = [s for s in course.segs if s.t0 <= mid][-1]; s2 = [s for s in course.segs if s.t0 <= mid+24][-1]
        f = lambda t: s2.val('obs', t+24)-s1.val('obs', t)
        g = grid(a, b); v = [f(t) for t in g]
        for i in range(len(g)-1):
            if v[i]*v[i+1] < 0: c.add(root(f, g[i], g[i+1]))
    best = [(course.area('obs', t, t+24), t) for t in sorted(c)]
    mx = max(v for v, _ in best)
    return mx, min(t for v, t in best if v >= mx*(1-mp.mpf(10)**-12))

class Words:
    def __init__(self, s, regimen=0):
        self.S = S = Study(s, regimen); self.s = s
        self.course, self.ad = S.course()
        self.until = S.until
        self.now = hours(s["now"]) if "now" in s else None
        self.spans = [(a["at"], a["at"]+a["dur"]) for a in self.ad if a["dur"] > 0] + [(st, st+d) for k, st, c, a, d in S.carried if k == 'inf']
        self.steady()
    def window(self):
        for t in self.s.get("targets", []):
            if t["kind"] == "window": return self.target(t)
        return None
    CU = {"mg/L": 1, "ug/L": mp.mpf(1)/1000, "ng/mL": mp.mpf(1)/1000, "mg.h/L": 1, "h": 1, "1": 1}
    def target(self, t):
        fac = self.S.fu if t.get("unbound") else mp.mpf(1)
        mic = F(self.s["mic"]["value"]) if "mic" in self.s else None
        lim = lambda q: None if q is None else F(q["value"])*self.CU[q["unit"]]
        low, high = lim(t.get("low")), lim(t.get("high"))
        if t.get("perMic"): fac = fac/mic
        if "timesMic" in t:
            x = F(t["timesMic"])*mic
            if t["kind"] == "time-above": low = x
            else: high = x
        sig = 'obs'
        if "of" in t: sig = [e[0] for e in self.S.ss_model.effects].index(t["of"])
        return dict(kind=t["kind"], when=t.get("when", "steady-state"), low=low, high=high, fac=fac, sig=sig, share=F(t.get("share", 1)),
                    after=hours(t["after"]) if "after" in t else None, frm=t.get("from"))
    # ---------- steady state
    def steady(self):
        S = self.S; U = self.until
        def rep(L):
            if "every" not in L or not before(hours(L["at"]), U): return False
            return "count" not in L or not before(hours(L["at"])+L["count"]*hours(L["every"]), U)
        self.rl = [i for i, L in enumerate(S.lines) if rep(L)]
        self.rs = [i for i, L in enumerate(S.sessions) if rep(L)]
        m = S.ss_model; pat = S.pats[[x for _, x in S.models].index(m)]
        end = [a for a in self.ad if a["line"] not in self.rl and a["dur"] > 0 and not before(a["at"]+a["dur"], U)]
        self.endlines = {a["line"] for a in end}
        endless = None
        if end:
            endless = [mp.mpf(0)]*m.n
            for a in end:
                for k, s, c, amt, d in a["inputs"]: endless[c] += amt/d
        self.endless = endless; self.ssk = None
        if not self.rl and not end: self.ss = dict(kind='none'); return
        if not self.rl and not self.rs:
            M = m.M; b = mp.zeros(m.N, 1)
            for i in range(m.n): b[i] = -endless[i]
            x = mp.lu_solve(M, b)
            co = propagate(x, mp.mpf(0), mp.mpf(24), [], [(mp.mpf(0), mp.mpf(24), c, r) for c, r in enumerate(endless) if r], [(mp.mpf(0), m)], [])
            self.ss = dict(kind='constant', level=x[m.obs]/m.V[m.obs], course=co, x=x); return
        evs = [frac(S.lines[i]["every"]) for i in self.rl] + [frac(S.sessions[i]["every"]) for i in self.rs]
        T = evs[0]
        for e in evs[1:]: T = lcm(T, e)
        if len(evs) > 1:
            nd = sum(T/frac(S.lines[i]["every"]) for i in self.rl)
            if nd > 1000 or T > max(1344, max(evs)): self.ss = dict(kind='none'); return
        Tf = mp.mpf(T.numerator)/T.denominator
        origin = min(hours(L["at"]) for L in ([S.lines[i] for i in self.rl] or [S.sessions[i] for i in self.rs]))
        def phase(t, ev):
            p = (t-origin)/ev; n = mp.nint(p)
            if near(t-origin, n*ev): return mp.mpf(0)
            return (t-origin) - mp.floor(p)*ev
        ad = []
        for i in self.rl:
            L = S.lines[i]; ev = hours(L["every"]); p = phase(hours(L["at"]), ev)
            k = 0
            while before(p+k*ev, Tf):
                d, a, inp = S.giving(L, None, p+k*ev, m, pat)
                ad.append(dict(line=i, at=p+k*ev, dur=d, amount=a, inputs=inp)); k += 1
        ad.sort(key=lambda a: a["at"])
        ses = []
        for i in self.rs:
            L = S.sessions[i]; ev = hours(L["every"]); p = phase(hours(L["at"]), ev); k = 0
            while before(p+k*ev, Tf):
                ses.append((p+k*ev, p+k*ev+hours(L["for"]), F(L["clearance"]["value"])*PU[L["clearance"]["unit"]])); k += 1
        inputs = [i for a in ad for i in a["inputs"]]
        x, co, wses = periodic(m, Tf, inputs, ses, endless)
        b, f = S.split(inputs)
        ef = [(mp.mpf(0), Tf, c, r) for c, r in enumerate(endless or []) if r]
        first = propagate(mp.zeros(m.N, 1), mp.mpf(0), Tf, b, f+ef, [(mp.mpf(0), m)], wses)
        sp = [(a["at"], a["at"]+a["dur"]) for a in ad if a["dur"] > 0]
        sp2 = list(sp)
        for s, e in sp:
            j = 1
            while e - j*Tf > 0: sp2.append((s-j*Tf, e-j*Tf)); j += 1
        if endless: sp2.append((mp.mpf(0), Tf))
        self.ss = dict(kind='period', T=Tf, origin=origin, ad=ad, course=co, first=first, spans=sp2, ses=ses, x=x, model=m, pat=pat)
    def ss_words(self, reach=True):
        S, ss = self.S, self.ss
        if ss["kind"] == 'none': return None
        w = self.window()
        if ss["kind"] == 'constant':
            l = ss["level"]; d = dict(period=None, auc24=24*l, peak=l, minimum=l, average=l, trough=None, fluctuation=None, swing=None, accumulationRatio=None)
            if w: d["timeInWindow"], d["timeAbove"], d["timeBelow"] = shares(ss["course"], 'obs', None if w["low"] is None else w["low"]/w["fac"], None if w["high"] is None else w["high"]/w["fac"], mp.mpf(0), mp.mpf(24))
            return d
        T, co, first, ad = ss["T"], ss["course"], ss["first"], ss["ad"]
        auc = co.area('obs', mp.mpf(0), T); ex = co.extremes('obs', mp.mpf(0), T)
        iv = intervals(co, ad, 'obs', T, True, ss["spans"])
        tr = [i["trough"] for i in iv if i["trough"] is not None]
        through = covered(ss["spans"], mp.mpf(0), T)
        d = dict(period=T, auc=auc, auc24=auc*24/T, peak=ex["peak"], peakTime=ex["peakTime"], minimum=ex["minimum"], average=auc/T,
            trough=min(tr) if tr else None, fluctuation=None if through else (ex["peak"]-ex["minimum"])*T/auc, swing=None if through else (ex["peak"]-ex["minimum"])/ex["minimum"])
        if self.rl:
            fa = first.area('obs', mp.mpf(0), T); fe = first.extremes('obs', mp.mpf(0), T)
            if fa == 0: fa = None
            R = auc/fa if fa else None
            d["accumulationRatio"] = R; d["peakRatio"] = ex["peak"]/fe["peak"] if fa else None
            d["troughRatio"] = co.beforev('obs', T)/first.beforev('obs', T) if tr and first.beforev('obs', T) > mp.mpf(10)**-30 else None
            one = len(starts(ad)) == 1 and not self.endless
            d["effectiveHalfLife"] = T*mp.log(2)/mp.log(R/(R-1)) if one and fa else None
            d["operationalHalfLife"] = self.operational() if one and not self.rs and fa else None
        if w: d["timeInWindow"], d["timeAbove"], d["timeBelow"] = shares(co, 'obs', None if w["low"] is None else w["low"]/w["fac"], None if w["high"] is None else w["high"]/w["fac"], mp.mpf(0), T)
        if reach: d.update(self.reached(auc, d["trough"]))
        return d
    def operational(self):
        ss = self.ss; m = ss["model"]; inputs = [i for a in ss["ad"] for i in a["inputs"]]
        b, f = self.S.split(inputs)
        end = max([s for s, _, _ in b]+[e for _, e, _, _ in f])
        big = end + 60/min(l for l in m.eig()[0])
        single = propagate(mp.zeros(m.N, 1), mp.mpf(0), big, b, f, [(mp.mpf(0), m)], []).extremes('obs', mp.mpf(0), big)["peak"]
        def exc(lt):
            T = mp.exp(lt); return periodic(m, T, inputs, [])[1].extremes('obs', mp.mpf(0), T)["peak"]/single-2
        lo = hi = mp.log(ss["T"]); 
        if exc(lo) > 0:
            while exc(hi) > 0: lo = hi; hi += mp.log(2)
        else:
            while exc(lo) < 0: hi = lo; lo -= mp.log(2)
        fl, fh = exc(lo), exc(hi); side = 0
        for it in range(100):
            c = (lo*fh-hi*fl)/(fh-fl) if it % 5 != 4 else (lo+hi)/2
            fc = exc(c)
            if abs(fc) < mp.mpf(10)**-20: return mp.exp(c)
            if fc > 0:
                lo, fl = c, fc
                if side == 1: fh /= 2
                side = 1
            else:
                hi, fh = c, fc
                if side == -1: fl /= 2
                side = -1
            if hi-lo < mp.mpf(10)**-16: break
        return mp.exp((lo+hi)/2)
    def reached(self, auc, trough):
        S, ss = self.S, self.ss; T, o = ss["T"], ss["origin"]
        n = int(mp.ceil((self.until-o)/T))+1
        slow = min(ss["model"].eig()[0])
        n = min(1000, n + int(mp.ceil(mp.mpf(12)/(slow*T)))+2)
        co, ad = S.course(o+n*T if o+n*T > self.until else self.until, set(self.rl), set(self.rs), self.endlines)
        areas = [co.area('obs', o+k*T, o+(k+1)*T) for k in range(n)]
        def stay(vals, goal, marg):
            first = len(vals)
            while first > 0 and vals[first-1] is not None and abs(vals[first-1]-goal) <= marg: first -= 1
            return o+(first+1)*T if first < len(vals) else None
        r = dict(reached90=stay(areas, auc, auc/10))
        if trough is not None:
            low = [None]*n
            for a in starts([a for a in ad if a["line"] in self.rl]) + [(co.end, None)]:
                t = a[0]; k = int(mp.floor((t-o)/T))
                if near(t, o+k*T): k -= 1
                if near(t, o+(k+1)*T+0) is False and t > o+(k+1)*T: k += 1
                if 0 <= k < n:
                    v = co.beforev('obs', t)
                    if low[k] is None or v < low[k]: low[k] = v
            r["reached90ByTrough"] = stay(low, trough, trough/10)
        prev = [i for i, L in enumerate(S.lines) if i not in self.rl and "every" in L and before(hours(L["at"]), o)]
        if prev and not before(o, T):
            b4 = self.course.area('obs', o-T, o); r["reached90OfChange"] = stay(areas, auc, abs(b4-auc)/10)
        return r
    # ---------- document
    def exposure(self, reach=True):
        co, U = self.course, self.until
        d = dict(intervals=intervals(co, self.ad, 'obs', U, False, self.spans))
        w = self.window(); lo = hi = None
        if w: lo = None if w["low"] is None else w["low"]/w["fac"]; hi = None if w["high"] is None else w["high"]/w["fac"]
        days = []
        n = 1
        while before(mp.mpf(24*(n-1)), U):
            a, b = mp.mpf(24*(n-1)), mp.mpf(24*n)
            if before(U, b): days.append(dict(day=n, auc=None))
            else:
                x = dict(day=n, auc=co.area('obs', a, b))
                if w: x["timeInWindow"], x["timeAbove"], x["timeBelow"] = shares(co, 'obs', lo, hi, a, b)
                days.append(x)
            n += 1
        d["days"] = days
        d["running"] = running(co, U)
        st = starts(self.ad)
        if w and st:
            d["timeInWindow"], d["timeAbove"], d["timeBelow"] = shares(co, 'obs', lo, hi, st[0][0], U)
            if lo is not None:
                up = [t for t, k in co.crossings('obs', lo, mp.mpf(0), U) if k == 'up']; dn = [t for t, k in co.crossings('obs', lo, st[-1][0], U) if k == 'down']
                d["timeToReach"] = up[0] if up else None; d["timeToLeave"] = dn[-1] if dn else None
        if self.now is not None:
            d["aucLast24"] = co.area('obs', self.now-24, self.now) if self.now >= 24 else None
            d["aucNext24"] = co.area('obs', self.now, self.now+24) if self.now+24 <= U else None
        d["steadyState"] = self.ss_words(reach)
        d["targets"] = [self.judge(self.target(t)) for t in self.s.get("targets", [])]
        return d
    def judge(self, t):
        w = t["when"]; sig = t["sig"]; U = self.until
        if w == "steady-state":
            if self.ss["kind"] == 'none': return dict(met=None, value=None)
            co = self.ss["course"]; T = self.ss.get("T", mp.mpf(24))
            st = [(mp.mpf(0), T)]
            iv = intervals(co, self.ss["ad"], sig, T, True, self.ss["spans"]) if self.ss["kind"] == 'period' else []
            doses = iv; cut = False
        else:
            co = self.course; iv = intervals(co, self.ad, sig, U, False, self.spans)
            comp = [(i["start"], i["end"]) for i in iv if not i["incomplete"]]; cut = False
            if w == "throughout": st = [(iv[0]["start"], U)] if iv else []; cut = True
            elif w == "from-now": st = [(self.now, U)] if self.now is not None and self.now < U else []; cut = True
            elif w == "every-interval": st = comp
            elif w == "last-interval": st = comp[-1:]
            elif w == "every-day": st = [(mp.mpf(24*k), mp.mpf(24*k+24)) for k in range(int(mp.floor(U/24)))]
            else:
                n = int(w[4:]); st = [(mp.mpf(24*n-24), mp.mpf(24*n))] if 24*n <= U else []
            doses = [i for i in iv if any((a < i["start"] or near(a, i["start"])) and before(i["start"], b) for a, b in st)]
            iv = [i for i in doses if not i["incomplete"]]
        k = t["kind"]; lo, hi, fac = t["low"], t["high"], t["fac"]
        bad = False; vals = []
        L = lambda x: None if x is None else x/fac
        if k == "window": vals = [shares(co, sig, L(lo), L(hi), a, b)[0] for a, b in st]
        elif k == "time-above": vals = [co.time_side(sig, L(lo), a, b, 1)/(b-a) for a, b in st]
        elif k == "time-below": vals = [co.time_side(sig, L(hi), a, b, -1)/(b-a) for a, b in st]
        elif k in ("peak", "minimum"): vals = [fac*co.extremes(sig, a, b)[k] for a, b in st]
        elif k == "average": vals = [fac*co.area(sig, a, b)/(b-a) for a, b in st]
        elif k == "auc24":
            for a, b in st:
                if cut:
                    x = a
                    while x+24 <= b or near(x+24, b): vals.append(fac*co.area(sig, x, min(x+24, b))); x += 24
                else: vals.append(fac*co.area(sig, a, b)*24/(b-a))
        elif k == "trough":
            for i in iv:
                if i["trough"] is None: bad = True
                else: vals.append(fac*i["trough"])
        elif k == "auc-interval": vals = [fac*i["auc"] for i in iv]
        elif k == "level":
            for i in doses:
                tm = i["start"] + (max(a["dur"] for a in i["tog"]) if t["frm"] == "dose end" else 0) + t["after"]
                if before(i["end"], tm):
                    if not i["incomplete"]: bad = True
                    continue
                vals.append(fac*(co.beforev(sig, tm) if before(i["start"], tm) else co.after(sig, tm)))
        if not vals: return dict(met=None, value=None)
        if k in ("window", "time-above", "time-below"): mar = [v-t["share"] for v in vals]
        else: mar = [min(((v-lo)/lo) if lo else mp.inf, ((hi-v)/hi) if hi else mp.inf) for v in vals]
        i = mar.index(min(mar)); fails = mar[i] < -mp.mpf(10)**-12
        return dict(met=False if fails else (None if bad else True), value=vals[i], ambiguous=abs(mar[i]) < 1e-10)

def scc(model):
    n = model.n
    reach = [[model.K[i][j] > 0 for j in range(n)] for i in range(n)]  # from j to i
    R = [[i == j or reach[i][j] for j in range(n)] for i in range(n)]
    for k in range(n):
        for i in range(n):
            for j in range(n):
                if R[i][k] and R[k][j]: R[i][j] = True
    return [i for i in range(n) if R[i][model.obs] and R[model.obs][i]]
def disposition(model):
    mem = scc(model); o = mem.index(model.obs)
    A = mp.zeros(len(mem))
    for a, j in enumerate(mem):
        A[a, a] = -(model.e[j] + sum(model.K[i][j] for i in range(model.n) if i != j))
        for b, i in enumerate(mem):
            if i != j: A[b, a] = model.K[i][j]
    E, P = mp.eig(A); Pi = P**-1
    ph = sorted([(-mp.re(E[k]), mp.re(P[o, k]*Pi[k, o])/model.V[model.obs]) for k in range(len(mem))], key=lambda x: -x[0])
    return mem, A, ph
def stretch(model, until, periods, infs):
    mem, A, ph = disposition(model); V = model.V[model.obs]; o = mem.index(model.obs)
    tot = sum(c/l for l, c in ph)
    d = dict(phases=[dict(ev=l, hl=mp.log(2)/l, c=c, share=c/l/tot) for l, c in ph])
    d["ruling"] = max(i for i, p in enumerate(d["phases"]) if p["share"] >= mp.mpf('0.1'))
    lam = [abs(-x) for x in model.eig()[0]]
    d["stiff"] = max(lam)/min(lam); d["step"] = 2/max(lam); d["steps"] = mp.ceil(until*max(lam)/2)
    cl = 1/tot; mrt = sum(c/l**2 for l, c in ph)/tot
    d.update(cl=cl, mrt=mrt, vss=cl*mrt, vz=cl/ph[-1][0], thl=mp.log(2)/ph[-1][0])
    d["acc"] = {p: [c/mp.expm1(l*p)/sum(cc/mp.expm1(ll*p) for ll, cc in ph) for l, c in ph] for p in periods}
    d["ph"] = ph; d["mem"] = mem
    dec = {}
    for T in infs:
        co = propagate(mp.zeros(model.N, 1), mp.mpf(0), T, [], [(mp.mpf(0), T, model.obs, mp.mpf(1))], [(mp.mpf(0), model)], [])
        x = co.final()
        for sig in ['obs']+list(range(len(model.effects))):
            c0 = co.segs[-1].val(sig, T)
            sg = Seg(mp.mpf(0), mp.mpf(400)/ph[-1][0], model, x, [mp.mpf(0)]*model.n)
            for sh in (20, 50, 80):
                lev = c0*(100-sh)/100
                # first time from which the level has fallen by that much
                t0 = mp.mpf(0); g = grid(mp.mpf(0), sg.t1, n=300)
                v = [sg.val(sig, t)-lev for t in g]
                i = next(i for i in range(1, len(g)) if v[i-1] >= 0 > v[i])
                dec[(sig, T, sh)] = root(lambda t: sg.val(sig, t)-lev, g[i-1], g[i])
    d["dec"] = dec
    return d
class Parts:
    """phases' parts along the course, by augmented linear system per segment: z_i' = -l z_i + coef_i*(rate into obs from outside the disposition)"""
    def __init__(self, W):
        self.W = W; S = W.S; self.segs = []
        z = None; prev = None
        self.ok = True
        bol, _ = S.split([i for a in W.ad for i in a["inputs"]] + S.carried)
        for sg in W.course.segs:
            m = sg.m
            if not hasattr(m, 'disp'): m.disp = disposition(m)
            mem, A, ph = m.disp
            b = [sum(a for t, c, a in bol if c == j and near(t, sg.t0)) for j in range(m.n)]
            V = m.V[m.obs]; o = mem.index(m.obs)
            if any(b[j] for j in mem if j != m.obs): self.ok = False
            if prev is m: z = [zz + c*b[m.obs] for zz, (l, c) in zip(z, ph)]
            elif prev is None and all(W.course.init[i] == 0 for i in mem): z = [c*b[m.obs] for l, c in ph]
            else:
                # take apart
                E, P = mp.eig(A); Pi = P**-1
                order = sorted(range(len(mem)), key=lambda k: mp.re(E[k]))
                xm = mp.matrix([sg.x0[j] for j in mem]); y = Pi*xm
                z = [mp.re(P[o, k]*y[k])/V for k in order]
            self.segs.append((sg, list(z), ph, mem))
            z = self.at(len(self.segs)-1, sg.t1); prev = m
    def at(self, k, t):
        sg, z, ph, mem = self.segs[k]; m = sg.m
        if t == sg.t0: return z
        tau = t-sg.t0; out = []
        # input rate into obs from outside: sum_j K[obs][j] A_j(t), A_j = s + sum c e^-lt
        outside = [j for j in range(m.n) if j not in mem and m.K[m.obs][j] > 0]
        inp0 = W_in(sg, m)
        for (l, c), z0 in zip(ph, z):
            v = z0*mp.exp(-l*tau) + c*inp0*(-mp.expm1(-l*tau))/l
            for j in outside:
                for i in range(len(sg.lam)):
                    li = sg.lam[i]; co = sg.P[j, i]*sg.c[i]*m.K[m.obs][j]*c
                    if co == 0: continue
                    v += co*(mp.exp(-li*tau)-mp.exp(-l*tau))/(l-li) if abs(l-li) > mp.mpf(10)**-40*l else co*tau*mp.exp(-l*tau)
                st = sum(sg.P[j, i]*sg.s[i] for i in range(len(sg.lam)))*m.K[m.obs][j]*c
                v += st*(-mp.expm1(-l*tau))/l
            out.append(v)
        return out
def W_in(sg, m):
    # direct infusion into obs
    return sg.inp[m.obs]
def distribution(W, iv):
    P = Parts(W); out = []
    for it in iv:
        end = max(s+d for a in it["tog"] for k, s, c, am, d in a["inputs"])
        if not P.ok: out.append((end, None)); continue
        if not before(end, it["end"]): out.append((end, None)); continue
        ks = [k for k, (sg, *_r) in enumerate(P.segs) if sg.t1 > end and not near(sg.t1, end) and sg.t0 < it["end"] and not near(sg.t0, it["end"])]
        def ruling(ph):
            tot = sum(c/l for l, c in ph); return max(i for i, (l, c) in enumerate(ph) if c/l/tot >= mp.mpf('0.1'))
        if any(ruling(P.segs[k][2]) == 0 for k in ks): out.append((end, None)); continue
        res = None
        for k in reversed(ks):
            sg, z, ph, mem = P.segs[k]; r = ruling(ph)
            f = lambda t: sum(abs(x) for x in P.at(k, t)[:r]) - mp.mpf('0.05')*sg.val('obs', t)
            a, b = max(end, sg.t0), min(sg.t1, it["end"])
            g = grid(a, b); v = [f(t) for t in g]
            if v[-1] >= 0: res = None if k == ks[-1] else b; break
            i = next((i for i in reversed(range(len(g))) if v[i] >= 0), None)
            if i is not None: res = root(f, g[i], g[i+1]); break
            res = a
        out.append((end, None if res is None else res-end))
    return out

q = lambda v, u: {"value": v, "unit": u}
def model(id, params, comps, transfers, routes, fu=None, covs=None, limits=None):
    units = {}
    P = {}
    for k, v in params.items():
        if isinstance(v, dict): P[k] = v
        else: P[k] = {"unit": v[1], "typical": [{"value": v[0]}]}
    d = {"name": "PW-9", "moiety": "base", "matrix": "plasma"}
    if fu is not None: d["fractionUnbound"] = fu
    if limits: d["limits"] = limits
    return {"format": "phasewise-model", "version": 1, "id": id, "title": id, "drug": d, "source": {"kind": "invented", "citation": "made up"},
        "parameters": P, "compartments": comps, "transfers": transfers, "routes": routes, **({"covariates": covs} if covs else {})}
def powp(value, unit, cov, ref, e): return {"unit": unit, "typical": [{"value": value, "factors": [{"kind": "power", "covariate": cov, "reference": ref, "exponent": e}]}]}
IV = {"name": "intravenous", "into": "central", "input": "infusion"}
one = model("one", {"CL": [3.1, "L/h"], "V": [29, "L"], "ka": [1.3, "/h"], "F": [0.8, "1"], "lag": [0.4, "h"]}, [{"id": "depot"}, {"id": "central", "volume": "V", "observed": True}],
    [{"kind": "first-order", "from": "depot", "to": "central", "rate": "ka"}, {"kind": "clearance", "from": "central", "clearance": "CL"}], [IV, {"name": "oral", "into": "depot", "bioavailability": "F", "lag": "lag"}], fu=0.3)
two = model("two", {"CL": powp(4.2, "L/h", "creatinineClearance", q(100, "mL/min"), 0.9), "V1": powp(21, "L", "weight", q(70, "kg"), 1), "Q": [9, "L/h"], "V2": [38, "L"], "ka": [0.9, "/h"], "F": [0.62, "1"], "lag": [0.25, "h"]},
    [{"id": "depot"}, {"id": "central", "volume": "V1", "observed": True}, {"id": "peripheral", "volume": "V2"}],
    [{"kind": "first-order", "from": "depot", "to": "central", "rate": "ka"}, {"kind": "exchange", "between": ["central", "peripheral"], "clearance": "Q"}, {"kind": "clearance", "from": "central", "clearance": "CL"}],
    [IV, {"name": "oral", "into": "depot", "bioavailability": "F", "lag": "lag"}], fu=0.35, covs={"creatinineClearance": {"equation": "cockcroft-gault", "weight": "actual"}})
three = model("three", {"CL": [2.5, "L/h"], "V1": [5, "L"], "Q2": [12, "L/h"], "V2": [9, "L"], "Q3": [0.8, "L/h"], "V3": [40, "L"], "ke0": [0.7, "/h"], "ktr": [2.2, "/h"], "F": [0.9, "1"], "lag": [0.1, "h"]},
    [{"id": "gut"}, {"id": "central", "volume": "V1", "observed": True}, {"id": "p2", "volume": "V2"}, {"id": "p3", "volume": "V3"}, {"id": "brain"}],
    [{"kind": "transit", "from": "gut", "to": "central", "stages": 3, "rate": "ktr"}, {"kind": "exchange", "between": ["central", "p2"], "clearance": "Q2"}, {"kind": "exchange", "between": ["central", "p3"], "clearance": "Q3"},
     {"kind": "clearance", "from": "central", "clearance": "CL"}, {"kind": "effect", "from": "central", "to": "brain", "rate": "ke0"}],
    [IV, {"name": "oral", "into": "gut", "bioavailability": "F", "lag": "lag"}], fu=0.5)
parts = model("parts", {"CL": [3.1, "L/h"], "V": [29, "L"], "Q": [2, "L/h"], "V2": [60, "L"], "ka": [1.3, "/h"], "ks": [0.15, "/h"], "F": [0.8, "1"], "lag": [1.5, "h"], "f1": [0.35, "1"], "f2": [0.65, "1"], "f3": [0.2, "1"], "d3": [5, "h"]},
    [{"id": "depot"}, {"id": "slow"}, {"id": "central", "volume": "V", "observed": True}, {"id": "per", "volume": "V2"}],
    [{"kind": "first-order", "from": "depot", "to": "central", "rate": "ka"}, {"kind": "first-order", "from": "slow", "to": "central", "rate": "ks"}, {"kind": "exchange", "between": ["central", "per"], "clearance": "Q"}, {"kind": "clearance", "from": "central", "clearance": "CL"}],
    [IV, {"name": "capsule", "parts": [{"into": "depot", "fraction": "f1"}, {"into": "slow", "fraction": "f2", "lag": "lag"}], "bioavailability": "F"}])
def study(m, doses, until, targets=(), patient=None, start="empty", now=None, mic=None, more=(), every=1):
    s = {"format": "phasewise-study", "version": 1, "title": "t", "model": m, "patient": patient or {"weight": q(70, "kg")}, "regimens": [{"name": "a", "start": start, "doses": doses}], "targets": list(targets), "sampling": {"until": q(until, "h"), "every": q(every, "h")}}
    for i, d in enumerate(more): s["regimens"].append({"name": f"b{i}", **d})
    if now is not None: s["now"] = q(now, "h")
    if mic is not None: s["mic"] = q(mic, "mg/L")
    return s
def iv(a, at, over=None, unit="mg", **k):
    d = {"route": "intravenous", "amount": q(a, unit), "at": q(at, "h")}
    if over is None: d["bolus"] = True
    else: d["over"] = q(over, "h")
    for x, v in k.items():
        d[x] = q(v, "h") if x == "every" and not isinstance(v, dict) else v
    return d
def po(a, at, route="oral", **k):
    d = {"route": route, "amount": q(a, "mg"), "at": q(at, "h")}
    for x, v in k.items(): d[x] = q(v, "h") if x == "every" and not isinstance(v, dict) else v
    return d
WHENS = ["steady-state", "throughout", "from-now", "every-interval", "day-2", "last-interval"]
def alltargets(scale=10, unbound=True, of=None):
    T = []
    for w in WHENS:
        base = {"when": w, **({"of": of} if of else {})}
        T += [{"kind": "window", "low": q(scale*0.6, "mg/L"), "high": q(scale*2, "mg/L"), "share": 0.8, **base},
              {"kind": "trough", "low": q(scale*0.5, "mg/L"), "high": q(scale*1.5, "mg/L"), **base}, {"kind": "peak", "high": q(scale*2.2, "mg/L"), **base}, {"kind": "minimum", "low": q(scale*0.2, "mg/L"), **base},
              {"kind": "average", "low": q(scale*0.8, "mg/L"), "high": q(scale*1.4, "mg/L"), **base}, {"kind": "level", "after": q(1, "h"), "from": "dose end", "low": q(scale, "mg/L"), **base}, {"kind": "level", "after": q(2.5, "h"), "from": "dose start", "high": q(scale, "mg/L"), **base},
              {"kind": "auc24", "low": q(scale*20, "mg.h/L"), "high": q(scale*30, "mg.h/L"), **base}, {"kind": "auc-interval", "low": q(scale*10, "mg.h/L"), **base},
              {"kind": "time-above", "low": q(scale, "mg/L"), "share": 0.4, **base}, {"kind": "time-below", "high": q(scale, "mg/L"), "share": 0.4, **base}]
        if unbound and not of:
            T += [{"kind": "window", "low": q(scale*0.2, "mg/L"), "high": q(scale*.5, "mg/L"), "share": 0.5, "unbound": True, "when": w},
              {"kind": "time-above", "timesMic": 2, "unbound": True, "share": 0.5, "when": w}, {"kind": "time-below", "timesMic": 2, "share": 0.5, "when": w},
              {"kind": "auc24", "perMic": True, "low": q(100, "h"), "unbound": True, "when": w}, {"kind": "peak", "perMic": True, "low": q(4, "1"), "when": w}, {"kind": "trough", "perMic": True, "unbound": True, "high": q(4, "1"), "when": w}]
    return T
P2 = {"weight": q(58, "kg"), "creatinineClearance": q(31, "mL/min"), "changes": [{"at": q(72, "h"), "creatinineClearance": q(22, "mL/min")}, {"at": q(200, "h"), "weight": q(75, "kg"), "creatinineClearance": q(22, "mL/min")}]}
C = {}
C["two-loading-exceptions-changes"] = study(two, [iv(20, 0, 2, "mg/kg", atMost=q(1, "g")), iv(750, 24, 1, every=24, count=6, exceptions=[{"number": 2, "missed": True}, {"number": 3, "lateBy": q(3, "h")}, {"number": 4, "stoppedAfter": q(20, "min")}]),
    {"route": "intravenous", "rate": q(0.5, "mg/kg/h"), "over": q(30, "min"), "at": q(150, "h")}, po(500, 160)], 168, alltargets(20), patient=P2, now=60, mic=1)
C["two-beyond-until-change"] = study(two, [iv(750, 0, 1, every=24)], 240, alltargets(20), patient=P2, now=60, mic=1, more=[{"doses": [iv(500, 6, 0.5, every=12, exceptions=[{"number": 3, "lateBy": q(2, "h"), "shiftsLater": True}, {"number": 5, "amount": q(250, "mg")}, {"number": 7, "fractionTaken": 0.4}, {"number": 9, "over": q(3, "h")}])]}])
C["two-two-lines-late-origin"] = study(two, [iv(400, 0, 1, every=12, count=4), iv(800, 48, 1, every=24), po(300, 50, every=18)], 144, alltargets(20), patient={"weight": q(70, "kg"), "creatinineClearance": q(30, "mL/min")}, now=30, mic=1)
C["two-endless"] = study(two, [iv(300, 0, 1), iv(4000, 2, 200)], 96, alltargets(20), patient={"weight": q(70, "kg"), "creatinineClearance": q(30, "mL/min")}, now=30, mic=1)
C["two-endless-plus"] = study(two, [iv(300, 0, 1, every=12), iv(4000, 2, 200)], 96, alltargets(20), patient={"weight": q(70, "kg"), "creatinineClearance": q(30, "mL/min")}, now=30, mic=1)
C["two-start-ss-overlap"] = study(two, [iv(500, 3, 29, every=12), po(200, 30, every=8)], 96, alltargets(20), patient=P2, now=30, mic=1, start="steady-state")
C["dialysis"] = study(two, [iv(500, 0, 1, every=24)], 168, alltargets(20), now=50, mic=1, patient={"weight": q(70, "kg"), "creatinineClearance": q(8, "mL/min"), "renalReplacement": "intermittent", "sessions": [{"at": q(20, "h"), "for": q(4, "h"), "clearance": q(104, "mL/min"), "every": q(48, "h")}, {"at": q(22, "h"), "for": q(6, "h"), "clearance": q(20, "mL/min"), "every": q(48, "h")}]})
C["three-effect"] = study(three, [iv(100, 0, 0.5, every=8), po(50, 4, every=24)], 72, alltargets(5)+alltargets(5, of="brain"), now=30, mic=1)
C["three-transit"] = study(three, [po(100, 0, every=12, exceptions=[{"number": 2, "missed": True}])], 72, alltargets(3)+alltargets(3, of="brain"), now=30, mic=1)
C["parts"] = study(parts, [po(500, 0, "capsule", every=24), iv(100, 5)], 96, alltargets(5, unbound=False), now=30)
C["change-of-dose"] = study(two, [iv(500, 0, 1, every=12, count=10), iv(300, 120, 1, every=12)], 200, alltargets(20), patient={"weight": q(70, "kg"), "creatinineClearance": q(30, "mL/min")}, now=30, mic=1)
C["coincident"] = study(two, [iv(500, 0, 1, every=12), iv(200, 0, every=24), po(300, 12, every=24)], 72, alltargets(20), patient={"weight": q(70, "kg"), "creatinineClearance": q(30, "mL/min")}, now=30, mic=1)

def mod(m, **kw):
    m = copy.deepcopy(m)
    for k, v in kw.items(): m["parameters"][k]["typical"] = [{"value": v}]
    return m
two0 = mod(two, CL=3.0, V1=20); del two0["covariates"]
MORE = {}
MORE["lag-over-interval-ss"] = study(mod(one, lag=9.5), [po(300, 2, every=6)], 60, alltargets(), now=30, mic=2, start="steady-state")
MORE["over-27-every-12"] = study(two0, [iv(300, 0, 27, every=12), iv(100, 0)], 72, alltargets(), now=24, mic=2)
MORE["tinyCL"] = study(mod(two0, CL=1e-7), [iv(300, 0, 1, every=24)], 96, alltargets(5), now=30, mic=2)
MORE["flipflop"] = study(mod(two0, ka=0.01), [po(300, 0, every=24)], 96, alltargets(1), now=30, mic=2)
MORE["three-lines-endless-session"] = study(two, [iv(5000, 1, 300), iv(250, 3, 1, every=8), po(100, 5, every=36)], 168, alltargets(20), now=50, mic=1, patient={"weight": q(70, "kg"), "creatinineClearance": q(8, "mL/min"), "renalReplacement": "intermittent", "sessions": [{"at": q(20, "h"), "for": q(4, "h"), "clearance": q(104, "mL/min"), "every": q(48, "h")}]})
MORE["early-late"] = study(two0, [iv(300, 0, 1, every=12, exceptions=[{"number": 2, "lateBy": q(-3, "h")}, {"number": 3, "lateBy": q(13, "h")}, {"number": 5, "lateBy": q(1, "h"), "shiftsLater": True}])], 96, alltargets(10), now=30, mic=2)

# ---------- the documents' own names
IN = dict(auc='auc_mg_h_L', peak='peak_mg_L', peakTime='peakTime_h', trough='trough_mg_L', minimum='minimum_mg_L', minimumTime='minimumTime_h', average='average_mg_L')
SS = dict(period='period_h', auc='auc_mg_h_L', auc24='auc24_mg_h_L', peak='peak_mg_L', peakTime='peakTime_h', trough='trough_mg_L', minimum='minimum_mg_L', average='average_mg_L', fluctuation='fluctuation', swing='swing', accumulationRatio='accumulationRatio', peakRatio='peakRatio', troughRatio='troughRatio', effectiveHalfLife='effectiveHalfLife_h', operationalHalfLife='operationalHalfLife_h', reached90='reached90_h', reached90ByTrough='reached90ByTrough_h', reached90OfChange='reached90OfChange_h', timeInWindow='timeInWindow', timeAbove='timeAbove', timeBelow='timeBelow')

PICK = ["two-loading-exceptions-changes", "two-beyond-until-change", "two-two-lines-late-origin", "two-endless", "two-endless-plus", "two-start-ss-overlap",
    "dialysis", "three-effect", "three-transit", "parts", "change-of-dose", "coincident"] + list(MORE)
out = lambda x: None if x is None else x if isinstance(x, (bool, str)) else float(x)
def named(d, names): return {v: out(d.get(k)) for k, v in names.items()}
def regimen_document(s, i):
    w = Words(s, i); d = w.exposure()
    ss = d["steadyState"] or {}
    running_ = d["running"]
    return {
        "intervals": [{"start_h": out(x["start"]), "end_h": out(x["end"]), "incomplete": x["incomplete"], **named(x, IN)} for x in d["intervals"]],
        "days": [named(x, {"auc": "auc_mg_h_L", "timeInWindow": "timeInWindow", "timeAbove": "timeAbove", "timeBelow": "timeBelow"}) for x in d["days"]],
        "steadyState": named(ss, SS), "highestRunningAuc24": None if running_ is None else {"auc_mg_h_L": out(running_[0]), "from_h": out(running_[1])},
        **named(d, dict(timeInWindow="timeInWindow", timeAbove="timeAbove", timeBelow="timeBelow", timeToReach="timeToReach_h", timeToLeave="timeToLeave_h", aucLast24="aucLast24_mg_h_L", aucNext24="aucNext24_mg_h_L")),
        "targets": [{"value": out(x["value"]), "met": x["met"]} for x in d["targets"]],
    }, [{"endOfInput_h": out(e), "over_h": out(o)} for e, o in distribution(w, d["intervals"])]
def stretches(s):
    S = Study(s); ms = [m for f, m in S.models if f < S.until]; res = []
    for m in ms:
        r = stretch(m, S.until, [], [F(x) for x in (1, 4, 12, 24)])
        names_ = [m.names[m.obs]] + [e[0] for e in m.effects]
        res.append({"phases": [{"eigenvalue_per_h": out(p["ev"]), "halfLife_h": out(p["hl"]), "coefficient_per_L": out(p["c"]), "shareOfAuc": out(p["share"])} for p in r["phases"]], "rulingPhase": r["ruling"],
            "stiffness": out(r["stiff"]), "longestExplicitStep_h": out(r["step"]), "vss_L": out(r["vss"]), "vz_L": out(r["vz"]), "mrt_h": out(r["mrt"]), "clearance_L_h": out(r["cl"]), "terminalHalfLife_h": out(r["thl"]),
            "decrementTimes": [{"site": n, "infusion_h": t, **{f"by{p}percent_h": out(r["dec"][("obs" if k == 0 else k-1, F(t), p)]) for p in (20, 50, 80)}} for k, n in enumerate(names_) for t in (1, 4, 12, 24)]})
    return res
def write(name, s):
    mp.mp.dps = 130 if "three-e" in name or "three-t" in name else 50
    both = [regimen_document(s, i) for i in range(len(s["regimens"]))]
    found = {"name": name, "study": s, "regimens": [a for a, _ in both], "stretches": stretches(s), "distribution": [x for _, b in both for x in b]}
    folder = pathlib.Path(__file__).resolve().parents[1] / "words"
    folder.mkdir(exist_ok=True)
    (folder / f"{name}.json").write_text(json.dumps(found, separators=(",", ":")) + "\n")
if __name__ == "__main__":
    for name in sys.argv[1:] or PICK:
        write(name, {**C, **MORE}[name])
