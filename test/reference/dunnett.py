"""Dunnett's two-sided tail and critical values to 16 digits, for test/stats. Made with Python 3 and mpmath 1.3.0:
python3 test/reference/dunnett.py > test/reference/dunnett.json
Not the form under test: 1 - integral of phi(y) prod(Phi(b) - Phi(a)), with so many digits that the 1 takes none away.
"""
import json
from mpmath import mp, mpf, erf, erfinv, exp, log, pi, sqrt, quad, findroot, nstr, ceil


def tail(z, lambdas):
    z = mpf(z)
    mp.dps = int(30 + ceil(z * z / 2 / mpf(2.3))) + 10
    parts = [(mpf(l), sqrt(1 - mpf(l) ** 2)) for l in lambdas]
    Phi2 = lambda a, b: (erf(b / sqrt(mpf(2))) - erf(a / sqrt(mpf(2)))) / 2

    def inside(y):
        product = exp(-y * y / 2) / sqrt(2 * pi)
        for l, s in parts:
            product *= Phi2((-z - l * y) / s, (z - l * y) / s)
        return product

    end = sqrt(z * z + 2 * mpf(mp.dps) * mpf(2.4))
    points = [mpf(0), end]
    for l, s in parts:
        for width in (-12, -4, 0, 4, 12):
            points += [l * z + width * s] + ([(z + width * s) / l] if l > 0 else [])
    points = sorted({p for p in points if 0 <= p <= end})
    fine = [points[0]]
    for p in points[1:]:
        while p - fine[-1] > 1:
            fine.append(fine[-1] + 1)
        fine.append(p)
    return 1 - 2 * quad(inside, fine, method="gauss-legendre", maxdegree=5 + mp.dps // 120)


def text(value):
    return nstr(value, 16, strip_zeros=False)


half = 0.7071067811865476
tails = [[z, lambdas, text(tail(z, lambdas))] for z, lambdas in [
    (0.01, [half, half]), (1.0, [half, half, half]), (2.21, [half, half]), (5.0, [half] * 5), (8.3, [half, half]),
    (2.5, [0.1, 0.5, 0.9]), (6.0, [0.1, 0.5, 0.9, 0.99]), (3.0, [0.999, 0.9999]), (12.0, [0.999, 0.3]),
    (3.0, [0.9999999999, 0.99999999]), (10.0, [0.9999999, 0.99999]),
    (20.0, [half, half]), (20.0, [0.95, 0.2, 0.6]), (37.0, [half, half]), (37.0, [0.3, 0.99])]]
mp.dps = 40
critical = []
for alpha, lambdas in [(0.05, [half] * k) for k in (2, 3, 4, 5, 6, 7, 8, 9)] + [(0.01, [half] * k) for k in (2, 3, 5, 9)] + [
        (0.05, [0.3, 0.8]), (0.05, [0.9, 0.9, 0.2]), (0.001, [0.6, 0.7, 0.8]), (1e-6, [half, half]), (0.5, [half, 0.4])]:
    start = sqrt(2) * erfinv(1 - mpf(alpha) / len(lambdas))  # Bonferroni's
    f = lambda z: log(tail(z, lambdas) / mpf(alpha))
    critical.append([alpha, lambdas, text(findroot(f, (start, start - mpf("0.01")), solver="secant", tol=1e-40))])

lines = lambda rows: "[\n" + ",\n".join(json.dumps(row) for row in rows) + "\n]"
print('{\n"tails": ' + lines(tails) + ',\n"critical": ' + lines(critical) + "\n}")
