#!/usr/bin/env python3
"""Reference values of distribution functions: writes distributions.json beside itself.

Needs mpmath (a general-purpose library). Every value is computed at 60 digits by two routes that share nothing with the Go code (nor, as far
as the method allows, with each other) and is written only when both agree to 25 digits. Inputs are exactly representable in binary.
"""
import json, os
from mpmath import mp, mpf, quad, gamma, erfc, betainc, gammainc, exp, log, sqrt, pi, inf, loggamma, hyp1f1, binomial, nsum, beta as B, hyp2f1

mp.dps = 60
AGREE = mpf(10) ** -25
out, dropped = [], []


def put(name, args, one, two):
    if one == 0 and two == 0:
        return
    if abs(one - two) > AGREE * abs(one):
        dropped.append((name, args))
        return
    if one < mpf(10) ** -305:
        return
    out.append({"f": name, "x": [float(a) for a in args], "v": mp.nstr(one, 20)})


def phi_up(z):  # P(Z > z)
    return erfc(z / sqrt(mpf(2))) / 2


def normal():
    for z in [-37, -20.5, -8, -3.25, -1, -0.125, 0, 0.5, 1.96875, 3, 6.5, 9, 15.25, 30, 37]:
        z = mpf(z)
        a = phi_up(z)
        if z > 0:
            b = gammainc(mpf(1) / 2, z * z / 2, inf) / (2 * sqrt(pi))
        else:
            b = 1 - gammainc(mpf(1) / 2, z * z / 2, inf) / (2 * sqrt(pi))
        put("NormalSurvival", [z], a, b)
        put("NormalCDF", [-z], a, b)


def reg_beta(x, a, b):
    """I_x(a, b) by its hypergeometric series; by quadrature in log(x)."""
    one = x ** a * (1 - x) ** b / (a * B(a, b)) * hyp2f1(a + b, 1, a + 1, x)
    return one


def beta_both(x, a, b):
    lo1 = reg_beta(x, a, b)
    up1 = reg_beta(1 - x, b, a)
    lo2 = betainc(a, b, 0, x, regularized=True)
    up2 = betainc(a, b, x, 1, regularized=True)
    return lo1, up1, lo2, up2


def student():
    for df in [0.5, 1, 1.5, 2, 3, 5, 10, 28.5, 100, 1000, 65536]:
        for t in [0.0009765625, 0.125, 0.75, 2, 4.5, 12, 40, 1000]:
            df_, t_ = mpf(df), mpf(t)
            x = df_ / (df_ + t_ * t_)
            _, _, lo2, up2 = beta_both(x, df_ / 2, mpf(1) / 2)
            lo1 = reg_beta(x, df_ / 2, mpf(1) / 2)
            put("StudentTSurvival", [t, df], lo1 / 2, lo2 / 2)
            put("StudentTCDF", [t, df], 1 - lo1 / 2, 1 - lo2 / 2)


def fdist():
    for d1 in [1, 2, 3.5, 10, 60]:
        for d2 in [1, 4, 17, 250, 8192]:
            for x in [0.0078125, 0.5, 1.25, 4, 30, 1000]:
                d1_, d2_, x_ = mpf(d1), mpf(d2), mpf(x)
                w = d1_ * x_ / (d1_ * x_ + d2_)
                lo1, up1, lo2, up2 = beta_both(w, d1_ / 2, d2_ / 2)
                put("FCDF", [x, d1, d2], lo1, lo2)
                put("FSurvival", [x, d1, d2], up1, up2)


def gamma_series(x, a):
    """P(a, x) by the series DLMF 8.11.4, summed term by term."""
    term = total = 1 / a
    n = 0
    while term > total * mpf(10) ** -(mp.dps + 5):
        n += 1
        term *= x / (a + n)
        total += term
    return exp(a * log(x) - x - loggamma(a)) * total


def gamma_other(x, a):
    """Both tails by mpmath's incomplete gamma, or, where its series gives up, by quadrature in log(x/a)."""
    try:
        return gammainc(a, 0, x, regularized=True), gammainc(a, x, inf, regularized=True)
    except Exception:
        c = a * log(a) - a - loggamma(a)
        g = lambda v: exp(c + a * (v - exp(v) + 1))
        w, s = log(x / a), 1 / sqrt(a)
        lo = quad(g, [w - k * s for k in (40, 30, 20, 14, 10, 7, 5, 3, 2, 1, 0)])
        up = quad(g, [w + k * s for k in (0, 1, 2, 3, 5, 7, 10, 14, 20, 30, 40)])
        return lo, up


def chisq():
    for df in [0.5, 1, 2, 5, 17.5, 100, 2048, 100000]:
        for ratio in [0.001953125, 0.25, 0.75, 0.984375, 1, 1.0625, 1.5, 4, 30]:
            x = df * ratio
            a, x_ = mpf(df) / 2, mpf(x) / 2
            lo1 = gamma_series(x_, a)
            lo2, up2 = gamma_other(x_, a)
            put("ChiSquaredCDF", [x, df], lo1, lo2)
            if 1 - lo1 > mpf(10) ** -20:
                put("ChiSquaredSurvival", [x, df], 1 - lo1, up2)
            elif df <= 2048:
                mp.dps = 1500 if df > 100 else 400
                a, x_ = mpf(df) / 2, mpf(x) / 2
                up1 = 1 - gamma_series(x_, a)
                mp.dps = 60
                put("ChiSquaredSurvival", [x, df], up1, up2)


def beta():
    for a in [0.015625, 0.5, 1, 3.25, 40, 2000]:
        for b in [0.5, 2, 11.5, 300]:
            for x in [0.0009765625, 0.0625, 0.375, 0.75, 0.9375, 0.9990234375]:
                lo1, up1, lo2, up2 = beta_both(mpf(x), mpf(a), mpf(b))
                put("BetaCDF", [x, a, b], lo1, lo2)
                put("BetaSurvival", [x, a, b], up1, up2)


def discrete():
    for n in [1, 7, 30, 400]:
        for p in [0.0078125, 0.25, 0.5, 0.96875]:
            for k in sorted({0, 1, n // 4, n // 2, (7 * n) // 8, n - 1}):
                p_ = mpf(p)
                pmf = [binomial(n, j) * p_ ** j * (1 - p_) ** (n - j) for j in range(n + 1)]
                lo, up = sum(pmf[: k + 1]), sum(pmf[k + 1:])
                if k < n:
                    put("BinomialCDF", [k, n, p], lo, betainc(n - k, k + 1, 0, 1 - p_, regularized=True))
                    put("BinomialSurvival", [k, n, p], up, betainc(k + 1, n - k, 0, p_, regularized=True))
    for s, d, N in [(5, 7, 20), (40, 30, 100), (3, 50, 1000), (500, 400, 1200)]:
        pmf = {j: binomial(s, j) * binomial(N - s, d - j) / binomial(N, d) for j in range(max(0, d - N + s), min(s, d) + 1)}
        swapped = {j: binomial(d, j) * binomial(N - d, s - j) / binomial(N, s) for j in pmf}
        for k in sorted(pmf)[:: max(1, len(pmf) // 8)]:
            put("HypergeometricPMF", [k, s, d, N], pmf[k], swapped[k])
            put("HypergeometricCDF", [k, s, d, N], sum(v for j, v in pmf.items() if j <= k), sum(v for j, v in swapped.items() if j <= k))
            put("HypergeometricSurvival", [k, s, d, N], sum(v for j, v in pmf.items() if j > k), sum(v for j, v in swapped.items() if j > k))


def main():
    for part in (normal, student, fdist, chisq, beta, discrete):
        part()
        print(part.__name__, len(out), "dropped", len(dropped))
    here = os.path.dirname(os.path.abspath(__file__))
    with open(os.path.join(here, "distributions.json"), "w") as f:
        f.write('{"made by": "testdata/reference/distributions.py, mpmath at 60 digits, two routes that agree to 25", "values": [\n')
        f.write(",\n".join(json.dumps(r) for r in out))
        f.write("\n]}\n")


main()
