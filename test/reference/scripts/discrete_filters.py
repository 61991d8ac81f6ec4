"""Writes discrete-filters-scipy.json: bilinear, pre-warped low-passes and what they make of samples, by scipy.signal.

Run: /usr/bin/python3 test/reference/scripts/discrete_filters.py > test/reference/discrete-filters-scipy.json
"""
import json

import numpy as np
import scipy
from scipy import signal

RATE = 200.0
ORDERS = [1, 2, 3, 5, 8]
CORNERS = [0.2, 3.0, 40.0, 95.0]
SHARES = [0.001, 0.02, 0.1, 0.3, 0.45]


def park_miller(count, state=20011):
    values = []
    for _ in range(count):
        state = 16807 * state % 2147483647
        values.append(state / 2147483647)
    return np.array(values)


n = np.arange(50)
x = park_miller(n.size) - 0.5 + 2 * (n >= 15) + 9.81


def design(family, order, corner):
    if family == "butterworth":
        return signal.butter(order, corner, fs=RATE, output="sos")
    return signal.bessel(order, corner, fs=RATE, output="sos", norm="mag")


def figures(family, order, corner):
    sos = design(family, order, corner)
    _, h = signal.sosfreqz(sos, worN=2 * np.pi * np.array(SHARES))
    filtered, _ = signal.sosfilt(sos, x, zi=signal.sosfilt_zi(sos) * x[0])
    return {
        "family": family,
        "order": order,
        "cornerHz": corner,
        "denominators": sos[:, 4:].tolist(),
        "gain": np.abs(h).tolist(),
        "phase": np.angle(h).tolist(),
        "filtered": filtered.tolist(),
    }


print(
    json.dumps(
        {
            "id": "discrete.filters",
            "quantity": "denominators [a1, a2] of the sections, gain and phase (rad, wrapped) at shares of the rate, samples filtered from the steady state of the first",
            "inputs": {
                "rateHz": RATE,
                "shares": SHARES,
                "x": "u[i] - 0.5 + 9.81, 2 more from i = 15 on, i = 0..49; u = Park-Miller/2147483647, first value after the seed 20011",
            },
            "expected": [figures(family, order, corner) for family in ("butterworth", "bessel") for order in ORDERS for corner in CORNERS],
            "tolerance": {"rel": 1e-9},
            "source": "scipy.signal.butter, bessel(norm=\"mag\"), sosfreqz, sosfilt, sosfilt_zi",
            "provenance": f"computed with scipy {scipy.__version__}",
        }
    )
)
