"""Bicoherence, phase surrogates and self prediction by NumPy and SciPy, for src/signal/bispectrum.ts and surrogate.ts.

Written from the definitions with other means: whole Fourier transforms instead of half ones, all pairwise distances
and a full sort instead of running sums and insertion.
Run: python3 tests/reference/nonlinearity-numpy.py   (made with Python 3.11.7, NumPy 2.4.6, SciPy 1.17.1)
It writes nonlinearity-numpy.json beside itself.
"""
import json
import platform
from pathlib import Path

import numpy as np
import scipy
from scipy.signal import windows
from scipy.spatial.distance import cdist

rng = np.random.default_rng(20240131)
n = 240
t = np.arange(n)
x = np.round(np.sin(2 * np.pi * t / 12) + 0.4 * np.sin(2 * np.pi * t / 12) ** 2 + 0.3 * rng.standard_normal(n), 6)


def bicoherence(x, length):
    window = windows.hann(length, sym=False)
    starts = range(0, len(x) - length + 1, length // 2)
    spectra = np.array([np.fft.fft((x[s : s + length] - x[s : s + length].mean()) * window) for s in starts])
    first, second, squared = [], [], []
    for k in range(1, length // 2 + 1):
        for l in range(1, k + 1):
            if k + l > length // 2:
                continue
            pair = spectra[:, k] * spectra[:, l]
            third = spectra[:, k + l]
            triple = (pair * third.conj()).mean()
            first.append(k / length)
            second.append(l / length)
            squared.append(abs(triple) ** 2 / ((abs(pair) ** 2).mean() * (abs(third) ** 2).mean()))
    return {"segment": length, "segments": len(spectra), "first": first, "second": second, "squared": squared}


def surrogate(x, phases):
    spectrum = np.fft.fft(x)
    turn = np.zeros(len(x))
    m = len(phases)
    turn[1 : m + 1] = phases
    turn[-m:] = -phases[::-1]
    return np.fft.ifft(spectrum * np.exp(1j * turn)).real


def prediction_error(x, embedding, neighbours):
    count = len(x) - 2 * embedding + 1
    stretches = np.array([x[i : i + embedding] for i in range(count)])
    target = x[2 * embedding - 1 :]
    distance = cdist(stretches, stretches)
    index = np.arange(count)
    distance[abs(index[:, None] - index[None, :]) <= embedding] = np.inf
    nearest = np.argsort(distance, axis=1, kind="stable")[:, :neighbours]
    return float(np.sqrt(np.mean((target - target[nearest].mean(axis=1)) ** 2)))


def surrogate_case(x):
    phases = np.round(rng.uniform(0, 2 * np.pi, (len(x) - 1) // 2), 6)
    return {"length": len(x), "phases": phases.tolist(), "surrogate": surrogate(x, phases).tolist()}


out = {
    "made": {"script": "nonlinearity-numpy.py", "python": platform.python_version(), "numpy": np.__version__, "scipy": scipy.__version__},
    "x": x.tolist(),
    "bicoherence": bicoherence(x, 32),
    "surrogates": [surrogate_case(x), surrogate_case(x[:151])],
    "prediction": [
        {"embedding": e, "neighbours": k, "error": prediction_error(x, e, k)} for e, k in ((12, 8), (7, 3), (1, 1))
    ],
}
Path(__file__).with_suffix(".json").write_text(json.dumps(out, indent=1) + "\n")
