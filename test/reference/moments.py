"""Exact moments of decimal data, for test/stats. Made with Python 3 (fractions, decimal, random) and mpmath 1.3.0:
python3 test/reference/moments.py > test/reference/moments.json
Central moments are fractions until the last step, which is done at 50 digits.
"""
import json
import random
from fractions import Fraction
from mpmath import mp, mpf, nstr, sqrt

mp.dps = 50


def number(fraction):
    return mpf(fraction.numerator) / mpf(fraction.denominator)


def moments(values):
    xs = [Fraction(v) for v in values]
    n = len(xs)
    mean = sum(xs) / n
    m2, m3, m4 = (sum((x - mean) ** k for x in xs) / n for k in (2, 3, 4))
    text = lambda value: nstr(value, 20)
    return {
        "mean": text(number(mean)),
        "variance": text(number(m2 * n / (n - 1))),
        "skewness": text(number(m3) / (number(m2) * sqrt(number(m2)))),
        "kurtosis": text(number(m4) / number(m2) ** 2 - 3),
    }


random.seed(20260302)
amounts = lambda n, shape: [f"{random.lognormvariate(4, shape):.2f}" if random.random() < 0.3 else "0" for _ in range(n)]
sets = {
    "fares, most of them 0": [amounts(300, 1.0)],
    "heavy tail": [amounts(200, 2.2)],
    "far from 0": [[f"{10_000_000 + random.gauss(0, 0.5):.6f}" for _ in range(100)]],
    "negative and nine places": [[f"{random.gauss(-3, 2):.9f}" for _ in range(60)]],
    "an outlier of 1e8 in the other arm": [amounts(250, 0.8), amounts(249, 0.8) + ["100000000"]],
    "an outlier of 1e12 in the other arm": [amounts(250, 0.8), amounts(249, 0.8) + ["1000000000000"]],
    "two values": [["1", "2"]],
}
rows = [{"name": name, "arms": [{"values": arm, **moments(arm)} for arm in arms]} for name, arms in sets.items()]
print("[\n" + ",\n".join(json.dumps(row) for row in rows) + "\n]")
