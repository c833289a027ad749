#!/usr/bin/env python3
"""REML and ML of splines from their mixed-model form, and the lambda of least each.

    make.py            writes references.json beside itself
    make.py --check    computes it again and compares with what is there, to 1e-9

y = X b + Z u + e, X = [1, x], var e = s2 I, var u = (s2 / lambda) I, so V = I + ZZ'/lambda.
Smoothing spline: ZZ' is the kernel of the integrated Wiener process (Wahba 1985, Ann.
Stat. 13:1378). Penalised spline (Eilers & Marx 1996, Stat. Sci. 11:89): Z = B D'(DD')^-1.

The constants. With P = V^-1 - V^-1 X (X'V^-1 X)^-1 X'V^-1, which is I - S, and Q an
orthonormal basis of what is orthogonal to X, P = Q (Q'VQ)^-1 Q' and
det Q'VQ = det V det X'V^-1 X / det X'X. So -log det+ (I - S) is exactly
log det V + log det X'V^-1 X - log det X'X. ML takes log det V alone, with Z replaced by
its part orthogonal to X: there det V = det Q'VQ, and no constant is left.

All in extended precision. Minima are roots of the derivative by theta = log lambda,
m y'P(V - I)P y / y'P y - (tr S - 2), m = n - 2 or n.

A general library fits the same model beside it: statsmodels MixedLM, one group, u as one
variance component, lambda = residual variance / that component. Its optimiser stops
where a gradient by its own account is below 1e-8, at most 2.6e-6 from the root of the
derivative at the time of writing; 1e-5 is asked for.
"""
import json
import pathlib
import sys
import warnings

import numpy as np
from scipy.interpolate import BSpline
from scipy.optimize import brentq
from statsmodels.regression.mixed_linear_model import MixedLM, VCSpec

HERE = pathlib.Path(__file__).resolve().parent
LONG = np.longdouble


def cholesky(a):
    a = a.copy()
    for k in range(len(a)):
        a[k, k] = np.sqrt(a[k, k])
        a[k + 1 :, k] /= a[k, k]
        a[k + 1 :, k + 1 :] -= np.outer(a[k + 1 :, k], a[k + 1 :, k])
    return np.tril(a)


def forward(l, b):
    b = b.copy()
    for k in range(len(l)):
        b[k] = (b[k] - l[k, :k] @ b[:k]) / l[k, k]
    return b


def solve(a, b):
    l = cholesky(a)
    return forward(l[::-1, ::-1].T, forward(l, b)[::-1])[::-1]


def log_det(a):
    return 2 * np.sum(np.log(np.diag(cholesky(a))))


class Model:
    def __init__(self, family, x, y):
        x = x.astype(LONG)
        self.n, self.y = len(x), y.astype(LONG) - LONG(y.mean())
        self.span = np.ptp(x)
        u = (x - x.min()) / self.span
        self.x = np.column_stack([np.ones_like(u), u - u.mean()])  # same space, more digits
        if family == "smoothing-spline":
            a, b = np.minimum.outer(u, u), np.maximum.outer(u, u)
            self.k, self.unit = a * a * (b - a / 3) / 2, self.span**3
        else:
            b = BSpline(np.arange(-3, 24) / 20, np.eye(23), 3)(u.astype(float)).astype(LONG)
            d = np.diff(np.eye(23, dtype=LONG), 2, axis=0)
            z = b @ solve(d @ d.T, d).T
            self.k, self.unit = z @ z.T, LONG(1)
        h = self.x @ solve(self.x.T @ self.x, self.x.T)
        rest = np.eye(self.n) - h
        self.orthogonal = rest @ self.k @ rest

    def at(self, theta):
        """reml, ml, tr S and the derivatives of the two by theta."""
        scale = self.unit / np.exp(LONG(theta))
        v = np.eye(self.n, dtype=LONG) + scale * self.k
        l = cholesky(v)
        wx, wy, wi = (forward(l, m) for m in (self.x, self.y[:, None], np.eye(self.n, dtype=LONG)))
        g = wx.T @ wx
        wy, wi = (m - wx @ solve(g, wx.T @ m) for m in (wy, wi))
        quad, p = np.sum(wy**2), wi.T @ wi
        r = p @ self.y
        steep, t = scale * (r @ self.k @ r) / quad, self.n - np.trace(p)
        restricted = 2 * np.sum(np.log(np.diag(l))) + log_det(g) - log_det(self.x.T @ self.x)
        full = log_det(np.eye(self.n) + scale * self.orthogonal)
        n = self.n
        values = (n - 2) * np.log(quad) + restricted, n * np.log(quad) + full
        return values, t, ((n - 2) * steep - (t - 2), n * steep - (t - 2))


def library(m, criterion):
    """theta by statsmodels."""
    w, q = np.linalg.eigh(m.orthogonal.astype(float))
    keep = w > 1e-13 * w[-1]
    z = q[:, keep] * np.sqrt(w[keep] / w[-1])
    names = list(map(str, range(z.shape[1])))
    vc = VCSpec(["u"], [[names]], [[z]])
    model = MixedLM(m.y.astype(float), m.x.astype(float), groups=np.ones(m.n), exog_vc=vc)
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # its standard errors, not wanted here
        fit = model.fit(reml=criterion == "reml", method="bfgs", gtol=1e-8)
    return float(np.log(fit.scale / fit.vcomp[0] * w[-1] * float(m.unit)))


def everything():
    found = []
    for name in ("random", "ties", "near-ties", "offset", "crowded"):
        x, y = np.loadtxt(HERE.parent / "fit" / (name + ".csv"), delimiter=",", skiprows=1).T
        for family in ("smoothing-spline", "penalised-spline"):
            m = Model(family, x, y)
            thetas = [float(np.log(m.unit * LONG(10.0**e))) for e in (-5, -3.5, -2, -0.5, 1)]
            case = {"data": name + ".csv", "family": family, "values": [], "least": []}
            for theta in thetas:
                lam = float(np.exp(theta))
                (reml, ml), t, _ = m.at(np.log(LONG(lam)))
                case["values"].append({"tuning": lam, "df": float(t), "reml": float(reml), "ml": float(ml)})
            for i, criterion in enumerate(("reml", "ml")):
                grid = float(np.log(m.unit)) + np.arange(-18.0, 16.0)
                best = min(grid, key=lambda g: m.at(g)[0][i])
                assert grid[0] < best < grid[-1], "a minimum at the edge"
                root = brentq(lambda g: float(m.at(g)[2][i]), best - 1, best + 1, xtol=1e-13)
                values, t, _ = m.at(root)
                least = {"criterion": criterion, "theta": root, "df": float(t), "value": float(values[i])}
                least["library"] = library(m, criterion)
                assert abs(least["library"] - root) < 1e-5, (name, family, least)
                case["least"].append(least)
            found.append(case)
    return found


def numbers(v):
    if isinstance(v, (list, dict)):
        return [n for e in ([v[k] for k in v if k != "library"] if isinstance(v, dict) else v) for n in numbers(e)]
    return [] if isinstance(v, str) else [v]


if __name__ == "__main__":
    made = everything()
    if sys.argv[1:] == ["--check"]:
        a, b = (np.array(numbers(v)) for v in (json.load(open(HERE / "references.json"))["cases"], made))
        worst = np.max(np.abs(a - b) / np.maximum(1, np.abs(a)))
        print(f"{len(made)} cases, worst difference {worst:.2g}")
        if not worst <= 1e-9:
            sys.exit("references.json does not come from this script")
    else:
        with open(HERE / "references.json", "w") as f:
            f.write('{"source": "see make.py", "cases": [\n')
            f.write(",\n".join(json.dumps(c) for c in made) + "\n]}\n")
