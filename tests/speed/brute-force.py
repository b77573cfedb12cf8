"""The search of brute-force.c as one would write it with NumPy: all pairs of S and J at once, sample by sample.

Reads and prints the same.
"""

import sys
import time

import numpy as np


def walk(op, S, J, rest, slides_on, tolerance, blend):
    """Travel of every pair, one row a sample."""
    break_at, behind = (S + J) / 2, (S - J) / 2
    at = rest.copy()
    extreme = np.zeros(S.size)
    direction = np.zeros(S.size)
    travel = np.empty((op.size, S.size))
    for k, u in enumerate(op):
        ahead = direction * (u - extreme)
        sliding = direction != 0
        goes_on = sliding & (ahead >= -tolerance)
        stops = sliding & ~goes_on
        extreme = np.where(goes_on & (ahead > 0), u, extreme)
        at = np.where(goes_on, u - direction * behind, np.where(stops, extreme - direction * behind, at))
        direction = np.where(stops, 0, direction)
        breaks = ~goes_on & ((u > at + break_at) | (u < at - break_at))
        side = np.where(u > at, 1.0, -1.0)
        if slides_on:
            at = np.where(breaks, u - side * behind, at)
            direction = np.where(breaks, side, direction)
            extreme = np.where(breaks, u, extreme)
        else:
            landing = (1 - blend) * (u - side * behind) + blend * (at + side * J)
            at = np.where(breaks, landing, at)
        travel[k] = at
    return travel


def filtered(moves, pole):
    """Moves of every pair through the lag and the disturbance filter."""
    x, y, z = (np.zeros(moves.shape[1]) for _ in range(3))
    out = np.empty_like(moves)
    for k, move in enumerate(moves):
        x = pole[0] * x + (1 - pole[0]) * move
        y = pole[1] * y + x
        z = pole[2] * z + y if pole.size == 3 else y
        out[k] = z
    return out


def main():
    data = np.frombuffer(sys.stdin.buffer.read())
    samples, order, lags, delays, pairs = data[:5].astype(int)
    tolerance, blend, gain_low, gain_high = data[5:9]
    ends = np.cumsum([9, lags * order, delays, pairs, pairs, pairs, samples, samples])
    poles, delay, S, J, rest, target, op = np.split(data, ends[:-1])[1:8]
    poles, delay = poles.reshape(lags, order), delay.astype(int)

    start = time.perf_counter()
    power = target @ target
    shifted = np.zeros((samples, delays))
    for d, by in enumerate(delay):
        shifted[: samples - by, d] = target[by:]
    found = []
    for variant in range(2):
        travel = walk(op, S, J, rest, variant == 0, tolerance * S, blend)
        moves = np.diff(travel, axis=0, prepend=travel[:1])
        best = np.ones(pairs)
        where = np.zeros((pairs, 2), dtype=int)
        gains = np.zeros(pairs)
        for lag in range(lags):
            x = filtered(moves, poles[lag])
            dots = x.T @ shifted
            whole = np.einsum("kp,kp->p", x, x)
            for d, by in enumerate(delay):
                tail = x[samples - by :]
                energy = whole - np.einsum("kp,kp->p", tail, tail)
                dot = dots[:, d]
                usable = (energy > 1e-12) & (dot > 0)
                gain = np.clip(np.divide(dot, energy, out=np.zeros(pairs), where=usable), gain_low, gain_high)
                misfit = np.where(usable, 1 - gain * (2 * dot - gain * energy) / power, 1)
                better = misfit < best
                best = np.where(better, misfit, best)
                where[better] = lag, d
                gains = np.where(better, gain, gains)
        found.append((best, where, gains))
    seconds = time.perf_counter() - start

    for variant, (best, where, gains) in enumerate(found):
        for pair in range(pairs):
            print(variant, pair, repr(float(best[pair])), *where[pair], repr(float(gains[pair])))
    print(f"{seconds:.9f}")


main()
