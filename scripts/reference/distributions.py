"""Error function, gamma, incomplete gamma and beta, normal, Student's t and chi-squared, by mpmath at 50 digits; scipy must agree."""

import mpmath
import scipy.special
import scipy.stats

from recording import record

mpmath.mp.dps = 50
mpf = mpmath.mpf


def quantile(survival, near):
    """Where `survival` is 0, found by bisection on a bracket round scipy's value."""
    low, high = mpf(near) * (1 - mpf("1e-7")), mpf(near) * (1 + mpf("1e-7"))
    return mpmath.findroot(survival, (low, high), solver="anderson", tol=mpf(10) ** -60)


def gamma_lower(a, x, digits=60):
    """P(a, x) by its series of positive terms (DLMF 8.7.1)."""
    with mpmath.workdps(digits):
        a, x = mpf(a), mpf(x)
        term, total, n = mpf(1), mpf(1), 0
        while term > total * mpf(10) ** (-digits - 5):
            n += 1
            term *= x / (a + n)
            total += term
        return total * mpmath.exp(a * mpmath.log(x) - x - mpmath.loggamma(a + 1))


def gamma_upper(a, x):
    """1 - P with as many digits as that may lose."""
    with mpmath.workdps(330):
        return 1 - gamma_lower(a, x, 330)


def chi_survival(x, k):
    with mpmath.workdps(90):
        return 1 - gamma_lower(mpf(k) / 2, mpf(x) / 2, 90)


def student_two_sided(t, k):
    t, k = mpf(t), mpf(k)
    return mpmath.betainc(k / 2, mpf(1) / 2, 0, k / (k + t * t), regularized=True)


cases = []


def put(function, arguments, value, by_scipy, agree=1e-11):
    value = float(value)
    if not abs(by_scipy - value) <= agree * abs(value) + 1e-300:
        raise SystemExit(f"scipy and mpmath disagree at {function}{arguments}: {by_scipy} and {value}")
    cases.append({"function": function, "of": arguments, "value": value})


def main():
    for x in [1e-12, 0.003, 0.1, 0.37, 0.5, 0.9, 1.2, 1.25, 1.3, 1.9, 2.4, 3.0, 4.5, 5.7]:
        put("erf", [x], mpmath.erf(mpf(x)), scipy.special.erf(x))
    for x in [-4.0, -1.1, 0.05, 0.5, 1.0, 1.25, 2.0, 3.3, 5.5, 8.0, 13.0, 20.0, 26.0]:
        put("erfc", [x], mpmath.erfc(mpf(x)), scipy.special.erfc(x))
    for x in [1e-4, 0.3, 0.5, 1.5, 2.7, 7.0, 14.9, 15.1, 40.0, 333.3, 1e5]:
        put("logGamma", [x], mpmath.loggamma(mpf(x)), scipy.special.gammaln(x))
    for a in [0.5, 1.0, 2.5, 4.0, 10.0, 49.5, 500.0, 20000.0]:
        for share in [0.05, 0.3, 0.8, 1.0, 1.02, 1.3, 2.0]:
            x = a * share
            lower = gamma_lower(a, x)
            upper = gamma_upper(a, x)
            if lower > mpf("1e-250"):
                put("gammaP", [a, x], lower, scipy.special.gammainc(a, x), 1e-8)
            if upper > mpf("1e-250"):
                put("gammaQ", [a, x], upper, scipy.special.gammaincc(a, x), 1e-8)
    for a, b, x in [(0.5, 0.5, 0.1), (2.0, 3.0, 0.4), (4.5, 0.5, 0.97), (30.0, 0.5, 0.95), (0.5, 12.0, 0.002), (150.0, 0.5, 0.999)]:
        put("incompleteBeta", [a, b, x], mpmath.betainc(mpf(a), mpf(b), 0, mpf(x), regularized=True), scipy.special.betainc(a, b, x))
    for z in [-8.0, -3.0, -1.0, -0.1, 0.4, 1.959964, 3.5]:
        put("normalCdf", [z], mpmath.ncdf(mpf(z)), scipy.stats.norm.cdf(z))
    for p in [1e-12, 1e-4, 0.025, 0.2, 0.49, 0.75, 0.975, 0.999999]:
        near = scipy.stats.norm.ppf(p)
        put("normalQuantile", [p], quantile(lambda z: mpmath.ncdf(z) - mpf(p), near), near)
    for k in [1, 2, 3, 8, 30, 200, 5000]:
        for t in [0.01, 0.7, 1.0, 2.1, 5.0]:
            put("studentTwoSided", [t, k], student_two_sided(t, k), 2 * scipy.stats.t.sf(t, k))
        for inside in [0.5, 0.683, 0.95, 0.999]:
            near = scipy.stats.t.ppf((1 + inside) / 2, k)
            put("studentTwoSidedQuantile", [inside, k], quantile(lambda t: student_two_sided(t, k) - (1 - mpf(inside)), near), near, 1e-8)
    for k in [1, 2, 5, 8, 28, 100, 3000]:
        for share in [0.1, 0.6, 1.0, 1.4, 2.5]:
            upper = gamma_upper(mpf(k) / 2, mpf(k * share) / 2)
            if upper > mpf("1e-250"):
                put("chiSquareSurvival", [k * share, k], upper, scipy.stats.chi2.sf(k * share, k), 1e-8)
        for p in [0.001, 0.025, 0.5, 0.95, 0.975]:
            near = scipy.stats.chi2.ppf(p, k)
            put("chiSquareQuantile", [p, k], quantile(lambda x: chi_survival(x, k) - (1 - mpf(p)), near), near, 1e-9)
    record(
        "Distribution functions at chosen points.",
        ["mpmath at 50 digits, rounded to double; the script refuses to record where scipy differs by more than 1e-11 (incomplete gamma 1e-8, quantiles 1e-8)."],
        {"relative": 1e-15, "absolute": 0, "why": "50 digits, rounded once."},
        cases,
    )


if __name__ == "__main__":
    main()
