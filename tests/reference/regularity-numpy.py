"""Regularity of Thornhill, Huang and Zhang (2003) computed with NumPy alone, for src/oscillation/regularity.ts.

The autocorrelation of the filtered signal is summed directly from a filtered signal here, not taken from the spectrum.
Run: python3 tests/reference/regularity-numpy.py   (made with Python 3.11.7, NumPy 2.4.6)
It writes regularity-numpy.json beside itself.
"""
import json
import platform
from pathlib import Path

import numpy as np

rng = np.random.default_rng(7)


def regularity(x, frequency, size):
    k = np.fft.fftfreq(size) * size
    with np.errstate(divide="ignore"):
        away = np.abs(np.log(np.abs(k) / (frequency * size))) / np.log(1.35)
    weight = np.where(away <= 1, 1.0, np.where(away >= 2, 0.0, 0.5 + 0.5 * np.cos(np.pi * (away - 1))))
    filtered = np.fft.ifft(np.fft.fft(x, size) * np.sqrt(weight)).real
    lags = np.arange(int(np.ceil(8 / frequency)) + 1)
    acf = np.array([np.dot(filtered, np.roll(filtered, -lag)) for lag in lags])
    acf /= acf[0]
    crossings = []
    for i in range(1, len(acf)):
        if (acf[i - 1] > 0) != (acf[i] > 0) and len(crossings) < 11 and i <= 0.8 * len(x):
            crossings.append(i - 1 + acf[i - 1] / (acf[i - 1] - acf[i]))
    periods = 2 * np.diff(crossings)
    return {
        "period": float(periods.mean()),
        "value": float(periods.mean() / (3 * periods.std(ddof=1))),
        "autocorrelation": acf.tolist(),
    }


cases = []
for n, period, noise in ((300, 23.7, 1.0), (256, 31.0, 0.4)):
    t = np.arange(n)
    x = np.round(np.sin(2 * np.pi * (t / period + 0.05 * np.cumsum(rng.standard_normal(n)) / 5)) + noise * rng.standard_normal(n), 6)
    size = 1
    while size < 2 * n:
        size *= 2
    cases.append({"x": x.tolist(), "frequency": 1 / period, "want": regularity(x, 1 / period, size)})

out = {"made": {"script": "regularity-numpy.py", "python": platform.python_version(), "numpy": np.__version__}, "cases": cases}
Path(__file__).with_suffix(".json").write_text(json.dumps(out, indent=1) + "\n")
