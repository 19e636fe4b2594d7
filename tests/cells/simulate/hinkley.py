"""Quantiles of the ratio of two independent normal variables, for ratio.test.ts.

P(X/Y <= w) as in Hinkley (1969), Biometrika 56, 635, equation 1, written as an integral over y:
  integral over y > 0 of n(y) N((w y - mx)/sx) + integral over y < 0 of n(y) (1 - N((w y - mx)/sx)),
which needs nothing of Cotectic. Run: python3 tests/cells/simulate/hinkley.py (scipy).
"""

from scipy.integrate import quad
from scipy.optimize import brentq
from scipy.stats import norm


def below(w, mx, sx, my, sy):
    upper = quad(lambda y: norm.pdf(y, my, sy) * norm.cdf((w * y - mx) / sx), 0, my + 12 * sy, limit=400, epsabs=1e-13, points=[my])[0]
    lower = quad(lambda y: norm.pdf(y, my, sy) * norm.sf((w * y - mx) / sx), my - 12 * sy, 0, limit=400, epsabs=1e-13)[0]
    return upper + lower


def main():
    mx, sx, my, sy = 20.0, 1.0, 10.0, 3.0
    for p in (0.5, norm.cdf(-1), norm.cdf(1), 0.025, 0.975):
        q = brentq(lambda w: below(w, mx, sx, my, sy) - p, -5, 60, xtol=1e-12)
        h = 1e-4
        density = (below(q + h, mx, sx, my, sy) - below(q - h, mx, sx, my, sy)) / (2 * h)
        print(f"p {p:.8f}  quantile {q:.8f}  density {density:.8f}")


main()
