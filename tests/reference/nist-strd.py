"""Checks the certified values kept in nist-strd.json against exact rational arithmetic (no rounding at all).

Run: python3 tests/reference/nist-strd.py   (standard library only; written on Python 3.11.7)
It prints the smallest number of agreeing significant digits of each set, and fails below 13.
"""
import json
import math
from fractions import Fraction
from pathlib import Path

sets = json.loads(Path(__file__).with_suffix(".json").read_text())["sets"]


def exact(x):
    return Fraction(repr(x))


def inverse(a):
    n = len(a)
    m = [row[:] + [Fraction(int(i == j)) for j in range(n)] for i, row in enumerate(a)]
    for i in range(n):
        p = next(r for r in range(i, n) if m[r][i] != 0)
        m[i], m[p] = m[p], m[i]
        m[i] = [v / m[i][i] for v in m[i]]
        for r in range(n):
            if r != i and m[r][i] != 0:
                m[r] = [v - m[r][i] * w for v, w in zip(m[r], m[i])]
    return [row[n:] for row in m]


def digits(got, want):
    return 99 if got == want else -math.log10(abs(got - want) / abs(want))


for s in sets:
    columns = [list(map(exact, c)) for c in s["columns"]]
    y = list(map(exact, s["y"]))
    n = len(y)
    powers = [[v**p for v in c] for c in columns for p in range(1, s["degree"] + 1)]
    design = [[Fraction(1)] * n] + powers
    normal = inverse([[sum(a * b for a, b in zip(u, v)) for v in design] for u in design])
    right = [sum(a * b for a, b in zip(u, y)) for u in design]
    beta = [sum(a * b for a, b in zip(row, right)) for row in normal]
    residual = [y[i] - sum(b * u[i] for b, u in zip(beta, design)) for i in range(n)]
    squares = sum(r * r for r in residual)
    sigma2 = squares / (n - len(design))
    centre = sum(y) / n
    total = sum((v - centre) ** 2 for v in y)
    got = [float(b) for b in beta]
    got += [math.sqrt(sigma2 * normal[i][i]) for i in range(len(design))]
    got += [math.sqrt(sigma2), float(1 - squares / total)]
    c = s["certified"]
    want = c["coefficients"] + c["standardErrors"] + [c["residualDeviation"], c["rSquared"]]
    worst = min(digits(g, w) for g, w in zip(got, want))
    print(s["name"], "agrees to", round(worst, 1), "digits")
    assert worst > 13, s["name"]
