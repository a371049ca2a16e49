"""Tails and critical values to 20 digits, for test/stats. Made with Python 3 and mpmath 1.3.0:
python3 test/reference/tails.py > test/reference/tails.json
Nothing here is taken from the code under test: the normal tail is erfc, t and chi-square are the regularised incomplete
beta and gamma functions at 50 digits, critical values are roots of these.
"""
import json
from mpmath import mp, mpf, erfc, betainc, gammainc, sqrt, findroot, log, exp, loggamma, nstr

mp.dps = 50


def beta_fraction(x, a, b):
    """I_x(a, b) by its continued fraction (Abramowitz and Stegun 26.5.8): mpmath's own is slow for a in the thousands."""
    front = exp(a * log(x) + b * log(1 - x) - loggamma(a) - loggamma(b) + loggamma(a + b)) / a
    c, d = mpf(1), 1 / (1 - (a + b) * x / (a + 1))
    h = d
    for m in range(1, 100000):
        step = mpf(1)
        for top in (m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m)),
                    -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1))):
            d = 1 / (1 + top * d)
            c = 1 + top / c
            step *= c * d
            h *= c * d
        if abs(step - 1) < mpf(10) ** -45:
            return front * h
    raise ArithmeticError("no convergence")


def t_two_sided(t, df):
    t, df = mpf(t), mpf(df)
    if t < 1:
        return 1 - beta_fraction(t * t / (df + t * t), mpf(1) / 2, df / 2)
    return beta_fraction(df / (df + t * t), df / 2, mpf(1) / 2)


def text(value):
    return nstr(value, 20, strip_zeros=False)


normal = [[z, text(erfc(mpf(z) / sqrt(mpf(2))) / 2)]
          for z in [-37, -20, -8.3, -5, -1.96, -0.5, 0, 1e-10, 0.001, 0.1, 0.5, 1, 1.5, 1.96, 2.5758, 3, 4, 5, 6, 7, 8,
                    8.3, 9, 10.5, 12, 15, 18.7, 20, 25, 30, 33.3, 35, 36.5, 37]]

critical = []
for alpha in ["0.999999", "0.99", "0.9", "0.5", "0.2", "0.1", "0.05", "0.025", "0.02", "0.01", "0.005", "0.001", "0.0009", "1e-4", "1e-6",
              "1e-10", "1e-15", "1e-50", "1e-100", "1e-250"]:
    a = mpf(float(alpha))
    z = findroot(lambda z: log(erfc(z / sqrt(mpf(2)))) - log(a), 0.1 if a > 0.5 else sqrt(-2 * log(a)))
    critical.append([float(alpha), text(z)])

student = [[t, df, text(t_two_sided(t, df))]
           for df in [1, 1.5, 2, 2.7, 5, 17.776, 75.5, 198.3, 1000.1, 5000.7, 1e6]
           for t in [1e-8, 1e-6, 0.01, 0.5, 1, 1.96, 3, 6, 10, 20, 37]]

chi = [[x, df, text(gammainc(mpf(df) / 2, mpf(x) / 2, mp.inf, regularized=True))]
       for df in [1, 2, 3, 5, 10, 30, 100, 365]
       for x in [0.001, 0.5, 1, 3.841, 10, 30, 100, 300, 700, 1369]]

tables = {"normal": normal, "critical": critical, "student": student, "chiSquare": chi}
lines = lambda rows: "[\n" + ",\n".join(json.dumps(row) for row in rows) + "\n]"
print("{\n" + ",\n".join(f'"{name}": {lines(rows)}' for name, rows in tables.items()) + "\n}")
