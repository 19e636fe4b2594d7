"""Melting of Shaw 1970 and mixing of two components, from their mass balances rather than from the closed forms."""

import mpmath

from recording import draws, record, rounded

mpmath.mp.dps = 40
mpf = mpmath.mpf


def batch(D, P, F):
    """Melt and residue from C0 = F Cl + (1 - F) Cs and Cs = Cl (D - P F)/(1 - F), solved as two linear equations."""
    rows = mpmath.matrix([[F, 1 - F], [(D - P * F) / (1 - F), -1]])
    melt, residue = mpmath.lu_solve(rows, mpmath.matrix([1, 0]))
    return {"melt": melt, "residue": residue}


def fractional(D, P, F):
    """
    The solid loses melt as it forms: d(held)/dF = -Cl with Cl = held / (D - P F), the balance that Shaw integrates.
    Integrated here by quadrature of d ln(held) = -dF / (D - P F).
    """
    held = mpmath.exp(-mpmath.quad(lambda f: 1 / (D - P * f), mpmath.linspace(0, F, 5)))
    return {"last melt": held / (D - P * F), "collected": (1 - held) / F, "residue": held / (1 - F)}


def melting(source, k):
    modal = k % 2 == 0
    D = rounded(10 ** (-3 + 3.5 * source.random()), 4)
    F = rounded(0.005 + 0.3 * source.random(), 4)
    P = D if modal else rounded(min(0.9 * D / F, D * (0.2 + 2 * source.random())), 4)
    d, p, f = mpf(repr(D)), mpf(repr(P)), mpf(repr(F))
    value = lambda parts: {key: float(each) for key, each in parts.items()}
    return {"id": f"melting {k + 1}", "given": {"D": D, "F": F, **({} if modal else {"P": P})}, "batch": value(batch(d, p, f)), "fractional": value(fractional(d, p, f))}


def mixing(source, k):
    """Two components, three elements; the ratio of a mixture follows from the masses."""
    one = {name: rounded(1 + 25 * source.random(), 4) for name in ("Mg", "Si", "Al")}
    two = {name: rounded(1 + 25 * source.random(), 4) for name in ("Mg", "Si", "Al")}
    share = rounded(0.02 + 0.96 * source.random(), 4)
    m = {name: (1 - mpf(repr(share))) * mpf(repr(one[name])) + mpf(repr(share)) * mpf(repr(two[name])) for name in one}
    # With x = Mg/Si and y = Al/Mg the share is -Si1 (x - x1) / (Si2 (x - x2)) over the rest, and -Mg1 (y - y1) / (Mg2 (y - y2))
    # as well; equating both gives A x + B x y + C y + D = 0, a hyperbola (Langmuir et al. 1978).
    (m1, s1, l1), (m2, s2, l2) = ([mpf(repr(each[name])) for name in ("Mg", "Si", "Al")] for each in (one, two))
    x1, x2, y1, y2 = m1 / s1, m2 / s2, l1 / m1, l2 / m2
    hyperbola = [s2 * m1 * y1 - s1 * m2 * y2, s1 * m2 - s2 * m1, s2 * m1 * x2 - s1 * m2 * x1, s1 * m2 * x1 * y2 - s2 * m1 * x2 * y1]
    return {
        "id": f"mixing {k + 1}",
        "given": {"one": one, "two": two, "share": share},
        "mixture": {"Mg/Si": float(m["Mg"] / m["Si"]), "Al/Si": float(m["Al"] / m["Si"]), "Al/Mg": float(m["Al"] / m["Mg"])},
        "hyperbola": [float(each) for each in hyperbola],
    }


if __name__ == "__main__":
    seed = 19700034
    source = draws(seed)
    record(
        f"Melting and mixing; coefficients and compositions from seed {seed}, invented.",
        [
            "Batch: two linear mass balances. Fractional: the differential balance integrated numerically at 40 digits. Neither uses Shaw's closed forms.",
            "Mixing: sums of masses at 40 digits; Langmuir et al. 1978, Earth Planet. Sci. Lett. 37, 380, for the shape of the path.",
        ],
        {"relative": 1e-14, "absolute": 0, "why": "40 digits, rounded once."},
        [melting(source, k) for k in range(60)] + [mixing(source, k) for k in range(40)],
    )
