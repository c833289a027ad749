#!/usr/bin/env python3
"""Reference values for `bendtest fit`, by dense NumPy/SciPy computations.

    make.py            writes the data sets (*.csv) and references.json beside itself
    make.py --check    computes them again and compares with what is there, to 1e-10

Every smoother matrix S is built densely from the definition of the family, by a
method that shares nothing with the program under test:

  smoothing spline   reproducing kernel of cubic splines with null space {1, x}
                     (Wahba 1990, Spline Models for Observational Data, section 1.3)
  regression spline  scipy.interpolate.BSpline design matrix, orthogonal projection
                     by SVD; natural: the null space of the end conditions
  polynomial         orthogonal projection on Legendre polynomials
  kernel, local      weighted least squares point by point, by QR

The tuning for a df is found by Brent's method on tr S.
"""
import csv
import json
import pathlib
import sys

import numpy as np
import scipy
from scipy.interpolate import BSpline
from scipy.optimize import brentq

HERE = pathlib.Path(__file__).resolve().parent


def data_sets():
    """Six designs that people have, and two orders of rows."""
    rng = np.random.default_rng(642)

    def readings(x):
        u = (x - x.min()) / (x.max() - x.min())
        return np.sin(5 * u) + u + 0.3 * rng.standard_normal(len(x))

    sets = {}
    x = np.sort(rng.uniform(0, 12, 60))
    sets["random"] = (x, readings(x))
    x = (np.arange(40) + 0.5) / 40
    sets["even"] = (x, readings(x))
    x = np.sort(np.round(rng.uniform(0, 1, 70) * 15) / 15)
    sets["ties"] = (x, readings(x))
    x = np.repeat(np.arange(22) / 7.0, 2)
    x[1::2] += 1e-9
    sets["near-ties"] = (x, readings(x))
    b = rng.uniform(0, 1, 60)
    x = np.sort(0.5 - 0.5 * np.cos(np.pi * b * b * (3 - 2 * b)))
    sets["crowded"] = (x, readings(x))
    x = 1e4 + np.sort(rng.uniform(0, 1, 50))
    sets["offset"] = (x, readings(x) + 1e3)
    x = rng.uniform(-1, 1, 45)
    sets["shuffled"] = (x, readings(x))
    return sets


def kernel_values(name, u):
    a = np.abs(u)
    inside = a < 1
    if name == "gaussian":
        return np.exp(-u * u / 2)
    if name == "epanechnikov":
        return np.where(inside, 1 - a**2, 0)
    if name == "biweight":
        return np.where(inside, (1 - a**2) ** 2, 0)
    return np.where(inside, (1 - a**3) ** 3, 0)


def widths(x, t, width, tuning):
    """h at each t: fixed, or the distance to the q-th nearest observation."""
    if width == "bandwidth":
        return np.full(len(t), tuning)
    q = tuning * len(x)
    d = np.sort(np.abs(x[None, :] - t[:, None]), axis=1)
    lo = int(np.floor(q))
    low = d[:, lo - 1]
    return low if lo >= len(x) else low + (q - lo) * (d[:, lo] - low)


def local_matrix(x, kernel, degree, width, tuning):
    h = widths(x, x, width, tuning)
    s = np.zeros((len(x), len(x)))
    for i, t in enumerate(x):
        u = (x - t) / h[i]
        w = kernel_values(kernel, u)
        root = np.sqrt(w)
        basis = np.vander(u, degree + 1, increasing=True) * root[:, None]
        q, r = np.linalg.qr(basis)
        first = np.linalg.solve(r.T, np.eye(degree + 1)[0])
        s[i] = (q @ first) * root
    return s


def spline_matrix(x, lam):
    """I - lam (M^-1 - M^-1 T (T'M^-1 T)^-1 T'M^-1), M = K + lam I."""
    span = x.max() - x.min()
    u = (x - x.min()) / span
    a, b = np.minimum.outer(u, u), np.maximum.outer(u, u)
    lam = lam / span**3
    m = a * a * (b - a / 3) / 2 + lam * np.eye(len(x))
    trend = np.column_stack([np.ones_like(u), u - 0.5])
    inv = np.linalg.inv(m)
    mt = inv @ trend
    return np.eye(len(x)) - lam * (inv - mt @ np.linalg.solve(trend.T @ mt, mt.T))


def projection(basis):
    u, sv, _ = np.linalg.svd(basis / np.linalg.norm(basis, axis=0), full_matrices=False)
    assert sv[-1] > 1e-8 * sv[0], "rank-deficient reference"
    return u @ u.T


def regression_matrix(x, df, degree, knots, natural):
    lo, hi = x.min(), x.max()
    k = int(df) - (2 if natural else degree + 1)
    p = np.arange(1, k + 1) / (k + 1)
    interior = np.quantile(x, p) if knots == "quantiles" else lo + p * (hi - lo)
    # Positions on [0, 1] keep the digits of x far from 0.
    u, inner = (x - lo) / (hi - lo), (interior - lo) / (hi - lo)
    t = np.concatenate([np.zeros(degree + 1), inner, np.ones(degree + 1)])
    basis = BSpline.design_matrix(u, t, degree).toarray()
    if natural:
        n = len(t) - degree - 1
        ends = np.array([BSpline(t, np.eye(n)[j], degree).derivative(2)([0.0, 1.0]) for j in range(n)]).T
        basis = basis @ scipy.linalg.null_space(ends)
    return projection(basis)


def polynomial_matrix(x, df):
    u = 2 * (x - x.min()) / (x.max() - x.min()) - 1
    return projection(np.polynomial.legendre.legvander(u, int(df) - 1))


def solve(make, df, lo, hi):
    """The log tuning at which tr S = df."""
    f = lambda theta: np.trace(make(np.exp(theta))) - df
    return float(np.exp(brentq(f, lo, hi, xtol=1e-14, rtol=1e-15, maxiter=500)))


def cases(name, x):
    """(family, options, df, tuning, S) of everything compared on one data set."""
    span = np.ptp(x)
    for df in (2.5, 4, 7.3, 12):
        top = np.log(span**3 * 1e4)
        tuning = solve(lambda l: spline_matrix(x, l), df, top - 30, top)
        yield "smoothing-spline", {}, df, tuning, spline_matrix(x, tuning)
    for df in (2, 5, 8):
        yield "polynomial", {}, df, df - 1, polynomial_matrix(x, df)
    for options, dfs in (
        ({}, (4, 6, 9)),
        ({"degree": 1}, (3, 6)),
        ({"natural": True}, (3, 5, 8)),
        ({"knots": "equispaced"}, (5, 7)),
        ({"knots": "equispaced", "natural": True}, (4,)),
    ):
        for df in dfs:
            degree, natural = options.get("degree", 3), options.get("natural", False)
            s = regression_matrix(x, df, degree, options.get("knots", "quantiles"), natural)
            yield "regression-spline", options, df, df - (2 if natural else degree + 1), s
    gap = np.max(np.diff(np.sort(x)))
    for kernel in ("gaussian", "epanechnikov", "biweight", "tricube"):
        # A compact window must reach over the largest gap.
        least = np.log(span * 2e-3) if kernel == "gaussian" else np.log(gap * 1.2)
        make = lambda h: local_matrix(x, kernel, 0, "bandwidth", h)
        for df in (3, 5.5):
            if df < np.trace(make(np.exp(least))):
                tuning = solve(make, df, least, np.log(span * 20))
                yield "kernel", {"kernel": kernel}, df, tuning, make(tuning)
    for kernel, degree, width in (
        ("tricube", 1, "neighbours"),
        ("tricube", 2, "neighbours"),
        ("epanechnikov", 1, "neighbours"),
        ("gaussian", 1, "bandwidth"),
        ("gaussian", 2, "bandwidth"),
        ("biweight", 1, "bandwidth"),
    ):
        make = lambda h: local_matrix(x, kernel, degree, width, h)
        if width == "neighbours":
            lo, hi = np.log(0.3), 0.0
        elif kernel == "gaussian":
            lo, hi = np.log(span * 0.02), np.log(span * 20)
        else:
            lo, hi = np.log(gap * 2.5), np.log(span * 20)
        for df in (3.6, 5):
            if np.trace(make(np.exp(hi))) < df < np.trace(make(np.exp(lo))):
                tuning = solve(make, df, lo, hi)
                yield "local", {"kernel": kernel, "degree": degree, "width": width}, df, tuning, make(tuning)


def reference(family, options, df, tuning, s, y):
    n, t = len(y), np.trace(s)
    level = y.mean()  # every family reproduces constants; this keeps digits
    fitted = level + s @ (y - level)
    r = y - fitted
    rss = r @ r
    loocv = np.mean((r / (1 - np.diag(s))) ** 2)
    return {
        "family": family,
        "options": options,
        "df": df,
        "tuning": tuning,
        "tr_s": t,
        "tr_sts": np.sum(s * s),
        "rss": rss,
        "gcv": rss / n / (1 - t / n) ** 2,
        "loocv": loocv,
        "aicc": np.log(rss / n) + 1 + 2 * (t + 1) / (n - t - 2),
        "fitted": list(fitted),
        "leverage": list(np.diag(s)),
    }


def everything():
    found = []
    for name, (x, y) in data_sets().items():
        for family, options, df, tuning, s in cases(name, x):
            found.append({"data": name + ".csv", **reference(family, options, df, tuning, s, y)})
    return found


def write():
    for name, (x, y) in data_sets().items():
        with open(HERE / (name + ".csv"), "w", newline="") as f:
            out = csv.writer(f, lineterminator="\n")
            out.writerow(["x", "y"])
            out.writerows([repr(float(a)), repr(float(b))] for a, b in zip(x, y))
    text = {
        "source": "dense computations from the definitions; see make.py",
        "versions": {"python": sys.version.split()[0], "numpy": np.__version__, "scipy": scipy.__version__},
        "cases": everything(),
    }
    with open(HERE / "references.json", "w") as f:
        json.dump(text, f, indent=0, default=float)
        f.write("\n")


def check():
    kept = json.load(open(HERE / "references.json"))["cases"]
    fresh = everything()
    assert len(kept) == len(fresh), (len(kept), len(fresh))
    worst = 0.0
    for a, b in zip(kept, fresh):
        for key in ("tr_s", "tr_sts", "rss", "gcv", "loocv", "aicc", "fitted", "leverage"):
            u, v = np.atleast_1d(a[key]), np.atleast_1d(b[key])
            worst = max(worst, float(np.max(np.abs(u - v) / np.maximum(1, np.abs(u)))))
    print(f"{len(kept)} cases, worst difference {worst:.2g}")
    if worst > 1e-10:
        sys.exit("references.json does not come from this script")


if __name__ == "__main__":
    check() if sys.argv[1:] == ["--check"] else write()
