"""Random formulas over correlated inputs, with the `uncertainties` package's first-order propagation."""

import numpy
from uncertainties import correlated_values, covariance_matrix, umath

from recording import draws, record, rounded

names = ("A", "B", "C", "D")
tables, formulas_each, rows_each = 4, 50, 3


class Writer:
    """Writes formulas that are defined for positive inputs: logarithms and powers are taken of what is positive by construction."""

    def __init__(self, source):
        self.source = source

    def choose(self, of):
        return of[int(self.source.random() * len(of))]

    def positive(self, depth):
        if depth == 0:
            return self.choose(names)
        kind = self.choose(("ratio", "ratio", "product", "sum", "scaled", "sqrt", "power", "exp"))
        part = lambda: self.positive(depth - 1)
        if kind == "ratio":
            return f"({part()} / {part()})"
        if kind == "product":
            return f"{part()} * {part()}"
        if kind == "sum":
            return f"({part()} + {rounded(0.2 + 2 * self.source.random(), 3)} * {part()})"
        if kind == "scaled":
            return f"{rounded(0.2 + 2 * self.source.random(), 3)} * {part()}"
        if kind == "sqrt":
            return f"sqrt({part()})"
        if kind == "power":
            return f"({part()}) ^ {self.choose(('2', '0.5', '1.7', '-1', '-0.3', '3'))}"
        return f"exp({self.signed(depth - 1)} / 5)"

    def signed(self, depth):
        kind = self.choose(("log10", "ln", "difference", "positive"))
        if kind == "difference":
            return f"({self.positive(depth)} - {self.positive(depth)})"
        if kind == "positive":
            return self.positive(depth)
        return f"{kind}({self.positive(depth)})"

    def formula(self):
        depth = 1 + int(self.source.random() * 3)
        kind = self.choose(("signed", "positive", "both"))
        if kind == "both":
            return f"{self.signed(depth)} / {self.positive(depth)} + {self.signed(1)}"
        return self.signed(depth) if kind == "signed" else self.positive(depth)


def correlations(source):
    """A positive definite matrix of correlations in three digits, from four factors drawn at random."""
    while True:
        loads = numpy.array([[2 * source.random() - 1 for _ in range(4)] for _ in range(4)])
        product = loads @ loads.T
        scale = numpy.sqrt(numpy.diag(product))
        found = numpy.round(product / numpy.outer(scale, scale), 3)
        if numpy.linalg.eigvalsh(found)[0] > 0.05:
            return found


def python_of(text):
    return text.replace("^", "**").replace("ln(", "umath.log(").replace("log10(", "umath.log10(").replace("exp(", "umath.exp(").replace("sqrt(", "umath.sqrt(")


def case(k, source):
    matrix = correlations(source)
    rows = [
        {
            "value": [rounded(10 ** (2 * source.random() - 1), 5) for _ in names],
            "relative": [rounded(0.005 + 0.035 * source.random(), 3) for _ in names],
        }
        for _ in range(rows_each)
    ]
    for row in rows:
        row["sigma"] = [rounded(v * r, 4) for v, r in zip(row["value"], row.pop("relative"))]
    inputs = []
    for row in rows:
        sigma = numpy.array(row["sigma"])
        inputs.append(dict(zip(names, correlated_values(row["value"], matrix * numpy.outer(sigma, sigma)))))
    writer, texts = Writer(source), []
    while len(texts) < formulas_each:
        text = writer.formula()
        found = [eval(python_of(text), {"umath": umath}, row) for row in inputs]
        # A constant (A / A) has no sigma to compare, and beyond these sizes double precision is the limit, not the engine.
        if all(hasattr(each, "std_dev") and 1e-6 < abs(each.n) < 1e6 and each.std_dev > 1e-4 * abs(each.n) for each in found):
            texts.append((text, found))
    made = []
    for i, (text, found) in enumerate(texts):
        partner = texts[i ^ 1][1]
        joint = [covariance_matrix([one, two]) for one, two in zip(found, partner)]
        made.append(
            {
                "text": text,
                "value": [each.n for each in found],
                "sigma": [each.std_dev for each in found],
                # With the formula beside it: 1st and 2nd, 3rd and 4th ...
                "correlation": [m[0][1] / (m[0][0] * m[1][1]) ** 0.5 for m in joint],
            }
        )
    pairs = [{"of": [names[i], names[j]], "value": float(matrix[i][j])} for i in range(4) for j in range(i + 1, 4)]
    return {"id": f"table {k + 1}", "given": {"names": names, "rows": rows, "correlations": pairs}, "formulas": made}


if __name__ == "__main__":
    seed = 20080100
    source = draws(seed)
    cases = [case(k, source) for k in range(tables)]
    record(
        f"{tables * formulas_each} random formulas of four correlated inputs, from seed {seed}; inputs and formulas invented.",
        ["uncertainties (E. O. Lebigot): correlated_values, nominal value, std_dev, covariance_matrix."],
        {"relative": 1e-9, "absolute": 1e-12, "why": "correlated_values turns the inputs into independent ones by eigenvectors, whose last digits depend on the linear algebra library."},
        cases,
    )
