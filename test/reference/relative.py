"""Ends of relative intervals where the plain formulas lose digits, for test/stats. Made with Python 3 and mpmath 1.3.0:
python3 test/reference/relative.py > test/reference/relative.json
Fieller: the roots of (t - r c)^2 = wt^2 + r^2 wc^2, wt and wc the half-widths of the arms' own intervals, minus 1.
MOVER: the same with Wilson's limits; both from the textbook quadratic at 60 digits.
"""
import json
from mpmath import mp, mpf, sqrt, nstr

mp.dps = 60


def roots(c, t, wc, wt):
    a, b, k = c * c - wc * wc, -2 * c * t, t * t - wt * wt
    d = sqrt(b * b - 4 * a * k)
    return sorted([(-b - d) / (2 * a), (-b + d) / (2 * a)])


def wilson(k, n, z):
    p, s = k / n, sqrt(z * z + 4 * k * (n - k) / n)
    return (2 * k + z * z - z * s) / (2 * (n + z * z)), (2 * k + z * z + z * s) / (2 * (n + z * z))


def fieller(control, variant, half_control, half_variant):
    c, t, wc, wt = (mpf(x) for x in (control, variant, half_control, half_variant))
    low, high = roots(c, t, wc, wt)
    return {"control": control, "variant": variant, "halfControl": half_control, "halfVariant": half_variant,
            "low": nstr(low - 1, 20), "high": nstr(high - 1, 20)}


def mover(control, variant, z):
    (kc, nc), (kt, nt) = [[mpf(x) for x in arm] for arm in (control, variant)]
    zz = mpf(z)
    c, t = kc / nc, kt / nt
    (lc, uc), (lt, ut) = wilson(kc, nc, zz), wilson(kt, nt, zz)
    # Of the two roots the lower end is the smaller one that is not negative: a negative one comes with u_c > 2 p_c.
    low = min(r for r in roots(c, t, uc - c, t - lt) if r >= 0)
    high = max(roots(c, t, c - lc, ut - t))
    return {"control": control, "variant": variant, "z": z, "low": nstr(low - 1, 20), "high": nstr(high - 1, 20)}


# Half-widths 3, 4, 5: the difference's interval ends a billionth from 0, on either side.
found = {
    "fieller": [fieller(1000.0, 1005.000000001, 4.0, 3.0), fieller(1000.0, 1004.999999999, 4.0, 3.0),
                fieller(1000.0, 994.999999999, 4.0, 3.0), fieller(1000.0, 995.000000001, 4.0, 3.0),
                fieller(4.000001, 12.0, 4.0, 3.0), fieller(4.000001, -12.0, 4.0, 3.0), fieller(1e-6, 1e6, 0.0, 1.0)],
    "mover": [mover([1, 1000], [7, 900], 8.0), mover([1, 1000000], [3, 40], 30.0), mover([2, 50], [1, 100000], 30.0),
              mover([5, 10000000], [5, 10000000], 1.5), mover([3, 1000], [998, 1000], 5.0)],
}
lines = lambda rows: "[\n" + ",\n".join(json.dumps(row) for row in rows) + "\n]"
print("{\n" + ",\n".join(f'"{name}": {lines(rows)}' for name, rows in found.items()) + "\n}")
