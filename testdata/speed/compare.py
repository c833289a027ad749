#!/usr/bin/env python3
"""How many times as fast as loops over library calls, measured side by side.

    compare.py [ROUNDS]     default 5; prints medians over the rounds

The same work is done by the program (BenchmarkWorkload in scoring, one core) and by
what a script would call: per scored rung a fit at a given flexibility and predictions at
10,000 held-out points, with the error there. The script leaves out what the program does
besides: solving the tuning for a df, traces, leverages, nine criteria, tests and rows.

  smoothing spline   scipy.interpolate.make_smoothing_spline
  regression spline  scipy.interpolate.make_lsq_spline
  local              statsmodels lowess at the data, the shorter of: with its own
                     binning (delta) and linear interpolation to the held-out points, or
                     at every held-out point
  kernel             weights of all pairs by NumPy

Needs Go, and Debian's python3-numpy, python3-scipy and python3-statsmodels.
"""
import os
import pathlib
import re
import statistics
import subprocess
import sys
import tempfile
import time

for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "GOMAXPROCS"):
    os.environ[name] = "1"

import numpy as np
from scipy.interpolate import make_lsq_spline, make_smoothing_spline
from statsmodels.nonparametric.smoothers_lowess import lowess

ROOT = pathlib.Path(__file__).resolve().parents[2]
SIZES = (30, 300, 3000)
HELD_OUT = 10_000


def truth(x):
    return 3 * np.exp(-2 * x) + np.sin(2 * np.pi * x)


def sample(n, rng):
    x = np.sort(rng.uniform(0, 1, n))
    at = np.sort(rng.uniform(0, 1, HELD_OUT))
    return x, truth(x) + 0.4 * rng.standard_normal(n), at, truth(at) + 0.4 * rng.standard_normal(HELD_OUT)


def smoothing_spline(x, y, at, df):
    return make_smoothing_spline(x, y, lam=len(x) * (0.25 / df) ** 4)(at)


def regression_spline(x, y, at, df):
    k = int(df) - 4 if df >= 4 else 0
    inner = np.quantile(x, np.arange(1, k + 1) / (k + 1))
    return make_lsq_spline(x, y, np.concatenate([[x[0]] * 4, inner, [x[-1]] * 4]), 3)(at)


def local_binned(x, y, at, df):
    fitted = lowess(y, x, frac=min(1, 2 / df), it=0, delta=0.01, return_sorted=False)
    return np.interp(at, x, fitted)


def local_everywhere(x, y, at, df):
    return lowess(y, x, frac=min(1, 2 / df), it=0, xvals=at)


def kernel(x, y, at, df):
    w = np.exp(-0.5 * ((at[:, None] - x) * (3 * df)) ** 2)
    return w @ y / w.sum(axis=1)


FAMILIES = {
    "smoothing-spline": (smoothing_spline,),
    "regression-spline": (regression_spline,),
    "local": (local_binned, local_everywhere),
    "kernel": (kernel,),
}


def library_seconds(family, n, rng):
    """Seconds per scored rung of the fastest library call."""
    x, y, at, held = sample(n, rng)
    best = np.inf
    for call in FAMILIES[family]:
        dfs = (4, 6, 9, 12)
        start, rungs = time.perf_counter(), 0
        while rungs < len(dfs) or time.perf_counter() - start < 0.2:
            np.mean((held - call(x, y, at, dfs[rungs % len(dfs)])) ** 2)
            rungs += 1
        best = min(best, (time.perf_counter() - start) / rungs)
    return best


def program_seconds(binary):
    """Seconds by size, fixed or not, stage and family, from one run of the benchmark."""
    text = subprocess.run(
        [binary, "-test.run", "XXX", "-test.bench", "BenchmarkWorkload", "-test.benchtime", "0.3s"],
        capture_output=True, text=True, check=True, cwd=ROOT / "scoring",
    ).stdout
    found = {}
    for n, fixed, stage, family, ns in re.findall(
        r"BenchmarkWorkload/n=(\d+)/fixed=(\w+)/stage=([\w+]+)(?:/family=([\w-]+))?\S*\s+\d+\s+([\d.]+) ns/op", text
    ):
        found[int(n), fixed == "true", stage, family] = float(ns) * 1e-9
    return found


def main():
    rounds = int(sys.argv[1]) if len(sys.argv) > 1 else 5
    with tempfile.TemporaryDirectory() as scratch:
        binary = os.path.join(scratch, "scoring.test")
        subprocess.run(["go", "test", "-c", "-o", binary, "./scoring"], check=True, cwd=ROOT)
        library, program = {}, {}
        for r in range(rounds):  # in turn, so that both see the same machine
            for key, value in program_seconds(binary).items():
                program.setdefault(key, []).append(value)
            for n in SIZES:
                for family in FAMILIES:
                    library.setdefault((n, family), []).append(library_seconds(family, n, np.random.default_rng(r)))
    took = {key: statistics.median(v) for key, v in program.items()}
    calls = {key: statistics.median(v) for key, v in library.items()}
    print(f"medians of {rounds} rounds, one core; microseconds per scored rung")
    for fixed in (False, True):
        for n in SIZES:
            whole = took[n, fixed, "whole", ""] / (17 * len(FAMILIES))
            script = statistics.mean(calls[n, f] for f in FAMILIES)
            draw = took[n, fixed, "draw", ""]
            print(
                f"\nn = {n}, design {'fixed' if fixed else 'drawn anew'}: whole {whole * 1e6:.1f}, libraries {script * 1e6:.0f}: "
                f"{script / whole:.0f} times; sweep {took[n, fixed, 'whole', ''] / draw:.2f} × its generation floor of {draw * 1e6:.0f} a replicate"
            )
            for family in FAMILIES:
                ladder = sum(took.get((n, fixed, stage, family), 0) for stage in ("ladder", "tests")) / 17
                scored = took[n, fixed, "fit+score", family] / 17
                call = calls[n, family]
                print(
                    f"  {family:18s} design {ladder * 1e6:8.1f}  fit and score {scored * 1e6:8.1f}  "
                    f"library {call * 1e6:9.0f}  {call / (ladder + scored):6.0f} times"
                )
    over = took[300, False, "whole", ""] / took[300, True, "whole", ""]
    print(f"\na fixed design at n = 300 takes {over:.1f} times less")


if __name__ == "__main__":
    main()
