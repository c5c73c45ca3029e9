#!/usr/bin/env python3
"""Reference values of the noncentral t distribution: writes noncentral_t.json beside itself.

Needs mpmath. Route one: quadrature of the joint density over the chi variable, at 34 digits, split at the peak. Route two: Poisson mixture of incomplete
beta functions (Guenther 1978), summed at enough digits to survive its cancellation. A value is written only when both agree to 18 digits; where the second route
is out of reach (df or noncentrality large) the quadrature is repeated at other break points and more digits. Inputs are exactly representable in binary.
The condition numbers (relative change of the value by a relative change of an argument) stand beside each value.
"""
import json, os, sys
from mpmath import mp, mpf, quad, gamma, erfc, betainc, exp, log, sqrt, pi, inf, loggamma, diff, findroot

mp.dps = 34
out, dropped = [], []


def phi_low(z):
    return erfc(-z / sqrt(mpf(2))) / 2


def by_quadrature(t, df, delta, upper, shift=0):
    """P(T <= t) or P(T > t): integral over s > 0 of Phi(+-(t s - delta)) times the chi density."""
    const = log(mpf(2)) + df / 2 * log(df / 2) - loggamma(df / 2)
    sign = -1 if upper else 1

    def log_f(s):
        return const + (df - 1) * log(s) - df * s * s / 2 + log(phi_low(sign * (t * s - delta)))

    # a rough peak by scanning log s
    best, at = None, None
    for i in range(-160, 161):
        s = exp(mpf(i) / 16)
        v = log_f(s)
        if best is None or v > best:
            best, at = v, s
    lo, hi = at / exp(mpf(1) / 16), at * exp(mpf(1) / 16)
    for _ in range(40):
        a, b = lo + (hi - lo) * mpf("0.382"), lo + (hi - lo) * mpf("0.618")
        if log_f(a) < log_f(b):
            lo = a
        else:
            hi = b
    at = (lo + hi) / 2
    best = log_f(at)
    # window where the integrand stays above 1e-45 of its peak
    width = 1 / sqrt(2 * df + t * t + 1)
    points = [at]
    step = 2 * width
    s = at
    while True:
        s = s - step
        if s <= 0:
            s = mpf(0)
            points.insert(0, s)
            break
        points.insert(0, s)
        if log_f(s) < best - 75:
            break
        step *= mpf("1.5")
    s, step = at, 2 * width * (1 + mpf(shift) / 7)
    while True:
        s = s + step
        points.append(s)
        if log_f(s) < best - 75:
            break
        step *= mpf("1.5")
    if points[0] == 0:
        extra = [points[1] * mpf(10) ** -k for k in (20, 12, 8, 5, 3, 2, 1)]
        points = [mpf(0)] + extra + points[1:]
    return quad(lambda s: exp(log_f(s)) if s > 0 else mpf(0), points)


def by_series(t, df, delta, upper):
    """t > 0. Guenther's mixture; for the upper tail the complement at enough digits."""
    keep = mp.dps
    mp.dps = 110
    try:
        x = t * t / (df + t * t)
        lam = delta * delta / 2
        total = phi_low(-delta)
        j, peak = 0, mpf(0)
        p = exp(-lam)
        q = exp(-lam) * delta / sqrt(mpf(2)) / gamma(mpf(3) / 2)
        a1 = betainc(mpf(1) / 2, df / 2, 0, x, regularized=True)
        a2 = betainc(mpf(1), df / 2, 0, x, regularized=True)
        while True:
            term = (p * a1 + q * a2) / 2
            total += term
            if j > lam and abs(p) + abs(q) < mpf(10) ** -105:
                break
            # recurrences in the first parameter
            h = mpf(j) + mpf(1) / 2
            a1 -= exp(h * log(x) + df / 2 * log(1 - x) + loggamma(h + df / 2) - loggamma(h + 1) - loggamma(df / 2))
            h = mpf(j) + 1
            a2 -= exp(h * log(x) + df / 2 * log(1 - x) + loggamma(h + df / 2) - loggamma(h + 1) - loggamma(df / 2))
            j += 1
            p *= lam / j
            q *= lam / (j + mpf(1) / 2)
        return 1 - total if upper else total
    finally:
        mp.dps = keep


def main(dfs=None):
    dfs = dfs or [1, 2, 7.5, 30, 98, 400, 5000, 1000000]
    deltas = [-12, -3, 0.125, 1, 2.75, 10, 20, 38.5, 60, 75]
    for df in dfs:
        for delta in deltas:
            spread = float(sqrt(1 + mpf(delta) ** 2 / (2 * mpf(df))))
            ts = set()
            for k in (-11, -6, -2, 0, 2, 6, 11):
                t = delta + k * spread
                ts.add(round(t * 16) / 16)
            ts.add(2.0)
            for t in sorted(ts):
                if t <= 0:
                    continue
                for upper in (False, True):
                    tt, d, n = mpf(t), mpf(delta), mpf(df)
                    one = by_quadrature(tt, n, d, upper)
                    if one < mpf(10) ** -100 or one > 1 - mpf(10) ** -25:
                        continue
                    if df <= 400 and abs(delta) <= 20:
                        two = by_series(tt, n, d, upper)
                    else:
                        mp.dps = 42
                        two = by_quadrature(tt, n, d, upper, shift=3)
                        mp.dps = 34
                    if abs(one - two) > mpf(10) ** -18 * abs(one):
                        dropped.append((t, df, delta, upper, mp.nstr(one, 5), mp.nstr(two, 5)))
                        continue
                    # condition: |t f(t) / P| and the derivative in delta by a difference
                    mp.dps = 20
                    e = mpf(2) ** -20
                    base = by_quadrature(tt, n, d, upper)
                    ct = abs(by_quadrature(tt * (1 + e), n, d, upper) - base) / (base * e)
                    cd = abs(by_quadrature(tt, n, d * (1 + e), upper) - base) / (base * e)
                    mp.dps = 34
                    out.append({"t": t, "df": df, "delta": delta, "upper": upper, "v": mp.nstr(one, 20), "c": mp.nstr(max(ct, cd), 4)})
        print(df, len(out), len(dropped), flush=True)
    for d in dropped:
        print("dropped", d)
    here = os.path.dirname(os.path.abspath(__file__))
    with open(os.path.join(here, "noncentral_t.json"), "w") as f:
        f.write('{"made by": "testdata/reference/noncentral_t.py, mpmath at 34 digits, two routes that agree to 18", "values": [\n')
        f.write(",\n".join(json.dumps(r) for r in out))
        f.write("\n]}\n")


main()
