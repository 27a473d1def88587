"""Writes special-functions.json: values of the distributions in analysis/numerics to 20 digits.

Needs mpmath 1.2 (Debian: python3-mpmath). Run in this folder: python3 special-functions.py > special-functions.json
Each value comes from the defining integral or series at 60 digits, by no route that the TypeScript code takes.
"""

import json
from mpmath import (
    betainc, erfc, exp, findroot, gamma, gammainc, inf, linspace, log, loggamma, mp, mpf, ncdf, npdf, nstr, quad, sqrt,
)

mp.dps = 60
out = {}


def put(name, arguments, value):
    out.setdefault(name, []).append([[float(a) for a in arguments], nstr(value, 20)])


def beta(x, y, a, b):
    """Regularised incomplete beta; the hypergeometric series of the smaller side."""
    if x <= y:
        return betainc(a, b, 0, x, regularized=True)
    return 1 - betainc(b, a, 0, y, regularized=True)


def t_two_sided(t, df):
    t, df = mpf(t), mpf(df)
    return betainc(df / 2, mpf(1) / 2, 0, df / (df + t * t), regularized=True)


def f_upper(f, d1, d2):
    f, d1, d2 = mpf(f), mpf(d1), mpf(d2)
    return beta(d2 / (d2 + d1 * f), d1 * f / (d2 + d1 * f), d2 / 2, d1 / 2)


for x in ["1e-10", "0.1", "0.5", "1", "1.5", "2.3", "7", "11.9", "12.1", "171.5", "1e6", "1e15"]:
    put("logGamma", [x], loggamma(mpf(float(x))))
for x in ["1e-300", "0.3", "0.9999999", "1.0000001", "2", "40", "1e8", "100000000.1", "1e300"]:
    put("naturalLogarithm", [x], log(mpf(float(x))))
for x in ["-37.5", "-30", "-10", "-5.7", "-5.6", "-2", "-0.7", "-0.6", "-1e-9", "0", "0.5", "1.959963984540054", "4", "8"]:
    put("normalCdf", [x], erfc(-mpf(float(x)) / sqrt(2)) / 2)
for p in ["1e-300", "1e-100", "1e-20", "1e-10", "0.001", "0.025", "0.0749", "0.0751", "0.3", "0.9", "0.99999"]:
    target = mpf(float(p))
    z = findroot(lambda z: log(erfc(-z / sqrt(2)) / 2) - log(target), -sqrt(-2 * log(target)) if target < 0.5 else mpf(1))
    put("normalQuantile", [p], z)
for df in ["0.5", "1", "2", "3.7", "9", "30", "1000", "100000"]:
    for t in ["0.001", "0.7", "1.5", "2.262", "6", "40", "1000"]:
        put("studentTTwoSided", [t, df], t_two_sided(float(t), float(df)))
for df, t in [("1", "1e299"), ("2", "1e149"), ("4", "1e74"), ("9", "1e33"), ("30", "2e10")]:
    put("studentTTwoSided", [t, df], t_two_sided(float(t), float(df)))
for df in ["1", "2.5", "9", "120"]:
    for p in ["1e-100", "1e-8", "0.005", "0.025", "0.3", "0.45", "0.975"]:
        q, d = mpf(float(p)), mpf(df)
        # in the logarithm of t, bracketed, so that any tail is reached
        tail = lambda u: log(t_two_sided(exp(u), d)) - log(2 * min(q, 1 - q))
        u = findroot(tail, (mpf(-6), mpf(240)), solver="anderson", tol=mpf(10) ** -60, maxsteps=500, verify=False)
        put("studentTQuantile", [p, df], exp(u) if q > 0.5 else -exp(u))
for d1 in ["1", "2", "3.3", "10", "200"]:
    for d2 in ["1", "4.5", "12", "300"]:
        for f in ["0.01", "0.9", "1.1", "3.5", "25", "1e4"]:
            put("fUpperTail", [f, d1, d2], f_upper(float(f), float(d1), float(d2)))
for df in ["0.4", "1", "2", "7", "30", "400"]:
    for ratio in ["0.01", "0.5", "1", "1.5", "4", "20"]:
        x = float(ratio) * float(df)
        put("chiSquareUpperTail", [x, df], gammainc(mpf(float(df)) / 2, mpf(x) / 2, inf, regularized=True))
        put("chiSquareCdf", [x, df], gammainc(mpf(float(df)) / 2, 0, mpf(x) / 2, regularized=True))

mp.dps = 40


def noncentral_t(t, df, delta):
    t, df, delta = mpf(t), mpf(df), mpf(delta)
    constant = 2 * (df / 2) ** (df / 2) / gamma(df / 2)
    f = lambda u: ncdf(t * exp(u) - delta) * constant * exp(df * u - df * exp(2 * u) / 2)
    breaks = linspace(-70, 4, 149)
    if t != 0 and delta / t > 0:
        middle = log(delta / t)
        breaks = sorted(set(breaks + [middle + mpf(k) / 200 for k in range(-16, 17)]))
    return quad(f, breaks)


for t, df, delta in [
    (2, 5, 0.5), (-1, 1, 20), (30, 9, 35), (9, 1, 35), (2.0639, 23, 2.4494897427831779), (-2.0639, 23, 2.4494897427831779),
    (0, 4, 1.3), (-5, 2, 35), (1447, 14, 1000), (1.65, 200.5, 3), (12.7, 1, -0.3),
]:
    put("noncentralTCdf", [t, df, delta], noncentral_t(t, df, delta))


def range_upper(q, k):
    q = mpf(q)
    f = lambda z: npdf(z) * (ncdf(z) ** (k - 1) - (ncdf(z) - ncdf(z - q)) ** (k - 1))
    return k * quad(f, linspace(-12, float(q) / 2 + 14, 60))


for k in [2, 3, 4, 10]:
    for q in [0.05, 1, 3.314, 6, 12]:
        put("studentisedRangeUpperTail", [q, k], range_upper(q, k))

blocks = (f' "{name}": [\n' + ",\n".join("  " + json.dumps(row) for row in rows) + "\n ]" for name, rows in out.items())
print("{\n" + ",\n".join(blocks) + "\n}")
