#!/usr/bin/env python3
"""The sweep of `curve_240_and_landmarks` in numpy, for comparison: 240 target radii, direct, dip and loop, with the split of
a plane change found on a grid (two burns) and by coordinate refinement (three burns), the cheapest direct radius and the
crossovers, refined as the program refines them. Prints the median time of one sweep, and of its 240
costs alone. Run beside `cargo bench -- curve_240`; costs agree with the engine's to 1e-11."""

import statistics
import sys
import time

import numpy as np

GM, V_INF, Q, LOOP = 4902.8, 0.85, 1837.4, 25737.4


def costs(r, turn):
    vh = lambda x: np.sqrt(V_INF**2 + 2 * GM / x)
    vp = lambda a, b: np.sqrt(2 * GM * b / (a * (a + b)))
    va = lambda a, b: np.sqrt(2 * GM * a / (b * (a + b)))
    dv = lambda u, w, angle: np.sqrt(np.maximum(u * u + w * w - 2 * u * w * np.cos(angle), 0))
    direct = dv(vh(r), np.sqrt(GM / r), turn)
    dip = [(np.full_like(r, vh(Q)), vp(Q, r)), (va(Q, r), np.sqrt(GM / r))]
    loop = [
        (np.full_like(r, vh(Q)), np.full_like(r, vp(Q, LOOP))),
        (np.full_like(r, va(Q, LOOP)), va(r, LOOP)),
        (vp(r, LOOP), np.sqrt(GM / r)),
    ]
    if turn == 0:
        total = lambda burns: sum(np.abs(u - w) for u, w in burns)
        return direct, total(dip), total(loop)
    first = np.zeros((1, len(r)))
    width = turn
    for _ in range(6):  # grid, shrunk round its best node
        grid = np.clip(first + width * np.linspace(-1, 1, 41)[:, None], 0, turn)
        value = dv(*dip[0], grid) + dv(*dip[1], turn - grid)
        first = np.take_along_axis(grid, value.argmin(0)[None], 0)
        width *= 0.06
    best_dip = value.min(0)
    a = np.zeros((1, len(r)))
    b = np.zeros((1, len(r)))
    width = turn
    for _ in range(6):
        steps = width * np.linspace(-1, 1, 21)
        ga = np.clip(a + steps[:, None], 0, turn)[:, None, :]
        gb = np.clip(b + steps[:, None], 0, turn)[None, :, :]
        gc = turn - ga - gb
        value = dv(*loop[0], ga) + dv(*loop[2], gb) + dv(*loop[1], gc) + np.where(gc < 0, 1e9, 0)
        at = value.reshape(-1, len(r)).argmin(0)
        i, j = np.divmod(at, 21)
        a = np.take_along_axis(ga[:, 0, :], i[None], 0)
        b = np.take_along_axis(gb[0], j[None], 0)
        width *= 0.12
    return direct, best_dip, value.min((0, 1))


def bisected(turn, pair, low, high):
    gap = lambda r: (lambda c: c[pair[0]][0] - c[pair[1]][0])(costs(np.array([r]), turn))
    start = gap(low) < 0
    for _ in range(50):
        middle = 0.5 * (low + high)
        if (gap(middle) < 0) == start:
            low = middle
        else:
            high = middle
    return 0.5 * (low + high)


def golden(turn, low, high):
    cost = lambda r: costs(np.array([r]), turn)[0][0]
    ratio = 0.5 * (np.sqrt(5) - 1)
    c, d = high - ratio * (high - low), low + ratio * (high - low)
    fc, fd = cost(c), cost(d)
    for _ in range(35):  # to the square root of the rounding error, as far as comparing values goes
        if fc < fd:
            high, d, fd = d, c, fc
            c = high - ratio * (high - low)
            fc = cost(c)
        else:
            low, c, fc = c, d, fd
            d = low + ratio * (high - low)
            fd = cost(d)
    return 0.5 * (low + high)


def sweep(turn):
    """The 240 costs of each way, the cheapest direct radius and every crossover, refined."""
    r = np.geomspace(Q + 1, LOOP, 240)
    direct, dip, loop = costs(r, turn)
    winner = np.argmin([direct, dip, loop], axis=0)
    crossovers = [
        bisected(turn, (winner[k], winner[k + 1]), r[k], r[k + 1]) for k in np.flatnonzero(np.diff(winner))
    ]
    k = int(np.clip(direct.argmin(), 1, 238))
    return golden(turn, r[k - 1], r[k + 1]), crossovers


def median_ms(work):
    times = []
    for _ in range(int(sys.argv[1]) if len(sys.argv) > 1 else 30):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return 1e3 * statistics.median(times)


for turn in (0.0, np.radians(28.5)):
    radii = np.geomspace(Q + 1, LOOP, 240)
    print(
        f"turn {np.degrees(turn):5.1f} deg: median {median_ms(lambda: sweep(turn)):8.3f} ms, "
        f"of which the costs alone (as `curve_240`) {median_ms(lambda: costs(radii, turn)):8.3f} ms"
    )
