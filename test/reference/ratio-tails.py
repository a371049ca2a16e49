"""How often the normal interval of a difference of two ratios of totals misses, by simulation. Made with Python 3 and
numpy 2.4.6: python3 test/reference/ratio-tails.py > test/reference/ratio-tails.json
Units hold b, geometric on 1, 2, ... with success 0.5, and a = b^power: both arms the same, so the truth is 0. g1, g2 of the
score and c = cov(a - R b, b) / mean(b)^2 are the population's own, by summing over b.
"""
import json
import numpy as np

RUNS = 1_000_000
Z = 1.959963984540054
b = np.arange(1, 46, dtype=float)
p = 0.5 ** b
p /= p.sum()


def case(power, control, variant, rng):
    a = b ** power
    mean = lambda x: float((p * x).sum())
    ratio = mean(a) / mean(b)
    d = (a - ratio * b) / mean(b)
    sd = mean(d ** 2) ** 0.5
    below = above = 0
    for _ in range(RUNS // 50_000):
        level, variance = [], []
        for n in (control, variant):
            counts = rng.multinomial(n, p, size=50_000)
            A, B = counts @ a, counts @ b
            R = A / B
            squares = counts @ (a * a) - 2 * R * (counts @ (a * b)) + R ** 2 * (counts @ (b * b))
            level.append(R)
            variance.append(squares / (n - 1) / n / (B / n) ** 2)
        t = (level[1] - level[0]) / np.sqrt(variance[0] + variance[1])
        below += int((t < -Z).sum())
        above += int((t > Z).sum())
    return {"power": power, "control": control, "variant": variant, "sd": sd,
            "skewness": mean(d ** 3) / sd ** 3, "kurtosis": mean(d ** 4) / sd ** 4 - 3,
            "covariance": mean((a - ratio * b) * b) / mean(b) ** 2, "runs": RUNS, "below": below / RUNS, "above": above / RUNS}


rng = np.random.default_rng(20260302)
cases = [case(2, 2250, 250, rng), case(2, 250, 2250, rng), case(1.5, 450, 50, rng), case(0, 450, 50, rng),
         case(0, 4500, 500, rng), case(1.5, 9000, 1000, rng)]
print(json.dumps(cases, indent=1))
