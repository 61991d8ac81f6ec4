"""Writes analog-filters-scipy.json: sections, phase, group delay, step response and noise bandwidth of the low-pass prototypes.

Poles from scipy.signal.buttap and besselap(norm="mag"); answers in time by the matrix exponential of zpk2ss, noise bandwidth
by the Lyapunov equation: both without partial fractions. Time in units of 1/(2 pi corner).

Run: /usr/bin/python3 test/reference/scripts/analog_filters.py > test/reference/analog-filters-scipy.json
"""
import json

import numpy as np
import scipy
from scipy import linalg, optimize, signal

ORDERS = range(1, 9)
RATIOS = [0.01, 0.1, 0.5, 0.9, 1, 1.5, 3, 10, 50]
TIMES = [0.25, 0.5, 1, 2, 3, 5, 8, 13, 21]
POLES = {
    "butterworth": lambda order: signal.buttap(order)[1],
    "bessel": lambda order: signal.besselap(order, norm="mag")[1],
}


def sections(poles):
    rows = []
    for pole in poles:
        if abs(pole.imag) < 1e-12:
            rows.append((abs(pole.real), None))
        elif pole.imag > 0:
            rows.append((abs(pole), abs(pole) / (-2 * pole.real)))
    return sorted(rows, key=lambda row: row[1] or 0)


def root(function, low, high):
    return optimize.brentq(function, low, high, xtol=1e-14, rtol=1e-14, maxiter=200)


def in_time(poles):
    a, b, c, _ = signal.zpk2ss([], poles, np.prod(-poles).real)
    # Step: the input as one more state, so that one exponential gives its integral.
    whole = np.block([[a, b], [np.zeros((1, len(poles) + 1))]])
    step = lambda t: (c @ linalg.expm(whole * t)[:-1, -1:]).item()
    slope = lambda t: (c @ linalg.expm(a * t) @ b).item()
    grid = np.arange(0.5, 60, 0.02)
    values = np.array([step(t) for t in grid])
    rise = [root(lambda t: step(t) - level, 1e-3, grid[np.argmax(values > level)]) for level in (0.1, 0.9)]
    last = np.flatnonzero(np.abs(values - 1) > 0.01)[-1]
    settling = root(lambda t: abs(step(t) - 1) - 0.01, grid[last], grid[last + 1])
    top = np.argmax(values)
    overshoot = step(root(slope, grid[top - 1], grid[top + 1])) - 1 if values[top] > 1 + 1e-9 else 0.0
    gramian = linalg.solve_continuous_lyapunov(a, -b @ b.T)
    return {
        "rise": rise[1] - rise[0],
        "settling": settling,
        "overshoot": overshoot,
        "step": [step(t) for t in TIMES],
        "noiseBandwidth": np.pi * (c @ gramian @ c.T).item(),
    }


def figures(poles):
    w = np.array(RATIOS)[:, None]
    return {
        "sections": sections(poles),
        "phase": (-np.arctan2(w - poles.imag, -poles.real).sum(axis=1)).tolist(),
        "groupDelay": (-poles.real / (poles.real**2 + (w - poles.imag) ** 2)).sum(axis=1).tolist(),
        **in_time(poles),
    }


print(
    json.dumps(
        {
            "id": "analog.filters",
            "quantity": "sections [frequency, Q], phase (rad, continuous) and group delay at ratios of the corner, 10-90 % rise, settling to 1 %, overshoot (fraction), step response at times, noise bandwidth over corner",
            "inputs": {"ratios": RATIOS, "times": TIMES},
            "expected": {family: {str(n): figures(np.asarray(make(n), complex)) for n in ORDERS} for family, make in POLES.items()},
            "tolerance": {"rel": 1e-9},
            "source": "scipy.signal.buttap, besselap, zpk2ss; scipy.linalg.expm, solve_continuous_lyapunov",
            "provenance": f"computed with scipy {scipy.__version__}",
        }
    )
)
