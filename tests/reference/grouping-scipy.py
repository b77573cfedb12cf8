"""Reference values for the grouping of loops in src/audit from SciPy and NumPy, which share no code with it.

Run: python3 tests/reference/grouping-scipy.py   (made with Python 3.11.7, NumPy 2.4.6, SciPy 1.17.1)
It writes grouping-scipy.json beside itself.

Twelve made-up signals of other sample periods and lengths: three families of one cycle each, and loners. The spectrum is
SciPy's periodogram (Hann window, straight line taken off), summed into the bands by NumPy's interpolation of its running
sum; likeness is 1 minus SciPy's cosine distance; clusters are SciPy's average linkage, also on a matrix of scattered numbers.
"""
import json
import platform
from pathlib import Path

import numpy as np
import scipy
from scipy import ndimage, signal
from scipy.cluster import hierarchy
from scipy.spatial import distance

PER_OCTAVE = 24
rng = np.random.default_rng(31201)


def made(samples, dt, period, noise, corners, drift):
    t = np.arange(samples) * dt
    wave = np.sin(2 * np.pi * t / period + rng.uniform(0, 6))
    wave += corners * np.sin(6 * np.pi * t / period)
    walk = drift * np.cumsum(rng.standard_normal(samples)) / np.sqrt(samples)
    return np.round(wave + noise * rng.standard_normal(samples) + walk + 0.002 * t, 4)


plans = [
    (600, 2, 60, 0.1, 0.2, 0.3), (450, 3, 60, 0.3, 0.0, 0.1), (800, 1.5, 60.3, 0.2, 0.1, 0.5), (300, 4, 60.1, 0.4, 0.0, 0.2),
    (500, 2, 95, 0.1, 0.3, 0.1), (400, 3, 95, 0.5, 0.0, 0.6), (700, 2, 94.6, 0.2, 0.1, 0.2),
    (350, 5, 210, 0.1, 0.0, 0.1), (600, 3, 210, 0.3, 0.2, 0.4),
    (512, 2, 33, 0.2, 0.1, 0.1), (640, 2, 130, 0.4, 0.0, 0.8), (512, 2, 72, 1.5, 0.0, 0.5),
]
signals = [(dt, made(n, dt, *rest)) for n, dt, *rest in plans]
periods = [plan[2] for plan in plans]


def bands(dt, values):
    n = len(values)
    _, power = signal.periodogram(values, fs=1 / dt, window="hann", detrend="linear", scaling="spectrum")
    width = 1 / (n * dt)
    power = np.concatenate([[0.0], power[1:]])
    edges_of_lines = (np.arange(len(power) + 1) - 0.5) * width
    running = np.concatenate([[0.0], np.cumsum(power)])
    first = int(np.floor(PER_OCTAVE * np.log2(0.5 * width)))
    last = int(np.floor(PER_OCTAVE * np.log2((len(power) - 0.5) * width)))
    edges = 2.0 ** (np.arange(first, last + 2) / PER_OCTAVE)
    shares = np.diff(np.interp(edges, edges_of_lines, running)) / running[-1]
    return first, shares


def likeness(i, j):
    (fi, si), (fj, sj) = spectra[i], spectra[j]
    slowest = 1 / (2.5 * max(periods[i], periods[j]))
    first = max(fi, fj, int(np.ceil(PER_OCTAVE * np.log2(slowest))))
    end = min(fi + len(si), fj + len(sj))

    def blurred(f, s):
        wide = ndimage.convolve1d(s, [1, 2, 3, 2, 1], mode="constant") / 9
        return wide[first - f : end - f]

    return 1 - distance.cosine(blurred(fi, si), blurred(fj, sj))


spectra = [bands(dt, values) for dt, values in signals]
count = len(signals)
alike = np.array([[1.0 if i == j else likeness(i, j) for j in range(count)] for i in range(count)])
alike = (alike + alike.T) / 2


def clusters(matrix, cuts):
    tree = hierarchy.linkage(distance.squareform(1 - matrix, checks=False), method="average")
    return [
        {"least": least, "labels": hierarchy.fcluster(tree, 1 - least, criterion="distance").tolist()} for least in cuts
    ]


# Likeness without any order, so that the clusters depend on every average.
scatter = np.round(np.triu(rng.uniform(0, 1, (20, 20)), 1), 4)
scatter = scatter + scatter.T + np.eye(20)
out = {
    "made": {"script": "grouping-scipy.py", "python": platform.python_version(), "numpy": np.__version__, "scipy": scipy.__version__},
    "periods": periods,
    "signals": [{"samplePeriod": dt, "values": values.tolist()} for dt, values in signals],
    "spectra": [{"firstBand": f, "shares": np.round(s, 8).tolist()} for f, s in spectra],
    "likeness": np.round(alike, 8).tolist(),
    "clusters": clusters(alike, (0.95, 0.8, 0.5, 0.2, 0.05)),
    "scatter": {"likeness": scatter.tolist(), "clusters": clusters(scatter, (0.9, 0.8, 0.7, 0.6, 0.55, 0.5))},
}
text = json.dumps(out)
Path(__file__).with_suffix(".json").write_text(text + "\n")
