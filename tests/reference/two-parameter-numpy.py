"""Both variants of the two-parameter valve, written from their published descriptions without a look at src/.

slides_on: Choudhury, Thornhill, Shah 2005, Control Eng. Practice 13:641-658 (stuck since a reversal at x_ss: moves
again when the input is S away from x_ss; stuck without reversal: when it is J away). The form with a tolerance counts
a reversal only when the input has come back by more than it from its extreme, and does not stick on standing still.
sticks_again: He, Wang, Pottmann, Qin 2007, Ind. Eng. Chem. Res. 46:4549-4560, in its form with a force that builds up
(cum = residual + change of input). Both descriptions from memory.

Run: python3 tests/reference/two-parameter-numpy.py   (made with Python 3.11.7, NumPy 2.4.6, SciPy 1.17.1)
It writes two-parameter-numpy.json beside itself.
"""
import json
import platform
from pathlib import Path

import numpy as np
import scipy
from scipy import signal


def slides_on(x, S, J, tolerance):
    y = np.empty(len(x))
    lost = (S - J) / 2
    # At rest with the spring in the middle: as if it had come from below and stopped lost above where it stands.
    stuck, d, x_ss = True, 1.0, x[0] + lost
    pos = x[0]
    for k, u in enumerate(x):
        if not stuck:
            gone = d * (u - x_ss)
            standing_still = gone == 0 and tolerance == 0
            if gone > 0:
                x_ss = u
            stuck = standing_still or gone < -tolerance
            if not stuck:
                pos = u - d * lost
            else:
                pos = x_ss - d * lost
        if stuck:
            on = d * (u - x_ss)
            if on > J:
                stuck, x_ss = False, u
            elif -on > S:
                stuck, d, x_ss = False, -d, u
            if not stuck:
                pos = u - d * lost
        y[k] = pos
    return y


def sticks_again(x, S, J):
    fs, fd = (S + J) / 2, (S - J) / 2
    y = np.empty(len(x))
    residual, pos = 0.0, x[0]
    for k in range(len(x)):
        cum = residual + (x[k] - x[k - 1] if k else 0.0)
        if abs(cum) > fs:
            d = np.sign(cum)
            pos += cum - d * fd
            residual = d * fd
        else:
            residual = cum
        y[k] = pos
    return y


rng = np.random.default_rng(31140)
cases = []
for number in range(6):
    n = 300
    walk = np.cumsum(rng.standard_normal(n)) * 0.4
    smooth = signal.lfilter(*signal.butter(2, 0.08), walk)
    x = np.round(50 + 3 * smooth + [0, 0, 0.05, 0.3, 0, 0][number] * rng.standard_normal(n), 3)
    S = round(float(rng.uniform(0.6, 5)), 3)
    J = round(S * [0.0, 1.0, 0.3, 0.6, 0.1, 0.8][number], 3)
    cases.append(
        {
            "S": S,
            "J": J,
            "op": x.tolist(),
            "slidesOn": slides_on(x, S, J, 0.0).tolist(),
            "slidesOnTolerant": slides_on(x, S, J, 0.02 * S).tolist(),
            "sticksAgain": sticks_again(x, S, J).tolist(),
        }
    )

out = {
    "made": {
        "script": "two-parameter-numpy.py",
        "python": platform.python_version(),
        "numpy": np.__version__,
        "scipy": scipy.__version__,
    },
    "cases": cases,
}
Path(__file__).with_suffix(".json").write_text(json.dumps(out) + "\n")
