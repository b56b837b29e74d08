#!/usr/bin/env python3
"""Outcomes of one whole test (whole-test.csv, invented) by an independent reading of the published procedures in numpy:
merging of errant breaths, window means, peak, thresholds as marked by hand, slopes, recovery, reserves, dead space, and the
closed-form intervals with the calibrated factors.

    .venv/bin/python whole_test.py        # rewrites whole-test-outcomes-py.csv; versions as in golden.py

Phases and both thresholds are fixed here and in the test, so that nothing depends on what the engine would propose.
Plain loops and numpy.polyfit on purpose: nothing is shared with the engine but the definitions.
"""
from pathlib import Path

import numpy as np

HERE = Path(__file__).parent
REST, WARM_UP, RAMP, END = 0.0, 182.35, 362.95, 985.15
VT1, VT2 = 622.0, 834.0
AGE, MASS, FEV1, MVV_FACTOR = 34.0, 64.0, 3.4, 40.0
SAMPLES = {"rest": (150.0, 96.0, 38.0), "peak": (980.0, 101.0, 36.0)}   # s, PaO2, PaCO2
Z, K, MAD = 1.645, 4.0, 1.4826
F = {"ve-vco2-slope-to-vt2": 1.57, "ve-vco2-slope-full": 1.55, "oues": 1.33, "dvo2-dwr": 0.95, "hr": 1.31, "peak": 0.72}
NAMES = ["t", "load", "vo2", "vco2", "ve", "vt", "fr", "hr", "peto2", "petco2", "spo2"]


def read():
    rows = np.genfromtxt(HERE / "whole-test.csv", delimiter=",", comments="#", skip_header=3)
    table = dict(zip(NAMES, rows.T))
    table["d"] = np.diff(table["t"], prepend=2 * table["t"][0] - table["t"][1])
    return table


def errant(t, x, skip):
    """Outside K s sqrt(1 + 1/n) of the line through the neighbours within 45 s (at most 40 a side)."""
    out = np.zeros(t.size, bool)
    for i in range(t.size):
        near = [j for j in range(max(0, i - 40), min(t.size, i + 41)) if j != i and not skip[j] and abs(t[j] - t[i]) <= 45]
        if len(near) < 8:
            continue
        line = np.polyfit(t[near] - t[i], x[near], 1)
        s = MAD * np.median(np.abs(x[near] - np.polyval(line, t[near] - t[i])))
        out[i] = abs(x[i] - line[1]) > K * s * np.sqrt(1 + 1 / len(near))
    return out


def merged(b):
    """Each errant breath joined with the next two, a following errant one taking in up to four; never over a phase end."""
    mid = b["t"] - b["d"] / 2
    bad, limits = np.zeros(mid.size, bool), []
    for low, high in ((-np.inf, RAMP), (RAMP, END), (END, np.inf)):
        rows = np.flatnonzero((b["t"] > low) & (b["t"] <= high))
        limits.append(rows[-1])
        for name in ("vo2", "vco2"):
            first = errant(mid[rows], b[name][rows], np.zeros(rows.size, bool))
            bad[rows] |= errant(mid[rows], b[name][rows], first)
    groups, i = [], 0
    while i < mid.size:
        last = i
        if bad[i]:
            limit, last, j = min(m for m in limits if m >= i), i + 2, i + 1
            while j <= min(last, limit):
                if bad[j]:
                    last = min(j + 2, i + 4)
                j += 1
            last = min(last, limit)
        groups.append(range(i, last + 1))
        i = last + 1
    out = {"t": np.array([b["t"][g[-1]] for g in groups]), "d": np.array([b["d"][list(g)].sum() for g in groups])}
    for name in NAMES[2:]:
        w = [np.ones(len(g)) if name == "vt" else b["d"][list(g)] for g in groups]
        out[name] = np.array([np.average(b[name][list(g)], weights=v) for g, v in zip(groups, w)])
    return out, int(bad.sum())


class Means:
    """Window means of the staircase of breaths; ratios are mean over mean, tidal volume counts once per breath."""
    RATIO = {"o2-pulse": ("vo2", "hr", 1), "rer": ("vco2", "vo2", 1), "eq-o2": ("ve", "vo2", 1000), "eq-co2": ("ve", "vco2", 1000)}

    def __init__(self, b):
        self.b, self.knots = b, np.concatenate([[b["t"][0] - b["d"][0]], b["t"]])

    def integral(self, rate, a, z):
        total = np.concatenate([[0], np.cumsum(rate * np.diff(self.knots))])
        return np.interp(z, self.knots, total) - np.interp(a, self.knots, total)

    def __call__(self, name, a, z):
        b = self.b
        if name in self.RATIO:
            over, under, factor = self.RATIO[name]
            return factor * self.integral(b[over], a, z) / self.integral(b[under], a, z)
        if name == "vt":
            return self.integral(b["vt"] / b["d"], a, z) / self.integral(1 / b["d"], a, z)
        return self.integral(b[name], a, z) / (z - a)

    def extreme(self, name, width, low, high, pick=max):
        starts = [low + k for k in range(int(high - width - low) + 1)] + [high - width]
        return pick(((self(name, a, a + width), -a) if pick is max else (self(name, a, a + width), a)) for a in starts)


def local(t, x):
    return np.array([np.polyval(np.polyfit(t[m] - s, x[m], 1), 0) for s in t for m in [np.abs(t - s) <= 45]])


def shared(ey, ex):
    keep = np.abs(ex) < 4 * MAD * np.median(np.abs(ex))
    return (ex[keep] @ ey[keep]) / (ex[keep] @ ex[keep])


def cleaned(y, yh, x, xh):
    ex = (x - xh) / xh
    return y - shared((y - yh) / yh, ex) * yh * ex


def long_run(t, r, origin, width=10.0):
    ids = np.floor((t - origin) / width)
    groups = [r[ids == i] for i in np.unique(ids)]
    c = np.array([len(g) for g in groups])
    x = np.array([g.mean() for g in groups]) * np.sqrt(c / c.mean())
    x -= x.mean()
    n = c.size
    if n <= 5:
        return r @ r / (r.size - 4)
    rho = np.clip((x[1:] @ x[:-1]) / (x @ x) + 2.5 / n, 0, 0.7)
    return max(x @ x / (n - 4) * c.mean() * (1 + rho) / (1 - rho), r @ r / (r.size - 4))


def without(t, r, degree):
    u = (t - t.mean()) / 300
    return r - np.polyval(np.polyfit(u, r, degree), u)


def slope(t, x, y, f):
    line = np.polyfit(x - x.mean(), y, 1)
    r = without(t, y - np.polyval(line, x - x.mean()), 3)
    half = Z * f * np.sqrt(long_run(t, r, RAMP) / ((x - x.mean()) ** 2).sum())
    return line[0], line[0] - half, line[0] + half, line[1] - line[0] * x.mean()


def rate(raw):
    """Rise of the load, W/min: the line through the instants at which it first shows each new value."""
    up = [i for i in range(1, raw["t"].size) if raw["load"][i] > raw["load"][i - 1]]
    return 60 * np.polyfit(raw["t"][up], raw["load"][up], 1)[0]


def main():
    raw = read()
    w_per_min = rate(raw)
    b, flagged = merged(raw)
    mean, out = Means(b), []
    put = lambda id, at, value, low=np.nan, high=np.nan, method="": out.append((id, at, method, value, low, high))
    # Peak.
    top, start = mean.extreme("vo2", 30, RAMP, END)
    peak_window = (-start, -start + 30)
    put("vo2-peak", "peak", top, method="highest-30s")
    put("o2-pulse-at-peak", "peak", mean("o2-pulse", *peak_window))
    for id, name, width in (("vco2-peak", "vco2", 30), ("ve-peak", "ve", 30), ("rer-peak", "rer", 30), ("o2-pulse-highest", "o2-pulse", 30), ("hr-peak", "hr", 10)):
        put(id, "peak", mean.extreme(name, width, RAMP, END)[0])
    # Increments.
    inside = (b["t"] - b["d"] >= RAMP + 60 - 1e-9) & (b["t"] <= END + 1e-9)
    t, d = (b["t"] - b["d"] / 2)[inside], b["d"][inside]
    vo2, vco2, ve = (b[n][inside] for n in ("vo2", "vco2", "ve"))
    vo2h, vco2h, veh = (local(t, x) for x in (vo2, vco2, ve))
    s_rel = np.sqrt(long_run(t, without(t, vo2, 3) / vo2h, RAMP))
    s30 = top * s_rel / np.sqrt(30 / d[t > END - 60].mean())
    theta = 30 * np.polyfit(t, vo2, 1)[0] / s30
    corrected, half = top - 0.9 * s30 / (1 + 1.6 * theta), Z * F["peak"] * s30
    put("vo2-peak", "peak", corrected, corrected - half, corrected + half, "highest-30s-corrected")
    put("vo2-peak-per-kg", "peak", corrected / MASS, (corrected - half) / MASS, (corrected + half) / MASS)
    # Slopes.
    star = cleaned(ve, veh, vco2, vco2h)
    for id, upto in (("ve-vco2-slope-to-vt2", VT2), ("ve-vco2-slope-full", END)):
        m = t <= upto
        s = slope(t[m], vco2h[m] / 1000, star[m], F[id])
        put(id, "ramp", *s[:3])
        if upto == VT2:
            put("ve-vco2-intercept", "ramp", s[3])
    put("ve-vco2-nadir", "ramp", mean.extreme("eq-co2", 60, RAMP + 60, VT2, min)[0])
    star = cleaned(vo2, vo2h, ve, veh)
    for id, share in (("oues", 1.0), ("oues-75", 0.75), ("oues-50", 0.5)):
        m = t <= RAMP + share * (END - RAMP)
        s = slope(t[m], np.log10(veh[m]), star[m], F["oues"])
        put(id, "ramp", *(s[:3] if id == "oues" else s[:1]))
    for id, low, high in (("dvo2-dwr", RAMP + 90, END), ("dvo2-dwr-to-vt1", RAMP + 90, VT1), ("dvo2-dwr-after-vt1", VT1, END)):
        m = (t > low) & (t <= high)
        s = slope(t[m], w_per_min * (t[m] - RAMP) / 60, vo2[m], F["dvo2-dwr"])
        put(id, "ramp", *(s[:3] if id == "dvo2-dwr" else s[:1]))
    m = (t > RAMP + 90) & (t <= VT1)
    line = np.polyfit(t[m], vo2[m], 1)
    base = mean("vo2", RAMP - 60, RAMP)
    put("mean-response-time", "ramp", (base - line[1]) / line[0] - RAMP)
    # Table.
    places = {"rest": (WARM_UP - 60, WARM_UP), "warm-up": (RAMP - 60, RAMP), "vt1": (VT1 - 15, VT1 + 15), "vt2": (VT2 - 15, VT2 + 15),
              "peak": peak_window, "recovery-1min": (END + 45, END + 75)}
    for at, window in places.items():
        for name in ("vo2", "vco2", "ve", "vt", "fr", "hr", "o2-pulse", "rer", "eq-o2", "eq-co2", "peto2", "petco2", "spo2"):
            put(name, at, mean(name, *window))
    # Recovery.
    def noise(fit, used):
        mid, start = b["t"] - b["d"] / 2, b["t"] - b["d"]
        m = (start >= fit[0]) & (b["t"] <= fit[1])
        n = max(2, ((start >= used[0]) & (b["t"] <= used[1])).sum())
        return long_run(mid[m], without(mid[m], b["hr"][m], 2), fit[0], 5.0) / n
    fall = mean("hr", END - 10, END) - mean("hr", END + 55, END + 65)
    half = Z * F["hr"] * np.sqrt(noise((END - 90, END), (END - 10, END)) + noise((END + 20, END + 120), (END + 55, END + 65)))
    put("hr-recovery-1min", "recovery-1min", fall, fall - half, fall + half)
    grid = np.array([mean("vo2", END + k - 10, END + k + 10) for k in range(int(b["t"][-1] - END - 10) + 1)])
    below = grid <= corrected / 2
    k = next(i for i in range(below.size - 15) if below[i:i + 16].all())
    put("vo2-half-time-recovery", "test", k - 1 + (grid[k - 1] - corrected / 2) / (grid[k - 1] - grid[k]))
    put("vo2-recovery-delay", "test", float(max(np.flatnonzero(grid >= corrected), default=0)))
    put("rer-overshoot", "test", mean.extreme("rer", 30, END, b["t"][-1])[0] - mean("rer", *peak_window))
    # Reserves.
    ve_peak, hr_peak, hr_rest = mean.extreme("ve", 30, RAMP, END)[0], mean.extreme("hr", 10, RAMP, END)[0], mean("hr", *places["rest"])
    put("breathing-reserve", "peak", 100 * (1 - ve_peak / (MVV_FACTOR * FEV1)))
    put("breathing-reserve-absolute", "peak", MVV_FACTOR * FEV1 - ve_peak)
    put("chronotropic-index", "peak", (hr_peak - hr_rest) / (220 - AGE - hr_rest))
    # Samples, at 760 mmHg and room air.
    for at, (s, pao2, paco2) in SAMPLES.items():
        w = (s - 15, s + 15)
        expired = 760 * 310.15 / 273.15 * mean("vco2", *w) / 1000 / mean("ve", *w)
        put("vd-vt", at, (paco2 - expired) / paco2)
        put("pa-et-co2", at, paco2 - mean("petco2", *w))
        put("pa-a-o2", at, 0.2093 * 713 - paco2 * (0.2093 + 0.7907 / mean("rer", *w)) - pao2)
        w = places[at]
        jones = 5.5 + 0.9 * mean("petco2", *w) - 2.1 * mean("vt", *w)
        put("vd-vt-estimated", at, 1 - 760 * 310.15 / 273.15 * mean("vco2", *w) / 1000 / mean("ve", *w) / jones)
    with open(HERE / "whole-test-outcomes-py.csv", "w", newline="\n") as file:
        file.write(f"# whole_test.py, numpy {np.__version__}; {flagged} errant breaths\nid,at,method,value,low,high\n")
        for id, at, method, *numbers in out:
            file.write(",".join([id, at, method] + ["" if np.isnan(x) else f"{x:.12g}" for x in numbers]) + "\n")


if __name__ == "__main__":
    main()
