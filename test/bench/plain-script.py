"""The same job as `advise`, as it is commonly scripted: python3 plain-script.py QUIET ACTIVE FOLDER [--filtered].

Reads both files with pandas' C reader, takes Welch spectra, looks for peaks, runs a second-order Butterworth low-pass over the
active recording, draws two plots per channel and, where asked, writes the filtered recording as CSV. The bench measures against it.
"""

import os
import sys

import matplotlib

matplotlib.use("Agg")
import matplotlib.pyplot as plt
import numpy as np
import pandas as pd
from scipy import signal

SEGMENT = 16384

quiet_path, active_path, folder = sys.argv[1:4]
quiet = pd.read_csv(quiet_path, engine="c")
active = pd.read_csv(active_path, engine="c")
time = active.iloc[:, 0].to_numpy()
rate = 1 / np.median(np.diff(time))
out = {active.columns[0]: time}
for number, name in enumerate(active.columns[1:]):
    frequency, quiet_density = signal.welch(quiet[name].to_numpy(), rate, "hann", SEGMENT)
    _, active_density = signal.welch(active[name].to_numpy(), rate, "hann", SEGMENT)
    peaks, _ = signal.find_peaks(10 * np.log10(quiet_density[1:]), prominence=10)
    lowest = frequency[1 + peaks[0]] if len(peaks) else rate / 8
    sections = signal.butter(2, lowest / 3, fs=rate, output="sos")
    raw = active[name].to_numpy()
    state = signal.sosfilt_zi(sections) * raw[0]
    filtered, _ = signal.sosfilt(sections, raw, zi=state)
    out[name] = raw
    out[f"{name} filtered"] = filtered

    figure, axes = plt.subplots(figsize=(12, 5))
    axes.loglog(frequency[1:], quiet_density[1:], label="quiet")
    axes.loglog(frequency[1:], active_density[1:], label="active")
    axes.plot(frequency[1 + peaks], quiet_density[1 + peaks], "v")
    axes.legend()
    figure.savefig(os.path.join(folder, f"spectra-{number}.png"))
    plt.close(figure)

    figure, axes = plt.subplots(figsize=(12, 5))
    axes.plot(time, raw, label="before")
    axes.plot(time, filtered, label="behind")
    axes.legend()
    figure.savefig(os.path.join(folder, f"trace-{number}.png"))
    plt.close(figure)
if "--filtered" in sys.argv:
    pd.DataFrame(out).to_csv(os.path.join(folder, "filtered.csv"), index=False, float_format="%.9g")
