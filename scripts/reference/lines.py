"""Lines without errors of their points, and NIST's data sets with certified values."""

import warnings

import numpy
import scipy.stats

from recording import draws, normal, record, rounded

# NIST Statistical Reference Datasets, Norris.dat (linear regression, lower level of difficulty): y, x.
norris = """0.1 0.2|338.8 337.4|118.1 118.2|888.0 884.6|9.2 10.1|228.1 226.5|668.5 666.3|998.5 996.3|449.1 448.6|778.9 777.0|559.2 558.2
0.3 0.4|0.1 0.6|778.1 775.5|668.8 666.9|339.3 338.0|448.9 447.5|10.8 11.6|557.7 556.0|228.3 228.1|998.0 995.8|888.8 887.6
119.6 120.2|0.3 0.3|0.6 0.3|557.6 556.8|339.3 339.1|888.0 887.2|998.5 999.0|778.9 779.0|10.2 11.1|117.6 118.3|228.9 229.2
668.4 669.1|449.2 448.9|0.2 0.5"""
certified = {
    "slope": 1.00211681802045,
    "intercept": -0.262323073774029,
    "sigma slope": 0.429796848199937e-03,
    "sigma intercept": 0.232818234301152,
    "residual sd": 0.884796396144373,
}


def exact_line(x, y):
    """Ordinary least squares and its sigmas in rational arithmetic, square roots last."""
    from fractions import Fraction
    from decimal import Decimal, getcontext

    getcontext().prec = 50
    fx, fy = [Fraction(repr(v)) for v in x], [Fraction(repr(v)) for v in y]
    n = len(fx)
    mx, my = sum(fx) / n, sum(fy) / n
    xx = sum((v - mx) ** 2 for v in fx)
    slope = sum((v - mx) * (w - my) for v, w in zip(fx, fy)) / xx
    height = my - slope * mx
    variance = sum((w - height - slope * v) ** 2 for v, w in zip(fx, fy)) / (n - 2)
    root = lambda f: float((Decimal(f.numerator) / Decimal(f.denominator)).sqrt())
    return {
        "slope": float(slope),
        "intercept": float(height),
        "sigma slope": root(variance / xx),
        "sigma intercept": root(variance / n + mx * mx * variance / xx),
        "residual sd": root(variance),
    }


def theil_sen(x, y):
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        slope, height, low, high = scipy.stats.theilslopes(y, x, 0.95, method="joint")
    return {"slope": float(slope), "intercept": float(height), "low": float(low), "high": float(high)}


def random_set(source):
    n = 6 + int(source.random() * 25)
    b, a = 4 * source.random() - 2, 10 * source.random() - 5
    x = [rounded(20 * source.random() - 10) for _ in range(n)]
    y = [rounded(a + b * v + normal(source)) for v in x]
    by_scipy = scipy.stats.linregress(x, y)
    found = {
        "slope": float(by_scipy.slope),
        "intercept": float(by_scipy.intercept),
        "sigma slope": float(by_scipy.stderr),
        "sigma intercept": float(by_scipy.intercept_stderr),
    }
    pairs = sorted((y[j] - y[i]) / (x[j] - x[i]) for i in range(n) for j in range(i + 1, n) if x[i] != x[j])
    return {"given": {"x": x, "y": y}, "linregress": found, "exact": exact_line(x, y), "theilslopes": theil_sen(x, y), "pairs": len(pairs)}


if __name__ == "__main__":
    seed = 19680001
    source = draws(seed)
    y, x = (list(column) for column in zip(*(map(float, pair.split()) for pair in norris.replace("\n", "|").split("|"))))
    cases = [{"id": "NIST Norris", "given": {"x": x, "y": y}, "certified": certified, "exact": exact_line(x, y), "theilslopes": theil_sen(x, y)}]
    cases += [{"id": f"random {k + 1}", **random_set(source)} for k in range(50)]
    record(
        f"Ordinary least squares and Theil-Sen; random sets from seed {seed}.",
        [
            "certified: NIST Statistical Reference Datasets, Norris.dat, https://www.itl.nist.gov/div898/strd/lls/data/Norris.shtml, typed from the published table.",
            "exact: rational arithmetic on the decimal numbers. linregress, theilslopes (intercept 'joint': median of y - slope x): scipy.stats.",
        ],
        {"relative": 1e-11, "absolute": 1e-12, "why": "scipy's sums are in double precision, and their order differs between versions."},
        cases,
    )
