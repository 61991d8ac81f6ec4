"""Writes welch-scipy.json: one-sided densities by scipy.signal.welch, full precision, at two segment lengths and over two runs.

Run: python3 test/reference/scripts/welch_levels.py > test/reference/welch-scipy.json
"""
import json

import numpy as np
import scipy
from scipy import signal

RATE = 250.0


def park_miller(count, state=20011):
    values = []
    for _ in range(count):
        state = 16807 * state % 2147483647
        values.append(state / 2147483647)
    return np.array(values)


n = np.arange(6000)
x = park_miller(n.size) - 0.5 + 0.8 * np.sin(2 * np.pi * 31.3 * n / RATE) + 1e-4 * n + 9.81


def density(samples, segment):
    return signal.welch(samples, fs=RATE, window="hann", nperseg=segment, noverlap=segment // 2, detrend="constant", scaling="density")[1]


def over_runs(runs, segment):
    """Mean over all segments of all runs: what a record with a gap must give."""
    counts = [(len(run) - segment // 2) // (segment // 2) for run in runs]
    parts = [density(run, segment) * count for run, count in zip(runs, counts)]
    return sum(counts), sum(parts) / sum(counts)


whole = {str(segment): list(map(float, density(x, segment))) for segment in (256, 1024)}
segments, gapped = over_runs([x[:1700], x[1700:]], 256)
print(
    json.dumps(
        {
            "id": "welch.scipy",
            "quantity": "one-sided density, Hann (periodic), 50 % overlap, constant detrend",
            "inputs": {
                "rateHz": RATE,
                "x": "u[i] - 0.5 + 0.8 sin(2 pi 31.3 i/250) + 1e-4 i + 9.81, i = 0..5999; u = Park-Miller/2147483647, first value after the seed 20011",
                "runs": "0..1699 and 1700..5999",
            },
            "expected": {"whole": whole, "runs256": {"segments": segments, "density": list(map(float, gapped))}},
            "tolerance": {"rel": 1e-9},
            "source": "scipy.signal.welch",
            "provenance": f"computed with scipy {scipy.__version__}, numpy {np.__version__}",
        }
    )
)
