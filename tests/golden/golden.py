#!/usr/bin/env python3
"""Golden values from numpy, scipy, statsmodels and iapws for the tests of the engine.

    python3 -m venv .venv && .venv/bin/pip install numpy==2.4.6 scipy==1.17.1 statsmodels==0.15.0 iapws==1.5.5
    .venv/bin/python golden.py            # rewrites series.csv and the *-py.csv files beside this script

Run it before golden.R, which reads series.csv. The tests need neither language. Every file says in its first line which
program and version made it. The series is invented: a seeded generator, no person.
"""
from pathlib import Path

import iapws
import numpy as np
import scipy
import statsmodels
import statsmodels.api as sm
from iapws import IAPWS95
from iapws.iapws97 import _PSat_T as psat_if97
from scipy import signal, stats
from statsmodels.stats.proportion import proportion_confint

HERE = Path(__file__).parent
MMHG_PA = 133.322387415


def write(name, program, header, rows):
    with open(HERE / name, "w", newline="\n") as out:
        out.write(f"# {program}\n{header}\n")
        for row in rows:
            out.write(",".join(x if isinstance(x, str) else f"{x:.15g}" for x in row) + "\n")


def series():
    """About ten minutes of breaths: a rising uptake, an output that bends on it, shared breath noise, two odd breaths."""
    rng = np.random.default_rng(20261201)
    d = np.round(rng.uniform(2.0, 4.2, 190), 3)
    end = np.round(60 + np.cumsum(d), 3)
    mid = end - d / 2
    level = 600 + 2.9 * (mid - 60)
    shared = rng.normal(0, 0.06, d.size)
    x = level * (1 + shared)
    x[70] *= 0.35
    x[131] *= 1.7
    out = 80 + 0.85 * level + 0.45 * np.maximum(level - 1500, 0)
    y = out * (1 + 0.9 * shared + rng.normal(0, 0.03, d.size))
    clear = out * (1 + rng.normal(0, 0.02, d.size))
    w = (level.mean() / level) ** 2
    return [np.round(v, 6) for v in (end, d, mid, level, x, y, clear, w)]


def local_line(t, x, half):
    """Fitted value at each point of an OLS line over the points within +- half (statsmodels)."""
    fits = []
    for s in t:
        near = np.abs(t - s) <= half
        fit = sm.OLS(x[near], sm.add_constant(t[near] - s, has_constant="add")).fit()
        fits.append(fit.params[0])
    return fits


def middle_five(x):
    """Mean of the middle five of seven: scipy's trimmed mean, one value cut from each end."""
    return [stats.trim_mean(x[i - 3:i + 4], 1 / 7) for i in range(3, len(x) - 3)]


def low_pass(x, cut):
    """Third-order Butterworth at 1 Hz, forward and backward, odd extension by three periods of the cut-off."""
    sos = signal.butter(3, cut, fs=1.0, output="sos")
    return signal.sosfiltfilt(sos, x, padtype="odd", padlen=3 * round(1 / cut))


def window_means(end, d, x, width, step):
    """Mean over [a, a + width] of the staircase that holds x over each breath: differences of its piecewise linear integral."""
    knots = np.concatenate([[end[0] - d[0]], end])
    integral = np.concatenate([[0], np.cumsum(x * d)])
    a = np.arange(knots[0], knots[-1] - width, step)
    return zip(a, (np.interp(a + width, knots, integral) - np.interp(a, knots, integral)) / width)


def long_run(t, r, origin):
    """Long-run variance of residuals in 10-s bins, as the calibration note defines it, by plain numpy."""
    bins = np.floor((t - origin) / 10).astype(int)
    ids = np.unique(bins)
    count = np.array([(bins == b).sum() for b in ids])
    x = np.array([r[bins == b].mean() for b in ids]) * np.sqrt(count / count.mean())
    x -= x.mean()
    n = ids.size
    rho = np.clip((x[1:] @ x[:-1]) / (x @ x) + 2.5 / n, 0, 0.7)
    return max(x @ x / (n - 4) * count.mean() * (1 + rho) / (1 - rho), r @ r / (r.size - 4))


def water():
    """Saturation pressure, mmHg: IAPWS-95 and IAPWS-IF97 (region 4)."""
    for t in range(10, 43):
        k = t + 273.15
        yield t, IAPWS95(T=k, x=0).P * 1e6 / MMHG_PA, psat_if97(k) * 1e6 / MMHG_PA


def main():
    versions = f"numpy {np.__version__}, scipy {scipy.__version__}, statsmodels {statsmodels.__version__}"
    end, d, mid, level, x, y, clear, w = series()
    write("series.csv", f"invented breaths, numpy {np.__version__} default_rng(20261201)", "end_s,d_s,mid_s,level,x,y,clear,w",
          zip(end, d, mid, level, x, y, clear, w))
    write("local-line-py.csv", f"OLS per window of +-45 s, {versions}", "value", ([v] for v in local_line(mid, x, 45.0)))
    write("middle-five-py.csv", f"stats.trim_mean(window, 1/7), {versions}", "value", ([v] for v in middle_five(x)))
    second = np.arange(np.ceil(mid[0]), np.floor(mid[-1]))
    wave = np.round(np.interp(second, mid, x), 6)
    write("low-pass-py.csv", f"signal.sosfiltfilt(butter(3, 0.04 Hz)), odd padding 75, {versions}", "input,value",
          zip(wave, low_pass(wave, 0.04)))
    write("window-means-py.csv", f"np.interp on the integral of the staircase, {versions}", "from_s,mean_30s",
          window_means(end, d, x, 30.0, 1.0))
    residual = sm.OLS(y, np.vander(mid / 600, 4)).fit().resid
    write("long-run-py.csv", f"residual of a cubic (OLS) and its long-run variance, {versions}", "origin_s,value",
          [[o, long_run(mid, residual, o)] for o in (0.0, 60.0, 63.7)])
    z = [-8, -3.5, -2.326347874, -1.644853627, -1, -0.1, 0, 0.1, 0.5, 1, 1.644853627, 2, 2.575829304, 3, 5, 7.5]
    write("normal-py.csv", f"stats.norm.cdf, {versions}", "z,probability", ((float(v), stats.norm.cdf(v)) for v in z))
    counts = [(0, 12), (1, 12), (12, 12), (7, 40), (9, 10), (270, 300), (287, 300), (1802, 2000), (1, 2000)]
    write("exact-limits-py.csv", f"proportion_confint(method='beta'), alpha 0.05, {versions}", "k,n,low,high",
          ((float(k), float(n), *proportion_confint(k, n, 0.05, "beta")) for k, n in counts))
    write("water-vapour-py.csv", f"iapws {iapws.__version__}: IAPWS-95 at quality 0, and IAPWS-IF97 region 4; mmHg = 133.322387415 Pa",
          "celsius,iapws95_mmhg,if97_mmhg", ((float(a), b, c) for a, b, c in water()))


if __name__ == "__main__":
    main()
