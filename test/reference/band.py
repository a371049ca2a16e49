"""The time-uniform band's critical values to 15 digits, for test/stats/band.test.ts. Made with Python 3 and mpmath 1.3.0:
python3 test/reference/band.py > test/reference/band.json
Not by the closed form: the band's end is where the mixture of likelihood ratios over a normal prior of the drift, an integral,
reaches 1 / alpha (Robbins 1970, Annals of Mathematical Statistics 41, 1397-1409; Ville's inequality), found as a root.
"""
import json
from mpmath import exp, findroot, inf, log, mp, mpf, nstr, pi, quad, sqrt

mp.dps = 30


def critical(n, alpha, planned):
    alpha = mpf(alpha)
    last = -2 * log(alpha)
    rho2 = (last + log(last) + 1) / mpf(planned)
    n = mpf(n)

    def mixture(s):
        # the integrand is a normal curve about s / (n + 1 / rho2)
        centre, sd = s / (n + 1 / rho2), 1 / sqrt(n + 1 / rho2)
        points = [centre + k * sd for k in (-12, -6, -3, -1, 0, 1, 3, 6, 12)]
        return quad(lambda drift: exp(drift * s - drift ** 2 * n / 2 - drift ** 2 / (2 * rho2)) / sqrt(2 * pi * rho2), points)

    s = findroot(lambda s: log(mixture(s)) - log(1 / alpha), 3 * sqrt(n))
    return s / sqrt(n)


cases = [(400, "0.05", 40000), (2472, "0.05", 40000), (40000, "0.05", 40000), (400000, "0.05", 40000), (1000, "0.01", 1000), (50, "0.1", 12345), (7, "0.2", 3)]
print(json.dumps([{"units": n, "alpha": float(a), "planned": p, "critical": nstr(critical(n, a, p), 15)} for n, a, p in cases], indent=1))
