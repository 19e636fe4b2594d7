"""The hand-written calculation that the engine is measured against: two ratios, their sigmas and their covariance.

Reads from the file named first the columns Mg, Al, Si and their sigmas as float64, one after the other; prints one JSON object with the
median seconds of one call and the sums of the results, so that both sides are seen to calculate the same thing.
"""
import json
import statistics
import sys
import time

import numpy as np

path, rows, kind = sys.argv[1], int(sys.argv[2]), sys.argv[3]
mg, al, si, smg, sal, ssi = np.fromfile(path, dtype=np.float64).reshape(6, rows)
LN10 = 2.302585092994046


def plain():
    a = mg / si
    b = al / si
    r = ssi / si
    sa = np.sqrt((smg / si) ** 2 + (a * r) ** 2)
    sb = np.sqrt((sal / si) ** 2 + (b * r) ** 2)
    return a, sa, b, sb, a * b * r * r


def logarithms():
    a = mg / si
    b = al / si
    rmg, ral, rsi = smg / mg, sal / al, ssi / si
    sa = np.sqrt(rmg ** 2 + rsi ** 2) / LN10
    sb = np.sqrt(ral ** 2 + rsi ** 2) / LN10
    return np.log10(a), sa, np.log10(b), sb, rsi * rsi / (LN10 * LN10)


def with_uncertainties():
    from uncertainties import unumpy

    m, a, s = unumpy.uarray(mg, smg), unumpy.uarray(al, sal), unumpy.uarray(si, ssi)
    p, q = m / s, a / s
    return unumpy.nominal_values(p), unumpy.std_devs(p), unumpy.nominal_values(q), unumpy.std_devs(q)


work = {"plain": plain, "log": logarithms, "uncertainties": with_uncertainties}[kind]


def timed(calls):
    start = time.perf_counter()
    for _ in range(calls):
        work()
    return time.perf_counter() - start


calls = 1
while timed(calls) < 0.04 and kind != "uncertainties":
    calls *= 2
rounds = 3 if kind == "uncertainties" else 5
print(json.dumps({"seconds": statistics.median(timed(calls) / calls for _ in range(rounds)), "sums": [float(np.sum(x)) for x in work()]}))
