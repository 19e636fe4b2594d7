"""The other side of the benchmark: hand-written numpy, the uncertainties package's arrays, and scipy.odr.

Answers requests, one JSON object a line on standard input, with one a line on standard output, so that starting Python is no part of what
is measured and both sides can take turns. A request names a task, a file of float64 columns one after the other, and the rows of one:
{"ask": "results"} writes the task's results to the file "to", {"ask": "seconds", "calls": n} answers with the seconds of one call,
in processor time of the whole process.
"""
import json
import sys
import time

import numpy as np

LN10 = 2.302585092994046


def plain(mg, al, si, smg, sal, ssi):
    """Two ratios, their sigmas and their covariance."""

    def work():
        a = mg / si
        b = al / si
        r = ssi / si
        sa = np.sqrt((smg / si) ** 2 + (a * r) ** 2)
        sb = np.sqrt((sal / si) ** 2 + (b * r) ** 2)
        return a, sa, b, sb, a * b * r * r

    return work


def logarithms(mg, al, si, smg, sal, ssi):
    """The same of the ratios' decadic logarithms."""

    def work():
        a = mg / si
        b = al / si
        rmg, ral, rsi = smg / mg, sal / al, ssi / si
        sa = np.sqrt(rmg**2 + rsi**2) / LN10
        sb = np.sqrt(ral**2 + rsi**2) / LN10
        return np.log10(a), sa, np.log10(b), sb, rsi * rsi / (LN10 * LN10)

    return work


def with_uncertainties(mg, al, si, smg, sal, ssi):
    """Two ratios and their sigmas, without the covariance: the package gives that row by row only."""
    from uncertainties import unumpy

    def work():
        m, a, s = unumpy.uarray(mg, smg), unumpy.uarray(al, sal), unumpy.uarray(si, ssi)
        p, q = m / s, a / s
        return unumpy.nominal_values(p), unumpy.std_devs(p), unumpy.nominal_values(q), unumpy.std_devs(q)

    return work


def odr_explicit(x, y, sx, sy, _):
    """The line with errors on both axes, by scipy.odr's own linear model with its derivatives, started from least squares."""
    from scipy import odr

    start = np.polyfit(x, y, 1)

    def work():
        fit = odr.ODR(odr.RealData(x, y, sx=sx, sy=sy), odr.unilinear, beta0=start).run()
        return fit.beta[:1], fit.beta[1:], np.array([fit.sum_square])

    return work


def odr_implicit(x, y, sx, sy, rho):
    """The line with errors that go together from x to y: the implicit form, a full weight matrix for each point, with derivatives.

    The weight matrices are made beforehand and are no part of the time.
    """
    from scipy import odr

    start = np.polyfit(x, y, 1)[::-1]
    both = np.vstack([x, y])
    covariance = np.array([[sx * sx, rho * sx * sy], [rho * sx * sy, sy * sy]])
    determinant = covariance[0, 0] * covariance[1, 1] - covariance[0, 1] ** 2
    weight = np.array([[covariance[1, 1], -covariance[0, 1]], [-covariance[0, 1], covariance[0, 0]]]) / determinant
    model = odr.Model(
        lambda b, p: p[1] - b[0] - b[1] * p[0],
        fjacb=lambda b, p: np.vstack([-np.ones_like(p[0]), -p[0]]),
        fjacd=lambda b, p: np.vstack([np.full_like(p[0], -b[1]), np.ones_like(p[0])]),
        implicit=True,
    )

    def work():
        problem = odr.ODR(odr.Data(both, 1, wd=weight), model, beta0=start)
        problem.set_job(fit_type=1, deriv=2)
        fit = problem.run()
        return fit.beta[1:], fit.beta[:1], np.array([fit.sum_square])

    return work


tasks = {
    "plain": plain,
    "log": logarithms,
    "uncertainties": with_uncertainties,
    "odr": odr_explicit,
    "odr correlated": odr_implicit,
}
ready = {}


def answer(request):
    key = (request["task"], request["file"])
    if key not in ready:
        ready.clear()
        columns = np.fromfile(request["file"], dtype=np.float64).reshape(-1, request["rows"])
        ready[key] = tasks[request["task"]](*columns)
    work = ready[key]
    if request["ask"] == "results":
        np.concatenate(work()).tofile(request["to"])
        return {}
    calls = request["calls"]
    start = time.process_time()
    for _ in range(calls):
        work()
    return {"seconds": (time.process_time() - start) / calls}


for line in sys.stdin:
    print(json.dumps(answer(json.loads(line))), flush=True)
