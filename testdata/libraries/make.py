#!/usr/bin/env python3
"""Fits by general-purpose libraries, as a second reference for each family.

    make.py            writes references.json beside itself
    make.py --check    computes it again and compares with what is there, to 1e-9

  smoothing spline   scipy.interpolate.make_smoothing_spline, at given lambda and at the
                     lambda it chooses by generalised cross-validation
  regression spline  scipy.interpolate.make_lsq_spline; natural: least squares on the
                     cardinal basis of scipy.interpolate.CubicSpline(bc_type="natural")
  penalised spline   statsmodels OLS on scipy's BSpline.design_matrix with the penalty's
                     rows below it
  local              statsmodels lowess (one pass, every point) with neighbours, and
                     KernelReg "ll" with the Gaussian kernel
  kernel             statsmodels KernelReg "lc"
  polynomial         numpy.polynomial.Polynomial.fit

The libraries' own conventions: lowess counts floor(fraction n) neighbours, gives weight
0 beyond 0.999 of the width and 1 below 0.001 of it, so designs are used in which no
observation falls there; make_smoothing_spline continues beyond the data by a cubic, so
it is compared within.
"""
import json
import pathlib
import sys

import numpy as np
import scipy
import statsmodels
import statsmodels.api as sm
from scipy.interpolate import BSpline, CubicSpline, make_lsq_spline, make_smoothing_spline
from statsmodels.nonparametric.kernel_regression import KernelReg
from statsmodels.nonparametric.smoothers_lowess import lowess

HERE = pathlib.Path(__file__).resolve().parent


def data(name):
    x, y = np.loadtxt(HERE.parent / "fit" / (name + ".csv"), delimiter=",", skiprows=1).T
    order = np.argsort(x, kind="stable")
    return x[order], y[order]


def within(x):
    return x[0] + np.ptp(x) * np.array([0.0, 0.013, 0.25, 0.5001, 0.77, 0.99, 1.0])


def around(x):
    return x[0] + np.ptp(x) * np.array([-0.02, 0.013, 0.25, 0.5001, 0.77, 0.99, 1.02])


def smoothing_splines():
    for name in ("random", "even", "shuffled"):  # close x cost the library its digits
        x, y = data(name)
        for share in (1e-7, 1e-5, 1e-3):
            lam = share * len(x) * np.ptp(x) ** 3
            g = make_smoothing_spline(x, y, lam=lam)
            yield "smoothing_spline", name, "smoothing-spline", {}, lam, g(x), within(x), g(within(x))


def regression_splines():
    for name in ("random", "even", "ties", "shuffled"):
        x, y = data(name)
        for degree, df in ((3, 4), (3, 6), (3, 9), (2, 6), (1, 5)):
            if name == "ties":
                continue  # make_lsq_spline wants distinct x
            k = df - degree - 1
            inner = np.quantile(x, np.arange(1, k + 1) / (k + 1))
            t = np.concatenate([[x[0]] * (degree + 1), inner, [x[-1]] * (degree + 1)])
            g = make_lsq_spline(x, y, t, degree)
            yield "lsq_spline", name, "regression-spline", {"degree": degree}, k, g(x), around(x), g(around(x))
        for df in (3, 5, 8):
            k = df - 2
            t = np.concatenate([[x[0]], np.quantile(x, np.arange(1, k + 1) / (k + 1)), [x[-1]]])
            basis = CubicSpline(t, np.eye(k + 2), bc_type="natural")
            c = np.linalg.lstsq(basis(x), y, rcond=None)[0]
            at = within(x)
            yield "natural_spline", name, "regression-spline", {"natural": True}, k, basis(x) @ c, at, basis(at) @ c


def penalised_splines():
    for name in ("random", "even", "ties", "shuffled"):
        x, y = data(name)
        t = np.arange(-3, 24) / 20
        design = lambda v: BSpline.design_matrix(np.clip((v - x[0]) / np.ptp(x), 0, 1), t, 3).toarray()
        for lam in (0.01, 1.0, 100.0):
            d = np.sqrt(lam) * np.diff(np.eye(23), 2, axis=0)
            fit = sm.OLS(np.concatenate([y, np.zeros(21)]), np.vstack([design(x), d])).fit()
            at = within(x)
            yield "ols", name, "penalised-spline", {}, lam, design(x) @ fit.params, at, design(at) @ fit.params


def local_fits():
    for name in ("random", "even", "shuffled"):
        x, y = data(name)
        for fraction in (0.4, 0.6, 0.8):
            q = round(fraction * len(x))
            distance = np.abs(x[:, None] - x[None, :])
            u = distance / np.sort(distance, axis=1)[:, q - 1 : q]
            inside = (u > 0.001) & (u < 0.999) | (u < 1e-9) | (u > 1 - 1e-12)
            if not inside.all():
                continue  # an observation where the conventions differ
            fitted = lowess(y, x, frac=q / len(x), it=0, delta=0.0, return_sorted=False)
            options = {"degree": 1, "width": "neighbours", "kernel": "tricube"}
            yield "lowess", name, "local", options, q / len(x), fitted, x[:0], x[:0]
    for name in ("random", "even", "ties", "shuffled"):
        x, y = data(name)
        for share in (0.05, 0.1, 0.3):
            h = share * np.ptp(x)
            for kind, family in (("lc", "kernel"), ("ll", "local")):
                reg = KernelReg(y, x, "c", reg_type=kind, bw=[h])
                options = {"kernel": "gaussian"}
                if family == "local":
                    options.update(degree=1, width="bandwidth")
                yield "kernel_reg", name, family, options, h, reg.fit(x)[0], around(x), reg.fit(around(x))[0]


def polynomials():
    for name in ("random", "ties", "offset"):
        x, y = data(name)
        for degree in (1, 3, 6):
            g = np.polynomial.Polynomial.fit(x, y, degree)
            yield "polynomial", name, "polynomial", {}, degree, g(x), around(x), g(around(x))


def fits():
    found = []
    for part in (smoothing_splines, regression_splines, penalised_splines, local_fits, polynomials):
        for library, name, family, options, tuning, fitted, at, predicted in part():
            found.append(
                {
                    "library": library,
                    "data": name + ".csv",
                    "family": family,
                    "options": options,
                    "tuning": float(tuning),
                    "fitted": list(map(float, fitted)),
                    "at": list(map(float, at)),
                    "predicted": list(map(float, predicted)),
                }
            )
    return found


def choices():
    """The lambda that make_smoothing_spline chooses, found from its fit: of a grid of
    lambda around it the one whose fit agrees, refined by bisection on the residuals."""
    found = []
    for name in ("random", "even", "shuffled"):
        x, y = data(name)
        g = make_smoothing_spline(x, y)
        rss = np.sum((y - g(x)) ** 2)
        gap = lambda theta: np.sum((y - make_smoothing_spline(x, y, lam=np.exp(theta))(x)) ** 2) - rss
        span = 3 * np.log(np.ptp(x))
        theta = scipy.optimize.brentq(gap, span - 18, span + 5, xtol=1e-13)
        found.append({"data": name + ".csv", "lambda": float(np.exp(theta)), "fitted": list(map(float, g(x)))})
    return found


def everything():
    versions = {"numpy": np.__version__, "scipy": scipy.__version__, "statsmodels": statsmodels.__version__}
    return {"source": "see make.py", "versions": versions, "fits": fits(), "choices": choices()}


def write():
    made = everything()
    with open(HERE / "references.json", "w") as f:  # a case per line
        f.write('{"source": "see make.py", "versions": ' + json.dumps(made["versions"]) + ',\n"fits": [\n')
        f.write(",\n".join(json.dumps(c) for c in made["fits"]) + '\n],\n"choices": [\n')
        f.write(",\n".join(json.dumps(c) for c in made["choices"]) + "\n]}\n")


def check():
    kept, made, worst = json.load(open(HERE / "references.json")), everything(), 0.0
    for part, keys in (("fits", ("tuning", "fitted", "predicted")), ("choices", ("fitted",))):
        assert len(kept[part]) == len(made[part])
        for a, b in zip(kept[part], made[part]):
            for key in keys:
                u, v = (np.atleast_1d(c[key]).astype(float) for c in (a, b))
                worst = max([worst, *(np.abs(u - v) / np.maximum(1, np.abs(u)))])
    print(f"{len(kept['fits'])} fits and {len(kept['choices'])} choices, worst difference {worst:.2g}")
    if worst > 1e-9:
        sys.exit("references.json does not come from this script")


if __name__ == "__main__":
    check() if sys.argv[1:] == ["--check"] else write()
