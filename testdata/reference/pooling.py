#!/usr/bin/env python3
"""Reference values of pooling and small-study methods: writes pooling.json beside itself.

Needs numpy, scipy and statsmodels (general-purpose libraries). The sets are published tables (testdata/published/datasets.json) and drawn ones with a fixed seed, written out in full so
that the test reads them from here. Likelihoods are maximised by scipy's optimisers over mean and variance together, regressions are statsmodels' least squares, the rank correlation is
scipy's: none of it shares an algorithm with the Go code, which profiles the mean out and brackets roots of slopes.
"""
import json, os
import numpy as np
from scipy import stats, optimize
import statsmodels.api as sm

here = os.path.dirname(os.path.abspath(__file__))
sets = json.load(open(os.path.join(here, "../published/datasets.json")))
rng = np.random.default_rng(20)


def log_or(rows, e1, n1, e2, n2):
    y, v, t = [], [], []
    for r in rows:
        a, b, c, d = r[e1], r[n1] - r[e1], r[e2], r[n2] - r[e2]
        t.append([a, r[n1], c, r[n2]])
        y.append(np.log(a * d / (b * c)))
        v.append(1 / a + 1 / b + 1 / c + 1 / d)
    return np.array(y), np.array(v), t


def restricted(y, v, t2):
    w = 1 / (v + t2)
    mu = (w * y).sum() / w.sum()
    return -0.5 * (np.log(v + t2).sum() + np.log(w.sum()) + (w * (y - mu) ** 2).sum())


def joint(y, v):
    def f(p):
        s2 = v + np.exp(p[1])
        return 0.5 * (np.log(s2) + (y - p[0]) ** 2 / s2).sum()
    best = min((optimize.minimize(f, [y.mean(), np.log(s)], method="Nelder-Mead", options=dict(xatol=1e-12, fatol=1e-15, maxiter=20000)) for s in (1e-3, 0.05, 0.5)), key=lambda r: r.fun)
    zero = 0.5 * (np.log(v) + (y - (y / v).sum() / (1 / v).sum()) ** 2 / v).sum()
    return (best.x[0], np.exp(best.x[1])) if best.fun < zero - 1e-12 else ((y / v).sum() / (1 / v).sum(), 0.0)


def selection(y, v, sign, omega=None):
    y = sign * y
    s = np.sqrt(v)
    z = stats.norm.isf(0.025)
    seen = y >= z * s

    def f(p):
        t2, om = (0.0 if zero else np.exp(p[1])), (np.exp(p[2]) if omega is None else omega)
        sd = np.sqrt(v + t2)
        q = stats.norm.sf((z * s - p[0]) / sd)
        return -(stats.norm.logpdf(y, p[0], sd) + np.where(seen, 0, np.log(om)) - np.log(q + om * (1 - q))).sum()
    zero = False
    starts = [[y.mean(), np.log(a)] + ([np.log(b)] if omega is None else []) for a in (0.01, 0.1) for b in (0.3, 1)]
    best = min((optimize.minimize(f, x, method="Nelder-Mead", options=dict(xatol=1e-11, fatol=1e-14, maxiter=40000, maxfev=40000)) for x in starts), key=lambda r: r.fun)
    p = best.x
    zero = bool(np.exp(p[1]) < 1e-6)
    if zero:
        best = min((optimize.minimize(f, x, method="Nelder-Mead", options=dict(xatol=1e-11, fatol=1e-14, maxiter=40000, maxfev=40000)) for x in starts), key=lambda r: r.fun)
        p = best.x
    # observed information by Richardson-extrapolated differences
    def hessian(x, h):
        n = len(x)
        H = np.zeros((n, n))
        for i in range(n):
            for j in range(n):
                e = np.zeros(n); g = np.zeros(n); e[i] = h; g[j] = h
                H[i, j] = (f(x + e + g) - f(x + e - g) - f(x - e + g) + f(x - e - g)) / (4 * h * h)
        return H
    H = (4 * hessian(p, 1e-3) - hessian(p, 2e-3)) / 3
    if zero:
        keep = [i for i in range(len(p)) if i != 1]
        H = H[np.ix_(keep, keep)]
    V = np.linalg.inv(H)
    out = {"mean": sign * p[0], "se": float(np.sqrt(V[0, 0])), "tau2": 0.0 if zero else float(np.exp(p[1]))}
    if omega is None:
        out["chance"] = float(np.exp(p[2]))
        m, t2 = joint(y, v)
        plain = -stats.norm.logpdf(y, m, np.sqrt(v + t2)).sum()
        out["lr"] = float(2 * (plain - best.fun))
    return out


def wls(y, X, w):
    r = sm.WLS(y, sm.add_constant(X), weights=w).fit()
    return [float(r.params[0]), float(r.bse[0]), float(r.params[1]), float(r.bse[1])]


def q_of(y, v, t2):
    w = 1 / (v + t2)
    mu = (w * y).sum() / w.sum()
    return (w * (y - mu) ** 2).sum()


def describe(name, y, v, sign, tables=None):
    k, w = len(y), 1 / v
    out = {"name": name, "y": list(map(float, y)), "v": list(map(float, v)), "sign": sign}
    q = q_of(y, v, 0)
    dl = max(0.0, (q - (k - 1)) / (w.sum() - (w ** 2).sum() / w.sum()))
    out["dl"] = dl
    r = optimize.minimize_scalar(lambda l: -restricted(y, v, np.exp(l)), bounds=(-14, 3), method="bounded", options=dict(xatol=1e-12))
    out["reml"] = float(np.exp(r.x)) if -r.fun > restricted(y, v, 0) + 1e-12 else 0.0
    m, t2 = joint(y, v)
    out["ml"], out["mlMean"] = float(t2), float(m)
    hi = 1000 * y.var() + 10
    out["pm"] = float(optimize.brentq(lambda t: q_of(y, v, t) - (k - 1), 0, hi, xtol=1e-15)) if q > k - 1 else 0.0
    a, b = stats.chi2.isf(0.025, k - 1), stats.chi2.ppf(0.025, k - 1)
    out["qp"] = [float(optimize.brentq(lambda t: q_of(y, v, t) - a, 0, hi, xtol=1e-15)) if q > a else 0.0, float(optimize.brentq(lambda t: q_of(y, v, t) - b, 0, hi, xtol=1e-15)) if q > b else 0.0]
    ho = max(0.0, y.var(ddof=1) - v.mean()); out["ho"] = ho
    s0 = y.var(); ws = 1 / (v / s0 + 1); mu = (ws * y).sum() / ws.sum(); out["sj"] = float((ws * (y - mu) ** 2).sum() / (k - 1))
    out["hs"] = max(0.0, (q - k) / w.sum())
    w1 = 1 / (v + dl); mu = (w1 * y).sum() / w1.sum()
    out["dl2"] = max(0.0, float(((w1 * (y - mu) ** 2).sum() - ((w1 * v).sum() - (w1 ** 2 * v).sum() / w1.sum())) / (w1.sum() - (w1 ** 2).sum() / w1.sum())))
    hk = (w1 * (y - mu) ** 2).sum() / (k - 1)
    out["hk"] = [float(mu - stats.t.isf(.025, k - 1) * np.sqrt(hk / w1.sum())), float(mu + stats.t.isf(.025, k - 1) * np.sqrt(hk / w1.sum()))]
    se = np.sqrt(v)
    out["pet"], out["peese"] = wls(y, se, w), wls(y, v, w)
    mu0 = (w * y).sum() / w.sum()
    tau = stats.kendalltau((y - mu0) / np.sqrt(v - 1 / w.sum()), v, variant="b")
    out["kendall"] = float(tau.statistic if hasattr(tau, "statistic") else tau.correlation)
    out["half"] = selection(y, v, sign, 0.5)
    out["quarter"] = selection(y, v, sign, 0.25)
    if k >= 10:
        out["selection"] = selection(y, v, sign)
    if tables is not None:
        T = np.array(tables, float)
        n = T[:, 1] + T[:, 3]; ev = T[:, 0] + T[:, 2]
        out["tables"] = tables
        out["peters"] = wls(y, 1 / n, 1 / (1 / ev + 1 / (n - ev)))
        z = T[:, 0] - T[:, 1] * ev / n
        vv = T[:, 1] * T[:, 3] * ev * (n - ev) / (n * n * (n - 1))
        out["harbord"] = wls(z / np.sqrt(vv), np.sqrt(vv), np.ones(len(z)))
    return out


def main():
    out = []
    b = sets["bcg"]["rows"]
    y, v, t = log_or(b, 2, 3, 4, 5)
    out.append(describe("bcg", y, v, -1, t))
    e = sets["teacher_expectancy"]["rows"]
    out.append(describe("teacher expectancy", np.array([r[0] for r in e]), np.array([r[1] ** 2 for r in e]), 1))
    for k, tau, seed in ((6, 0.3, 1), (25, 0.2, 2), (40, 0.05, 3)):
        g = np.random.default_rng(seed)
        v = np.exp(g.normal(-3, 1, k))
        y = g.normal(0.25, tau, k) + g.normal(0, 1, k) * np.sqrt(v)
        out.append(describe("drawn %d" % k, np.round(y, 6), np.round(v, 6), 1))
    with open(os.path.join(here, "pooling.json"), "w") as f:
        json.dump({"made by": "testdata/reference/pooling.py, scipy and statsmodels", "sets": out}, f, indent=1)
        f.write("\n")


main()
