"""Reference values for src/signal from SciPy and NumPy, which share no code with it.

Run: python3 tests/reference/signal-scipy.py   (made with Python 3.11.7, NumPy 2.4.6, SciPy 1.17.1)
It writes signal-scipy.json beside itself.
"""
import json
import platform
from pathlib import Path

import numpy as np
import scipy
from scipy import fft, signal, stats

rng = np.random.default_rng(31104)
n = 90
t = np.arange(n)
a = np.round(np.sin(2 * np.pi * t / 18.3) + 0.4 * rng.standard_normal(n) + 0.01 * t + 5, 6)
b = np.round(np.roll(a, 4) + 0.3 * rng.standard_normal(n) - 2, 6)


def correlation(u, v, max_lag):
    u = u - u.mean()
    v = v - v.mean()
    full = signal.correlate(v, u, mode="full", method="direct") / np.sqrt((u * u).sum() * (v * v).sum())
    zero = len(u) - 1
    return full[zero - max_lag : zero + max_lag + 1].tolist()


def spectrum(u):
    x = np.fft.rfft(u)
    return {"length": len(u), "re": x.real.tolist(), "im": x.imag.tolist()}


def mirrored_band_pass(u, period, low, high):
    """The mirror image beyond the last sample is what the discrete cosine transform of type 2 assumes."""
    c = fft.dct(u, type=2)
    f = np.arange(len(u)) / (2 * len(u) * period)
    slow = np.where(f > 0, 1 / (1 + (low / np.where(f > 0, f, 1)) ** 4), 1.0 if low == 0 else 0.0)
    return fft.idct(c * slow / (1 + (f / high) ** 4), type=2).tolist()


def lag(u, period, tau):
    """Zero-order hold discretisation of 1 / (tau s + 1) by SciPy, started at rest at u[0]."""
    num, den, _ = signal.cont2discrete(([1.0], [tau, 1.0]), period, method="zoh")
    num = np.ravel(num)
    zi = signal.lfilter_zi(num, den) * u[0]
    return signal.lfilter(num, den, u, zi=zi)[0].tolist()


frequency, density = signal.periodogram(a, fs=0.5, detrend=False, scaling="spectrum")
power = density.copy()
power[0] = np.mean(a) ** 2

probabilities = [0.005, 0.05, 0.5, 0.9, 0.975, 0.999]
points = [0.3, 1.0, 2.5, 6.0]
out = {
    "made": {"script": "signal-scipy.py", "python": platform.python_version(), "numpy": np.__version__, "scipy": scipy.__version__},
    "a": a.tolist(),
    "b": b.tolist(),
    "transforms": [spectrum(a), spectrum(a[:64]), spectrum(a[:37]), spectrum(a[:1])],
    "power": {"frequency": frequency.tolist(), "power": power.tolist()},
    "autocorrelation": correlation(a, a, 40)[40:],
    "crossCorrelation": correlation(a, b, 40),
    "bandPass": mirrored_band_pass(a, 2.0, 0.01, 0.08),
    "lowPass": mirrored_band_pass(a, 2.0, 0.0, 0.05),
    "lag": lag(a, 2.0, 7.5),
    "savitzkyGolay": [signal.savgol_filter(a, 11, 3, deriv=d, mode="interp").tolist() for d in (0, 1, 2)],
    "removeLine": signal.detrend(a).tolist(),
    "quantiles": [float(np.quantile(a, p)) for p in (0, 0.1, 0.25, 0.5, 0.77, 1)],
    "variance": float(np.var(a, ddof=1)),
    "distributions": {
        "probabilities": probabilities,
        "points": points,
        "normal": {"quantile": stats.norm.ppf(probabilities).tolist(), "tail": stats.norm.sf(points).tolist()},
        "studentT": [
            {"degrees": d, "quantile": stats.t.ppf(probabilities, d).tolist(), "tail": stats.t.sf(points, d).tolist()}
            for d in (2, 7, 60)
        ],
        "chiSquare": [
            {"degrees": d, "quantile": stats.chi2.ppf(probabilities, d).tolist(), "tail": stats.chi2.sf(points, d).tolist()}
            for d in (1, 6, 40)
        ],
        "f": [
            {"degrees": list(d), "quantile": stats.f.ppf(probabilities, *d).tolist(), "tail": stats.f.sf(points, *d).tolist()}
            for d in ((1, 5), (4, 30), (12, 7))
        ],
    },
}
Path(__file__).with_suffix(".json").write_text(json.dumps(out, indent=1) + "\n")
