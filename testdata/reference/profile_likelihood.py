"""Limits of the profile likelihood of a random-effects mean, for the sets of pooling.json: bounded one-dimensional minimisers of scipy over the logarithm of
tau-squared, on overlapping windows, and brentq for the limits. Run in this folder; writes profile_likelihood.json."""
import json

import numpy as np
from scipy.optimize import brentq, minimize_scalar
from scipy.stats import chi2

sets = next(v for k, v in json.load(open("pooling.json")).items() if k.lower() == "sets")
out = []
for s in sets:
    s = {k.lower(): v for k, v in s.items()}
    y, v = np.array(s["y"]), np.array(s["v"])

    def top_at(mu):
        def minus(t):
            w = v + np.exp(t)
            return 0.5 * np.sum(np.log(w) + (y - mu) ** 2 / w)
        best = -0.5 * np.sum(np.log(v) + (y - mu) ** 2 / v)
        for a in np.linspace(-14, 4, 19):
            best = max(best, -minimize_scalar(minus, bounds=(a - 1, a + 1), method="bounded", options={"xatol": 1e-12}).fun)
        return best

    mean = minimize_scalar(lambda m: -top_at(m), bounds=(min(y), max(y)), method="bounded", options={"xatol": 1e-12})
    fall = lambda m: -mean.fun - top_at(m) - chi2.ppf(0.95, 1) / 2
    span = 5 * (max(y) - min(y))
    out.append({"name": s["name"], "y": s["y"], "v": s["v"], "lower": brentq(fall, mean.x - span, mean.x, xtol=1e-13), "upper": brentq(fall, mean.x, mean.x + span, xtol=1e-13)})
json.dump({"sets": out}, open("profile_likelihood.json", "w"), indent=1)
