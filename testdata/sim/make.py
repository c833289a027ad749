#!/usr/bin/env python3
"""Reference values for the package sim, in 40-digit arithmetic.

    python3 testdata/sim/make.py            writes reference.json beside this script
    python3 testdata/sim/make.py --check    compares instead; exit code 1 where it differs

Needs mpmath (python3-mpmath in Debian). Nothing here comes from the project's own code.
Arguments are doubles, so they are the same numbers there and here; values are printed
to 20 digits.

values      a function at points, from mpmath's functions and the printed formulas
variances   mean and variance of a curve over a design law, by tanh-sinh or Gauss-Legendre
            quadrature between the places where the curve is not smooth
sine        coefficients of P in sin r = r + r^3 P(r^2), |r| <= pi/2, least relative error
            (Remez exchange), each rounded to double with the rest fitted again

The published functions: Donoho & Johnstone 1994, Biometrika 81:425, table 1; f0 and f_j:
Wand 2000, Computational Statistics 15:443.
"""

import json
import pathlib
import sys

from mpmath import beta as beta_function
from mpmath import cos, erfc, exp, fabs, lu_solve, matrix, mp, mpf, nstr, pi, quad, sign, sin, sqrt, tanh

mp.dps = 40
FILE = pathlib.Path(__file__).parent / "reference.json"

T = [mpf(t) for t in ("0.10", "0.13", "0.15", "0.23", "0.25", "0.40", "0.44", "0.65", "0.76", "0.78", "0.81")]
H_BLOCKS = [mpf(h) for h in ("4", "-5", "3", "-4", "5", "-4.2", "2.1", "4.3", "-3.1", "2.1", "-4.2")]
H_BUMPS = [mpf(h) for h in ("4", "5", "3", "4", "5", "4.2", "2.1", "4.3", "3.1", "5.1", "4.2")]
W_BUMPS = [mpf(w) for w in (".005", ".005", ".006", ".01", ".01", ".03", ".01", ".01", ".005", ".008", ".005")]


def phi(z):
    return exp(-z * z / 2) / sqrt(2 * pi)


def Phi(z):
    return erfc(-z / sqrt(mpf(2))) / 2


def blocks(x):
    return sum(h * (1 + sign(x - t)) / 2 for h, t in zip(H_BLOCKS, T))


def bumps(x):
    return sum(h * (1 + fabs((x - t) / w)) ** -4 for h, t, w in zip(H_BUMPS, T, W_BUMPS))


def heavisine(x):
    return 4 * sin(4 * pi * x) - sign(x - mpf("0.3")) - sign(mpf("0.72") - x)


def doppler(x):
    return sqrt(x * (1 - x)) * sin(2 * pi * mpf("1.05") / (x + mpf("0.05")))


def f0(x):
    return mpf("1.5") * phi((x - mpf(".35")) / mpf(".15")) - phi((x - mpf(".8")) / mpf(".04"))


def spatial3(x):
    a = 2 ** ((9 - 4 * mpf(3)) / 5)
    return sqrt(x * (1 - x)) * sin(2 * pi * (1 + a) / (x + a))


def frost(x):
    return 3 * exp(-2 * x) + sin(2 * pi * x)


F0 = "1.5*phi((x - 0.35)/0.15) - phi((x - 0.8)/0.04)"
SPATIAL3 = "sqrt(x*(1 - x))*sin(2*pi*(1 + 2^((9 - 4*3)/5))/(x + 2^((9 - 4*3)/5)))"


def values():
    """Each expression at points of its domain."""
    unit = [(i + 0.5) / 37 for i in range(37)]
    wide = [(i - 60) * 0.737 for i in range(121)]
    huge = [s * m * 10.0 ** k for k in range(1, 8) for m in (1.1, 3.3, 7.7) for s in (-1, 1)]
    tiny = [s * 10.0 ** -k for k in (1, 3, 8, 20) for s in (-1, 1)]
    # the doubles next to multiples of pi/2, where a sine or cosine all but vanishes
    zeros = [float(pi * k / 2) for k in (1, 2, 3, 4, 7, 22, 355, 1001, 100001)]
    return [
        {"f": text, "x": xs, "value": [nstr(f(mpf(x)), 20) for x in xs]}
        for text, f, xs in (
            ("exp(x)", exp, wide + tiny + [-744.0, -701.0, 699.9, 709.0]),
            ("sin(x)", sin, wide + huge + tiny + zeros),
            ("cos(x)", cos, wide + huge + tiny + zeros),
            ("phi(x)", phi, [w / 5 for w in wide]),
            ("Phi(x)", Phi, [w / 5 for w in wide]),
            ("tanh(x)", tanh, wide + tiny),
            ("blocks", blocks, unit),
            ("bumps", bumps, unit + [0.4, 0.1]),
            ("heavisine", heavisine, unit),
            ("doppler", doppler, unit + [0.001, 0.999]),
            (F0, f0, unit),
            (SPATIAL3, spatial3, unit),
        )
    ]


def uniform(x):
    return mpf(1)


def beta(a, b):
    a, b = mpf(a), mpf(b)
    c = 1 / beta_function(a, b)
    return lambda x: c * x ** (a - 1) * (1 - x) ** (b - 1) if 0 < x < 1 else mpf(0)


def normal(mean, sd):
    mean, sd = mpf(mean), mpf(sd)
    mass = Phi((1 - mean) / sd) - Phi(-mean / sd)
    return lambda x: phi((x - mean) / sd) / (sd * mass)


def moments(f, density, breaks):
    """Mean and variance of f under a density on [0, 1], f smooth between the breaks."""
    cuts = sorted({mpf(0), mpf("0.5"), mpf(1)} | set(breaks))
    left = [c for c in cuts if c <= mpf("0.5")]
    right = [1 - c for c in reversed(cuts) if c >= mpf("0.5")]

    def integral(h):
        # x = v^8 and 1 - x = v^8 flatten poles of the density at the ends
        low = quad(lambda v: h(v**8) * density(v**8) * 8 * v**7, [c ** (mpf(1) / 8) for c in left])
        high = quad(lambda v: h(1 - v**8) * density(1 - v**8) * 8 * v**7, [c ** (mpf(1) / 8) for c in right])
        return low + high

    mean = integral(f)
    return mean, integral(lambda x: (f(x) - mean) ** 2)


def variances():
    """Mean and variance of curves over design laws on [0, 1]."""
    sinks = [2 * mpf("1.05") / k - mpf("0.05") for k in range(3, 43)]  # zeros of doppler
    heaps = [mpf(".3"), mpf(".72")]
    curves = {
        "blocks": (blocks, T),
        "bumps": (bumps, T + [t + s * w for t, w in zip(T, W_BUMPS) for s in (-5, -1, 1, 5)]),
        "heavisine": (heavisine, heaps),
        "doppler": (doppler, [z for z in sinks if 0 < z < 1]),
        F0: (f0, [mpf(".7"), mpf(".8"), mpf(".9")]),
        "3*exp(-2*x) + sin(2*pi*x)": (frost, []),
    }
    laws = {
        "uniform": (uniform, []),
        "beta 0.3 0.4": (beta("0.3", "0.4"), []),
        "beta 2.5 1.5": (beta("2.5", "1.5"), []),
        "beta 900 1000": (beta("900", "1000"), [mpf(".4"), mpf(".45"), mpf(".47"), mpf(".5"), mpf(".55")]),
        "normal 0.5 0.2": (normal("0.5", "0.2"), []),
        "normal -2 0.5": (normal("-2", "0.5"), []),
        "normal 3 0.5": (normal("3", "0.5"), []),
        "normal 0.4 0.01": (normal("0.4", "0.01"), [mpf(".3"), mpf(".38"), mpf(".42")]),
    }
    rows = []
    for text, (f, breaks) in curves.items():
        for law, (density, more) in laws.items():
            mean, variance = moments(f, density, [b for b in breaks + more if 0 < b < 1])
            rows.append({"f": text, "law": law, "mean": nstr(mean, 20), "variance": nstr(variance, 20)})
    return rows


def sine(terms=8):
    """Coefficients of P, and the greatest relative error of the sine made with them."""
    end = (pi / 2 * (1 + mpf(2) ** -20)) ** 2
    ratio = lambda z: sin(sqrt(z)) / sqrt(z)
    target = lambda z: (ratio(z) - 1) / z
    weight = lambda z: z / ratio(z)
    grid = [end * (1 - cos(pi * mpf(i) / 400)) / 2 for i in range(1, 401)]

    def error(c, z):
        return (sum(cj * z**j for j, cj in enumerate(c)) - target(z)) * weight(z)

    def exchange(fixed):
        k, m = len(fixed), terms - len(fixed)
        points = [end * (1 - cos(pi * (2 * i + 1) / (2 * (m + 1)))) / 2 for i in range(m + 1)]
        for _ in range(12):
            a, b = matrix(m + 1, m + 1), matrix(m + 1, 1)
            for i, z in enumerate(points):
                for j in range(m):
                    a[i, j] = z ** (k + j)
                a[i, m] = (-1) ** i / weight(z)
                b[i] = target(z) - sum(c * z**j for j, c in enumerate(fixed))
            solution = lu_solve(a, b)
            c = fixed + [solution[j] for j in range(m)]
            peaks = []
            for z in grid:
                e = error(c, z)
                if peaks and (e > 0) == (peaks[-1][1] > 0):
                    if fabs(e) > fabs(peaks[-1][1]):
                        peaks[-1] = (z, e)
                else:
                    peaks.append((z, e))
            if len(peaks) < m + 1:
                break
            points = [z for z, _ in peaks[-(m + 1) :]]
        return c

    fixed = []
    while len(fixed) < terms:
        fixed.append(mpf(float(exchange(fixed)[len(fixed)])))
    return {"coefficients": [float(c) for c in fixed], "error": nstr(max(fabs(error(fixed, z)) for z in grid), 3)}


def main():
    text = json.dumps({"values": values(), "variances": variances(), "sine": sine()}, indent=1) + "\n"
    if "--check" in sys.argv:
        if FILE.read_text() != text:
            sys.exit(f"{FILE} is not what this script makes")
    else:
        FILE.write_text(text)


if __name__ == "__main__":
    main()
