import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { evaluateExpression, type Evaluated } from "../../../cells/language";
import { seed } from "../../support/seed";
import { errorOf, scopeOf, tableOf, type QuantityGiven } from "./scopes";

/** Laws that uncertainties obey whatever the numbers (JCGM 100:2008, first order), over columns of random values and σ. */
const ROWS = 5;
const runs = { seed, numRuns: 120 };
const magnitude = fc.oneof(fc.double({ min: 0.5, max: 60, noNaN: true }), fc.double({ min: 1e-6, max: 1e-3, noNaN: true }));
const measured: fc.Arbitrary<QuantityGiven> = fc
  .tuple(
    fc.array(magnitude, { minLength: ROWS, maxLength: ROWS }),
    fc.array(fc.double({ min: 0.001, max: 0.2, noNaN: true }), { minLength: ROWS, maxLength: ROWS }),
  )
  .map(([value, relative]) => ({ value, sigma: value.map((v, i) => v * (relative[i] ?? 0)) }));
const factor = fc.double({ min: -1e4, max: 1e4, noNaN: true }).filter((a) => Math.abs(a) > 1e-3);

type Given = Readonly<Record<string, QuantityGiven>>;

function evaluator(given: Given): (text: string) => Evaluated {
  const scope = scopeOf(tableOf(given));
  return (text) => evaluateExpression(scope, text, { block: "r" });
}

/** Equal to a relative 1e-12, row by row. */
function alike(actual: Float64Array, expected: (row: number) => number, relative = 1e-12): void {
  expect(actual).toHaveLength(ROWS);
  actual.forEach((value, row) => {
    const wanted = expected(row);
    expect(Math.abs(value - wanted)).toBeLessThanOrEqual(relative * Math.abs(wanted));
  });
}

const at = (column: Float64Array, row: number): number => column[row] ?? Number.NaN;

describe("σ, whatever the values", () => {
  it("of x − x is 0, to the bit", () => {
    fc.assert(
      fc.property(measured, (Mg) => {
        const same = evaluator({ Mg })("Mg - Mg");
        expect([...same.value, ...same.sigma]).toEqual(new Array(2 * ROWS).fill(0));
      }),
      runs,
    );
  });

  it("of x / x is 0", () => {
    fc.assert(
      fc.property(measured, (Mg) => {
        const one = evaluator({ Mg })("Mg / Mg");
        one.value.forEach((value) => expect(value).toBe(1));
        one.sigma.forEach((sigma) => expect(sigma).toBeLessThan(1e-15));
      }),
      runs,
    );
  });

  it("of a · x is |a| σ(x), and of x + a σ(x)", () => {
    fc.assert(
      fc.property(measured, factor, (Mg, a) => {
        const evaluate = evaluator({ Mg });
        const { sigma } = evaluate("Mg");
        alike(evaluate(`(${a}) * Mg`).sigma, (row) => Math.abs(a) * at(sigma, row));
        alike(evaluate(`Mg / (${a})`).sigma, (row) => at(sigma, row) / Math.abs(a));
        alike(evaluate(`Mg + wtpct(${a})`).sigma, (row) => at(sigma, row));
      }),
      runs,
    );
  });

  it("of a sum and of a product of two that share nothing adds in squares", () => {
    fc.assert(
      fc.property(measured, measured, (Mg, Si) => {
        const evaluate = evaluator({ Mg, Si });
        const [mg, si, sum, product, ratio] = ["Mg", "Si", "Mg + Si", "Mg * Si", "Mg / Si"].map(evaluate) as [
          Evaluated,
          Evaluated,
          Evaluated,
          Evaluated,
          Evaluated,
        ];
        alike(sum.sigma, (row) => Math.hypot(at(mg.sigma, row), at(si.sigma, row)));
        const relative = (row: number): number => Math.hypot(at(mg.sigma, row) / at(mg.value, row), at(si.sigma, row) / at(si.value, row));
        alike(product.sigma, (row) => at(product.value, row) * relative(row));
        alike(ratio.sigma, (row) => at(ratio.value, row) * relative(row));
      }),
      runs,
    );
  });

  it("of a square root halves, of a square doubles the relative σ", () => {
    fc.assert(
      fc.property(measured, measured, (Mg, Si) => {
        const evaluate = evaluator({ Mg, Si });
        const ratio = evaluate("Mg / Si");
        const [root, square] = [evaluate("sqrt(Mg / Si)"), evaluate("(Mg / Si)^2")];
        alike(root.sigma, (row) => (at(root.value, row) * at(ratio.sigma, row)) / at(ratio.value, row) / 2);
        alike(square.sigma, (row) => (2 * at(square.value, row) * at(ratio.sigma, row)) / at(ratio.value, row));
        alike(evaluate("ln(Mg / Si)").sigma, (row) => at(ratio.sigma, row) / at(ratio.value, row));
      }),
      runs,
    );
  });

  it("does not depend on how a formula is written", () => {
    fc.assert(
      fc.property(measured, measured, measured, (Mg, Si, Al) => {
        const evaluate = evaluator({ Mg, Si, Al });
        const pairs: readonly (readonly [string, string])[] = [
          ["(Mg / Si) / (Al / Si)", "Mg / Al"],
          ["Mg / Si + Al / Si", "(Mg + Al) / Si"],
          ["1 / (Si / Mg)", "Mg / Si"],
          ["exp(ln(Mg / Si))", "Mg / Si"],
          ["Mg - (Mg - Si)", "Si"],
        ];
        for (const [long, short] of pairs) {
          const [first, second] = [evaluate(long), evaluate(short)];
          alike(first.sigma, (row) => at(second.sigma, row), 1e-9);
        }
      }),
      runs,
    );
  });

  it("of an oxide and its element is the same in relation to the value", () => {
    fc.assert(
      fc.property(measured, (MgO) => {
        const evaluate = evaluator({ MgO });
        const [oxide, element] = [evaluate("MgO"), evaluate("Mg")];
        alike(element.sigma, (row) => (at(element.value, row) * at(oxide.sigma, row)) / at(oxide.value, row));
        const difference = evaluate("MgO - oxide(Mg)");
        difference.sigma.forEach((sigma, row) => expect(sigma).toBeLessThan(1e-12 * at(oxide.value, row)));
      }),
      runs,
    );
  });
});

describe("covariance of ratios", () => {
  it("of Mg/Si with Al/Si is positive, through Si alone: Mg/Si · Al/Si · (σ(Si)/Si)²", () => {
    fc.assert(
      fc.property(measured, measured, measured, (Mg, Al, Si) => {
        const evaluate = evaluator({ Mg, Al, Si });
        const [mg, al, si] = [evaluate("Mg / Si"), evaluate("Al / Si"), evaluate("Si")];
        const covariance = mg.covariance(al);
        alike(covariance, (row) => at(mg.value, row) * at(al.value, row) * (at(si.sigma, row) / at(si.value, row)) ** 2);
        covariance.forEach((value) => expect(value).toBeGreaterThan(0));
        alike(al.covariance(mg), (row) => at(covariance, row));
      }),
      runs,
    );
  });

  it("of Mg/Si with Si/Al is negative, and of Mg with Al none", () => {
    fc.assert(
      fc.property(measured, measured, measured, (Mg, Al, Si) => {
        const evaluate = evaluator({ Mg, Al, Si });
        evaluate("Mg / Si")
          .covariance(evaluate("Si / Al"))
          .forEach((value) => expect(value).toBeLessThan(0));
        expect([...evaluate("Mg").covariance(evaluate("Al"))]).toEqual(new Array(ROWS).fill(0));
      }),
      runs,
    );
  });

  it("gives the variance of a difference: σ²(x − y) = σ²(x) + σ²(y) − 2 cov(x, y)", () => {
    fc.assert(
      fc.property(measured, measured, measured, (Mg, Al, Si) => {
        const evaluate = evaluator({ Mg, Al, Si });
        const [x, y, difference] = [evaluate("Mg / Si"), evaluate("Al / Si"), evaluate("Mg / Si - Al / Si")];
        const covariance = x.covariance(y);
        difference.sigma.forEach((sigma, row) => {
          const scale = at(x.sigma, row) ** 2 + at(y.sigma, row) ** 2;
          expect(Math.abs(sigma * sigma - (scale - 2 * at(covariance, row)))).toBeLessThan(1e-12 * scale);
        });
      }),
      runs,
    );
  });
});

describe("mass and atoms are never mixed", () => {
  it("in sums, differences, comparisons and choices, whatever the species", () => {
    const species = fc.constantFrom("Mg", "Al", "Si", "Ca", "Ti");
    const operator = fc.constantFrom("+", "-", "<", "<=", ">", ">=", "==", "!=");
    const given = Object.fromEntries(["Mg", "Al", "Si", "Ca", "Ti"].map((name) => [name, { value: [10], sigma: [0.1] }]));
    const evaluate = evaluator(given);
    fc.assert(
      fc.property(species, species, species, species, operator, fc.boolean(), (a, b, c, d, o, swapped) => {
        const [mass, atoms] = [`${a} / ${b}`, `atoms(${c}) / atoms(${d})`];
        const text = swapped ? `${atoms} ${o} ${mass}` : `${mass} ${o} ${atoms}`;
        const error = errorOf(() => evaluate(text));
        expect(error.code).toBe("basis-mismatch");
        expect(text.slice(...(error.span ?? [0, 0]))).toBe(o);
        expect(error.text).toContain("by atoms");
        expect(errorOf(() => evaluate(`min(${mass}, ${atoms})`)).code).toBe("basis-mismatch");
      }),
      runs,
    );
  });
});
