#!/usr/bin/env python3
"""Reference values for `bendtest fit`, by dense NumPy/SciPy computations.

    make.py            writes the data sets (*.csv) and references.json beside itself
    make.py --check    computes them again and compares with what is there, to 1e-9

Every smoother matrix S is built densely from the definition of the family, by a
method that shares nothing with the program under test:

  smoothing spline   reproducing kernel of cubic splines with null space {1, x}
                     (Wahba 1990, Spline Models for Observational Data, section 1.3)
  regression spline  scipy.interpolate.BSpline, orthogonal projection by SVD; natural:
                     the null space of the end conditions, lines beyond
  penalised spline   the same basis on equal segments, [B; sqrt(lam) D] by SVD
  polynomial         orthogonal projection on Legendre polynomials
  kernel, local      weighted least squares point by point, by QR

The tuning for a df is found by Brent's method on tr S. One set is larger: 400
observations with ties and near ties, and up to 200 df. There the reproducing-kernel
matrix is too ill-conditioned for double precision: it is inverted in extended precision,
and predictions of the cubic spline, which lose more digits, are worked out with 200 bits.
"""
import csv
import json
import pathlib
import sys

import gmpy2
import numpy as np
import scipy
from scipy.interpolate import BSpline
from scipy.optimize import brentq

gmpy2.get_context().precision = 200
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


def large_set():
    """400 observations: 250 places, 75 of them read twice, 75 more a hair beside."""
    rng = np.random.default_rng(400)
    x = np.sort(rng.uniform(0, 1, 250))
    again = rng.choice(250, 150, replace=False)
    x = np.sort(np.concatenate([x, x[again[:75]], x[again[75:]] + 1e-9]))
    return x, np.sin(9 * x) + x + 0.3 * rng.standard_normal(len(x))


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


def local_rows(x, t, kernel, degree, width, tuning):
    """Rows of S at the points t; a row of NaN where the window holds too few x."""
    h = widths(x, t, width, tuning)
    s = np.full((len(t), len(x)), np.nan)
    for i, at in enumerate(t):
        u = (x - at) / h[i]
        w = kernel_values(kernel, u)
        if len(np.unique(x[w > 0])) < degree + 1:
            continue
        root = np.sqrt(w / w.max())
        basis = np.vander(u, degree + 1, increasing=True) * root[:, None]
        q, r = np.linalg.qr(basis)
        first = np.linalg.solve(r.T, np.eye(degree + 1)[0])
        s[i] = (q @ first) * root
    return s


def spline_rows(x, t, lam, order=2):
    """g(t) = T(t) d + k(t) c with M c = y - T d and T' c = 0, M = K + lam I."""
    lo, span = x.min(), np.ptp(x)
    u, v = (x - lo) / span, (t - lo) / span

    def kernel(p, q):
        a, b = np.minimum.outer(p, q), np.maximum.outer(p, q)
        k = a * a * (b - a / 3) / 2 if order == 2 else a
        return np.where(a > 0, k, 0)  # nothing below the lowest x

    def trend(p):
        return np.column_stack([np.ones_like(p), p - 0.5][:order])

    m = kernel(u, u) + lam / span ** (2 * order - 1) * np.eye(len(x))
    if order == 1:
        v = np.minimum(v, 1)  # level beyond the highest x
    inv = np.linalg.inv(m)
    mt = inv @ trend(u)
    d = np.linalg.solve(trend(u).T @ mt, mt.T)
    c = inv - mt @ d
    return trend(v) @ d + kernel(v, u) @ c


def spline_matrix(x, lam, order=2):
    """S = I - lam C, which keeps the digits that K C loses near interpolation."""
    span = np.ptp(x)
    lo = x.min()
    u = (x - lo) / span
    a, b = np.minimum.outer(u, u), np.maximum.outer(u, u)
    k = a * a * (b - a / 3) / 2 if order == 2 else a
    l = lam / span ** (2 * order - 1)
    inv = np.linalg.inv(k + l * np.eye(len(x)))
    trend = np.column_stack([np.ones_like(u), u - 0.5][:order])
    mt = inv @ trend
    return np.eye(len(x)) - l * (inv - mt @ np.linalg.solve(trend.T @ mt, mt.T))


def inverse(m):
    """Inverse of a positive definite matrix by Gauss-Jordan steps in m's own precision."""
    a = m.copy()
    for k in range(len(a)):
        pivot = 1 / a[k, k]
        assert pivot > 0
        row = a[k] * pivot
        column = a[:, k].copy()
        a -= np.outer(column, row)
        a[:, k] = -column * pivot
        a[k] = row
        a[k, k] = pivot
    return a


class LargeSpline:
    """The smoothing spline as in spline_matrix and spline_rows, in extended precision."""

    def __init__(self, x, order):
        x = x.astype(np.longdouble)
        self.order, self.lo, self.span = order, x.min(), np.ptp(x)
        self.u = (x - self.lo) / self.span
        self.k = self.kernel(self.u, self.u)

    def kernel(self, p, q):
        a, b = np.minimum.outer(p, q), np.maximum.outer(p, q)
        k = a * a * (b - a / 3) / 2 if self.order == 2 else a
        return np.where(a > 0, k, 0)

    def trend(self, p):
        return np.column_stack([np.ones_like(p), p - np.longdouble(0.5)][: self.order])

    def parts(self, lam):
        l = lam / self.span ** (2 * self.order - 1)
        inv = inverse(self.k + l * np.eye(len(self.u), dtype=np.longdouble))
        mt = inv @ self.trend(self.u)
        d = inverse(self.trend(self.u).T @ mt) @ mt.T
        return l, inv - mt @ d, d

    def matrix(self, lam):
        l, c, _ = self.parts(lam)
        return np.eye(len(self.u)) - l * c

    def rows(self, at, lam):
        """Rows of S at new points, where lam is small by elimination with 200 bits."""
        if self.order == 2 and lam < 1e-5 * self.span**3:
            return self.long_rows(at, lam)
        _, c, d = self.parts(lam)
        v = (at.astype(np.longdouble) - self.lo) / self.span
        if self.order == 1:
            v = np.minimum(v, 1)
        return self.trend(v) @ d + self.kernel(v, self.u) @ c

    def long_rows(self, at, lam):
        long = lambda v: np.vectorize(lambda e: gmpy2.mpfr(float(e)), otypes=[object])(v)
        n, lo, span = len(self.u), gmpy2.mpfr(float(self.lo)), gmpy2.mpfr(float(self.span))
        u, v = (long(self.u * self.span + self.lo) - lo) / span, (long(at) - lo) / span

        def kernel(p, q):
            a, b = np.minimum.outer(p, q), np.maximum.outer(p, q)
            return np.where(a > 0, a * a * (3 * b - a) / 6, gmpy2.mpfr(0))

        trend = lambda p: np.column_stack([p * 0 + 1, p - 0.5])
        # lam as a sum of two doubles has the digits of extended precision.
        head = float(lam)
        lam = gmpy2.mpfr(head) + gmpy2.mpfr(float(lam - np.longdouble(head)))
        right = np.hstack([kernel(u, v), trend(u)])
        a = np.hstack([kernel(u, u) + lam / span**3 * long(np.eye(n)), right])
        for k in range(n):  # forward elimination, then backward
            a[k + 1 :, k:] -= np.outer(a[k + 1 :, k] / a[k, k], a[k, k:])
        for k in reversed(range(n)):
            a[k, n:] /= a[k, k]
            a[:k, n:] -= np.outer(a[:k, k], a[k, n:])
        solved = a[:, n:]  # M^-1 [k(u, v), T(u)]
        mt, mk = solved[:, len(v) :], solved[:, : len(v)]
        g = trend(u).T @ mt
        det = g[0, 0] * g[1, 1] - g[0, 1] * g[1, 0]
        g = np.array([[g[1, 1], -g[0, 1]], [-g[1, 0], g[0, 0]]]) / det
        rest = trend(v) - mk.T @ trend(u)
        return (mk.T + rest @ (g @ mt.T)).astype(float)

    def solve(self, df):
        """The lambda at which tr S = df, by secant steps in log lambda."""
        f = lambda theta: np.trace(self.matrix(np.exp(theta))) - df
        # As a start the eigenvalues in double precision, good enough for most digits.
        q, _ = np.linalg.qr(self.trend(self.u).astype(float), mode="complete")
        z = q[:, self.order :]
        g = np.linalg.eigvalsh(z.T @ self.k.astype(float) @ z).clip(0)
        start = brentq(lambda t: self.order + np.sum(g / (g + np.exp(t))) - df, -40, 10)
        shift = (2 * self.order - 1) * np.log(self.span)
        a = np.longdouble(start) + shift
        b = a + np.longdouble(1e-4)
        fa, fb = f(a), f(b)
        for _ in range(12):
            if abs(fb) < 1e-11 * df:  # near the rounding of the trace at 200 df
                break
            a, b, fa = b, b - fb * (b - a) / (fb - fa), fb
            fb = f(b)
        assert abs(fb) < 1e-11 * df, (df, fb)
        return np.exp(b)


def projection_rows(basis, at):
    """Rows at new points of the projection on the columns of basis."""
    scale = np.linalg.norm(basis, axis=0)
    u, sv, vt = np.linalg.svd(basis / scale, full_matrices=False)
    assert sv[-1] > 1e-8 * sv[0], "rank-deficient reference"
    return (at / scale) @ (vt.T / sv) @ u.T


def bspline_basis(t, degree):
    """Values at any points: the end pieces go on beyond the ends."""
    n = len(t) - degree - 1
    return lambda u: np.array([BSpline(t, np.eye(n)[j], degree)(u) for j in range(n)]).T


def regression_rows(x, at, df, degree, knots, natural):
    lo, hi = x.min(), x.max()
    k = int(df) - (2 if natural else degree + 1)
    p = np.arange(1, k + 1) / (k + 1)
    interior = np.quantile(x, p) if knots == "quantiles" else lo + p * (hi - lo)
    # Positions on [0, 1] keep the digits of x far from 0.
    u, v, inner = (x - lo) / (hi - lo), (at - lo) / (hi - lo), (interior - lo) / (hi - lo)
    t = np.concatenate([np.zeros(degree + 1), inner, np.ones(degree + 1)])
    basis = bspline_basis(t, degree)
    if not natural:
        return projection_rows(basis(u), basis(v))
    n = len(t) - degree - 1
    ends = np.array([BSpline(t, np.eye(n)[j], degree).derivative(2)([0.0, 1.0]) for j in range(n)]).T
    slope = np.array([BSpline(t, np.eye(n)[j], degree).derivative()(np.clip(v, 0, 1)) for j in range(n)]).T
    null = scipy.linalg.null_space(ends)
    inside = np.clip(v, 0, 1)
    rows = basis(inside) + (v - inside)[:, None] * slope  # a line beyond
    return projection_rows(basis(u) @ null, rows @ null)


def polynomial_rows(x, at, df):
    scale = lambda v: 2 * (v - x.min()) / np.ptp(x) - 1
    basis = lambda v: np.polynomial.legendre.legvander(scale(v), int(df) - 1)
    return projection_rows(basis(x), basis(at))


def penalised_rows(x, at, lam, segments=20):
    """Least squares on [B; sqrt(lam) D], by SVD."""
    lo, span = x.min(), np.ptp(x)
    t = np.arange(-3, segments + 4) / segments
    basis = bspline_basis(t, 3)
    b = basis((x - lo) / span)
    d = np.diff(np.eye(segments + 3), 2, axis=0)
    inv = np.linalg.pinv(np.vstack([b, np.sqrt(lam) * d]), rcond=1e-15)[:, : len(x)]
    return basis((at - lo) / span) @ inv


def solve(make, df, lo, hi):
    """The log tuning at which tr S = df."""
    f = lambda theta: np.trace(make(np.exp(theta))) - df
    return float(np.exp(brentq(f, lo, hi, xtol=1e-14, rtol=1e-15, maxiter=500)))


def points(x):
    """Where to predict: within the data and a little beyond."""
    share = np.array([-0.03, -0.01, 0.013, 0.25, 0.5001, 0.77, 0.99, 1.005, 1.02])
    return x.min() + np.ptp(x) * share


def cases(x):
    """(family, options, df, tuning, S, rows of S at points(x))."""
    span, at = np.ptp(x), points(x)
    for order, dfs in ((2, (2.5, 4, 7.3, 12)), (1, (3, 6.5))):
        make = lambda l: spline_matrix(x, l, order)
        top = np.log(span ** (2 * order - 1) * 1e4)
        for df in dfs:
            tuning = solve(make, df, top - 30, top)
            options = {} if order == 2 else {"order": 1}
            yield "smoothing-spline", options, df, tuning, make(tuning), spline_rows(x, at, tuning, order)
    for df in (4, 8.5, 13):
        tuning = solve(lambda l: penalised_rows(x, x, l), df, np.log(1e-7), np.log(1e7))
        yield "penalised-spline", {}, df, tuning, penalised_rows(x, x, tuning), penalised_rows(x, at, tuning)
    for df in (2, 5, 8):
        yield "polynomial", {}, df, df - 1, polynomial_rows(x, x, df), polynomial_rows(x, at, df)
    for options, dfs in (
        ({}, (4, 6, 9)),
        ({"degree": 1}, (3, 6)),
        ({"natural": True}, (3, 5, 8)),
        ({"knots": "equispaced"}, (5, 7)),
        ({"knots": "equispaced", "natural": True}, (4,)),
    ):
        for df in dfs:
            degree, natural = options.get("degree", 3), options.get("natural", False)
            make = lambda t: regression_rows(x, t, df, degree, options.get("knots", "quantiles"), natural)
            yield "regression-spline", options, df, df - (2 if natural else degree + 1), make(x), make(at)
    gap = np.max(np.diff(np.sort(x)))
    for kernel in ("gaussian", "epanechnikov", "biweight", "tricube"):
        # A compact window must reach over the largest gap.
        least = np.log(span * 2e-3) if kernel == "gaussian" else np.log(gap * 1.2)
        make = lambda h, t=x: local_rows(x, t, kernel, 0, "bandwidth", h)
        for df in (3, 5.5):
            if df < np.trace(make(np.exp(least))):
                tuning = solve(make, df, least, np.log(span * 20))
                yield "kernel", {"kernel": kernel}, df, tuning, make(tuning), make(tuning, at)
    for kernel, degree, width in (
        ("tricube", 1, "neighbours"),
        ("tricube", 2, "neighbours"),
        ("epanechnikov", 1, "neighbours"),
        ("gaussian", 1, "bandwidth"),
        ("gaussian", 2, "bandwidth"),
        ("biweight", 1, "bandwidth"),
    ):
        make = lambda h, t=x: local_rows(x, t, kernel, degree, width, h)
        if width == "neighbours":
            lo, hi = np.log(0.3), 0.0
        elif kernel == "gaussian":
            lo, hi = np.log(span * 0.02), np.log(span * 20)
        else:
            lo, hi = np.log(gap * 2.5), np.log(span * 20)
        for df in (3.6, 5):
            if np.trace(make(np.exp(hi))) < df < np.trace(make(np.exp(lo))):
                tuning = solve(make, df, lo, hi)
                options = {"kernel": kernel, "degree": degree, "width": width}
                yield "local", options, df, tuning, make(tuning), make(tuning, at)


def large_cases(x):
    """The same for the larger set, from 2.5 df to half the observations."""
    at = points(x)
    for order in (2, 1):
        spline = LargeSpline(x, order)
        for df in (2.5, 14.2, 60, 120, 200):
            tuning = spline.solve(df)
            options = {} if order == 2 else {"order": 1}
            yield "smoothing-spline", options, df, tuning, spline.matrix(tuning), spline.rows(at, tuning)
    for segments, dfs in ((20, (2.5, 9, 20)), (150, (14.2, 60, 120))):
        make = lambda l, t=x: penalised_rows(x, t, l, segments)
        for df in dfs:
            tuning = solve(make, df, np.log(1e-7), np.log(1e7) + 5 * np.log(segments / 20))
            options = {} if segments == 20 else {"segments": segments}
            yield "penalised-spline", options, df, tuning, make(tuning), make(tuning, at)
    for df in (3, 12, 30):
        yield "polynomial", {}, df, df - 1, polynomial_rows(x, x, df), polynomial_rows(x, at, df)
    for options, dfs in (
        ({}, (5, 14, 60, 100)),
        ({"degree": 1}, (4, 60, 120)),
        ({"degree": 2}, (14, 60)),
        ({"natural": True}, (4, 14, 60)),
        ({"knots": "equispaced"}, (14, 60)),
        ({"knots": "equispaced", "natural": True}, (30,)),
    ):
        for df in dfs:
            degree, natural = options.get("degree", 3), options.get("natural", False)
            make = lambda t: regression_rows(x, t, df, degree, options.get("knots", "quantiles"), natural)
            yield "regression-spline", options, df, df - (2 if natural else degree + 1), make(x), make(at)
    gap = np.max(np.diff(x))
    for kernel in ("gaussian", "epanechnikov", "biweight", "tricube"):
        make = lambda h, t=x: local_rows(x, t, kernel, 0, "bandwidth", h)
        least = np.log(1e-6 if kernel == "gaussian" else gap * 0.51)
        for df in (2.5, 14.2, 60, 200):
            if df < np.trace(make(np.exp(least))):
                tuning = solve(make, df, least, np.log(50))
                yield "kernel", {"kernel": kernel}, df, tuning, make(tuning), make(tuning, at)
    for kernel, degree, width, dfs in (
        ("tricube", 1, "neighbours", (2.6, 14.2, 60)),
        ("epanechnikov", 2, "neighbours", (5, 14.2, 40)),
        ("gaussian", 1, "bandwidth", (2.5, 14.2, 60)),
        ("gaussian", 2, "bandwidth", (3.5, 14.2, 40)),
        ("biweight", 1, "bandwidth", (2.5, 14.2)),
    ):
        make = lambda h, t=x: local_rows(x, t, kernel, degree, width, h)
        if width == "neighbours":
            lo, hi = np.log(0.02), 0.0
        else:
            lo, hi = np.log(3e-3 if kernel == "gaussian" else gap * 1.6), np.log(50)
        for df in dfs:
            if np.trace(make(np.exp(hi))) < df < np.trace(make(np.exp(lo))):
                tuning = solve(make, df, lo, hi)
                options = {"kernel": kernel, "degree": degree, "width": width}
                yield "local", options, df, tuning, make(tuning), make(tuning, at)


def reference(family, options, df, tuning, s, rows, x, y):
    n, t = len(y), np.trace(s)
    level = y.mean()  # every family reproduces constants; this keeps digits
    fitted = level + s @ (y - level)
    r = y - fitted
    rss = r @ r
    alone = 1 - np.diag(s) < 1e-9  # an observation that its fit passes through
    loocv = None if alone.any() else np.mean((r / (1 - np.diag(s))) ** 2)
    return {
        "family": family,
        "options": options,
        "df": df,
        "tuning": tuning,
        "tr_s": t,
        "tr_sts": np.sum(s * s),
        "df_residual": np.sum((np.eye(n) - s) ** 2),
        "rss": rss,
        "gcv": rss / n / (1 - t / n) ** 2,
        "loocv": loocv,
        "aicc": np.log(rss / n) + 1 + 2 * (t + 1) / (n - t - 2),
        "fitted": list(fitted),
        "leverage": list(np.diag(s)),
        "at": list(points(x)),
        "predicted": [None if np.isnan(v) else v for v in level + rows @ (y - level)],
    }


def everything():
    found = []
    for name, (x, y) in data_sets().items():
        for case in cases(x):
            found.append({"data": name + ".csv", **reference(*case, x, y)})
    x, y = large_set()
    for case in large_cases(x):
        found.append({"data": "large.csv", **reference(*case, x, y)})
    return found


def write():
    for name, (x, y) in {**data_sets(), "large": large_set()}.items():
        with open(HERE / (name + ".csv"), "w", newline="") as f:
            out = csv.writer(f, lineterminator="\n")
            out.writerow(["x", "y"])
            out.writerows([repr(float(a)), repr(float(b))] for a, b in zip(x, y))
    versions = {"python": sys.version.split()[0], "numpy": np.__version__, "scipy": scipy.__version__}
    with open(HERE / "references.json", "w") as f:  # a case per line
        f.write('{"source": "dense computations from the definitions; see make.py",\n')
        f.write('"versions": ' + json.dumps(versions) + ',\n"cases": [\n')
        f.write(",\n".join(json.dumps(case, default=float) for case in everything()))
        f.write("\n]}\n")


def check():
    kept = json.load(open(HERE / "references.json"))["cases"]
    fresh = everything()
    assert len(kept) == len(fresh), (len(kept), len(fresh))
    worst = 0.0
    for a, b in zip(kept, fresh):
        for key in ("tr_s", "tr_sts", "df_residual", "rss", "gcv", "loocv", "aicc", "fitted", "leverage", "predicted"):
            u, v = (np.nan_to_num(np.atleast_1d(c[key]).astype(float)) for c in (a, b))
            worst = max(worst, float(np.max(np.abs(u - v) / np.maximum(1, np.abs(u)))))
    print(f"{len(kept)} cases, worst difference {worst:.2g}")
    if worst > 1e-9:
        sys.exit("references.json does not come from this script")


if __name__ == "__main__":
    check() if sys.argv[1:] == ["--check"] else write()
