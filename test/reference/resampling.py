"""Reference values for resampling over buckets. Made with Python 3 and numpy 2.4.6:
python3 test/reference/resampling.py > test/reference/resampling.json
bootstrap: quantiles of T over 2,000,000 draws of buckets with replacement, with their Monte Carlo standard error. Statistics
are written from their definitions on raw units, one matrix of counts times units, not from sums about a centre.
randomisation: the exact p over all deals of half of the buckets to the variant.
"""
import itertools
import json
import numpy as np

rng = np.random.default_rng(20260302)
DRAWS = 2_000_000


def units(n, shape):
    """Units of both arms over 60 buckets: bucket, 1 of the variant, y, x."""
    x = rng.poisson(3, n) + 1.0
    y = np.round(rng.exponential(1, n) * x ** shape, 3)
    return [[int(b), int(v), float(yy), float(xx)]
            for b, v, yy, xx in zip(rng.integers(0, 60, n), rng.random(n) < 0.3, y, x)]


def moments(counts, y, x):
    n = counts.sum(1)
    return n, counts @ y, counts @ x, counts @ (y * y), counts @ (y * x), counts @ (x * x)


def estimate(kind, counts, variant, y, x):
    """Difference and its variance for rows of counts of each unit."""
    c, t = moments(counts[:, ~variant], y[~variant], x[~variant]), moments(counts[:, variant], y[variant], x[variant])
    var = lambda n, s, q: (q - s * s / n) / (n - 1)
    cov = lambda n, s, r, q: (q - s * r / n) / (n - 1)
    if kind == "mean":
        level = lambda m: (m[1] / m[0], var(m[0], m[1], m[3]) / m[0])
    elif kind == "ratio":
        level = lambda m: (m[1] / m[2], (m[3] - 2 * m[1] / m[2] * m[4] + (m[1] / m[2]) ** 2 * m[5])
                           / (m[0] - 1) / m[0] / (m[2] / m[0]) ** 2)
    else:
        theta = ((cov(c[0], c[1], c[2], c[4]) / c[0] + cov(t[0], t[1], t[2], t[4]) / t[0])
                 / (var(c[0], c[2], c[5]) / c[0] + var(t[0], t[2], t[5]) / t[0]))
        level = lambda m: ((m[1] - theta * m[2]) / m[0],
                           var(m[0], m[1] - theta * m[2], m[3] - 2 * theta * m[4] + theta ** 2 * m[5]) / m[0])
    (lc, vc), (lt, vt) = level(c), level(t)
    return lt - lc, vt + vc


def bootstrap(kind, rows):
    bucket = np.array([r[0] for r in rows])
    variant = np.array([r[1] for r in rows]) == 1
    y, x = np.array([r[2] for r in rows]), np.array([r[3] for r in rows])
    one = np.ones((1, len(rows)))
    d, v = estimate(kind, one, variant, y, x)
    held = np.unique(bucket)
    place = np.searchsorted(held, bucket)
    ts = []
    for _ in range(DRAWS // 50_000):
        drawn = rng.multinomial(len(held), np.full(len(held), 1 / len(held)), size=50_000)
        dd, vv = estimate(kind, drawn[:, place].astype(float), variant, y, x)
        ts.append((dd - d) / np.sqrt(vv))
    t = np.sort(np.concatenate(ts))
    quantiles = {q: float(t[int(q * len(t))]) for q in (0.025, 0.975)}
    return {"kind": kind, "units": rows, "estimate": float(d[0]), "standardError": float(v[0] ** 0.5),
            "low": quantiles[0.025], "high": quantiles[0.975]}


def randomisation():
    buckets = [[(round(float(rng.exponential()), 2), round(float(rng.exponential() * 2.4), 2))] for _ in range(22)]
    pooled = np.array([[2, c + t, c * c + t * t] for [(c, t)] in buckets])
    arms = np.array([[1, c, c * c] for [(c, t)] in buckets]).sum(0), np.array([[1, t, t * t] for [(c, t)] in buckets]).sum(0)

    def stat(c, t):
        v = lambda s: (s[..., 2] - s[..., 1] ** 2 / s[..., 0]) / (s[..., 0] - 1) / s[..., 0]
        return (t[..., 1] / t[..., 0] - c[..., 1] / c[..., 0]) / np.sqrt(v(c) + v(t))

    observed = abs(stat(*arms))
    deals = np.array(list(itertools.combinations(range(22), 11)))
    t = pooled[deals].sum(1)
    reached = np.abs(stat(pooled.sum(0) - t, t)) >= observed * (1 - 1e-9)
    return {"control": [c for [(c, t)] in buckets], "variant": [t for [(c, t)] in buckets], "p": float(reached.mean())}


print(json.dumps({"bootstrap": [bootstrap("mean", units(240, 0)), bootstrap("ratio", units(300, 1.5)),
                                bootstrap("adjusted", units(300, 1))], "randomisation": randomisation()}))
