"""Means, medians, deviations, weighted means and means by class."""

import numpy

from recording import draws, normal, record, rounded


def summary(values):
    x = numpy.array(values)
    n = len(x)
    sd = numpy.std(x, ddof=1)
    return {
        "mean": float(numpy.mean(x)),
        "median": float(numpy.median(x)),
        "sd": float(sd),
        "se": float(sd / numpy.sqrt(n)),
        "sigma median": float(numpy.sqrt(numpy.pi / 2) * sd / numpy.sqrt(n)),
        "sigma sd": float(sd / numpy.sqrt(2 * (n - 1))),
    }


def weighted(values, sigmas):
    x, s = numpy.array(values), numpy.array(sigmas)
    mean, total = numpy.average(x, weights=s ** -2, returned=True)
    mswd = numpy.sum(((x - mean) / s) ** 2) / (len(x) - 1)
    return {"value": float(mean), "internal": float(total ** -0.5), "external": float((mswd / total) ** 0.5), "mswd": float(mswd)}


def table(source):
    """Three classes of 3 to 12 samples; a and b are ratios over one denominator, so their means hang together."""
    rows = []
    for name in ("K", "L", "M"):
        level = 0.5 + source.random()
        for _ in range(3 + int(source.random() * 10)):
            common = 0.05 * normal(source)
            a, b = level + common + 0.03 * normal(source), 2 * level + 1.5 * common + 0.04 * normal(source)
            rows.append((name, rounded(a), rounded(0.01 + 0.05 * source.random()), rounded(b), rounded(0.02 + 0.05 * source.random())))
    groups, a, sa, b, sb = (list(column) for column in zip(*rows))
    chosen = {name: [i for i, g in enumerate(groups) if g == name] for name in ("K", "L", "M")}
    pick = lambda column, rows: [column[i] for i in rows]
    whole = numpy.cov(a, b)[0, 1] / len(a)
    ma, mb = numpy.mean(a), numpy.mean(b)
    va, vb = numpy.var(a, ddof=1) / len(a), numpy.var(b, ddof=1) / len(b)
    # First order: var(A/B) = (A/B)^2 (var A / A^2 + var B / B^2 - 2 cov / (A B)).
    ratio = ma / mb
    sigma = abs(ratio) * numpy.sqrt(va / ma ** 2 + vb / mb ** 2 - 2 * whole / (ma * mb))
    return {
        "given": {"class": groups, "a": a, "sigma a": sa, "b": b, "sigma b": sb},
        "a": summary(a),
        "weighted a": weighted(a, sa),
        "ratio of means": {"value": float(ratio), "sigma": float(sigma)},
        "by class": {name: {**summary(pick(a, rows)), "weighted": weighted(pick(a, rows), pick(sa, rows))} for name, rows in chosen.items()},
    }


if __name__ == "__main__":
    seed = 19950223
    source = draws(seed)
    # NIST Statistical Reference Datasets, univariate: NumAcc1, NumAcc2, NumAcc3. Certified mean and standard deviation.
    nist = [
        {"id": "NIST NumAcc1", "given": [10000001, 10000003, 10000002], "certified": {"mean": 10000002, "sd": 1}},
        {"id": "NIST NumAcc2", "given": [1.2] + [1.1, 1.3] * 500, "certified": {"mean": 1.2, "sd": 0.1}},
        {"id": "NIST NumAcc3", "given": [1000000.2] + [1000000.1, 1000000.3] * 500, "certified": {"mean": 1000000.2, "sd": 0.1}},
    ]
    record(
        f"Means and their sigmas; tables from seed {seed}, invented.",
        [
            "NIST: Statistical Reference Datasets, univariate, https://www.itl.nist.gov/div898/strd/univ/homepage.html, typed from the published tables.",
            "Tables: numpy.mean, median, std (n - 1), average with weights 1/sigma^2, cov.",
        ],
        {"relative": 1e-12, "absolute": 1e-13, "why": "Sums in double precision, in another order in another version."},
        nist + [{"id": f"table {k + 1}", **table(source)} for k in range(20)],
    )
