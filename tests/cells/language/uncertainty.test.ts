import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { evaluateExpression, traceRow, type Evaluated } from "../../../cells/language";
import { seed } from "../../support/seed";
import { scopeOf, tableOf, type QuantityGiven } from "./scopes";

const names = ["a", "b", "c"] as const;
type Name = (typeof names)[number];

/** Expressions that are smooth and well inside their domains for inputs between 1 and 4. */
const expressions = fc.letrec<{ any: string }>((tie) => ({
  any: fc.oneof(
    { maxDepth: 4, withCrossShrink: true },
    fc.constantFrom(...names, "2", "0.5"),
    fc.tuple(tie("any"), fc.constantFrom("+", "*"), tie("any")).map(([x, o, y]) => `(${x} ${o} ${y})`),
    fc.tuple(tie("any"), tie("any")).map(([x, y]) => `(${x} / (${y} + 1))`),
    fc.tuple(tie("any"), tie("any")).map(([x, y]) => `(${x} - 0.3 * ${y})`),
    tie("any").map((x) => `ln(1.5 + abs(${x}))`),
    tie("any").map((x) => `log10(2 + ${x}^2)`),
    tie("any").map((x) => `sqrt(1 + ${x}^2)`),
    tie("any").map((x) => `exp(-1 / (1 + ${x}^2))`),
    fc.tuple(tie("any"), tie("any")).map(([x, y]) => `(1.1 + ${x}^2)^(0.7 / (1 + ${y}^2))`),
    fc.tuple(tie("any"), tie("any")).map(([x, y]) => `(a > b ? ${x} : ${y})`),
    fc.tuple(tie("any"), tie("any")).map(([x, y]) => `max(${x}, ${y})`),
  ),
})).any;

const inputs = fc.array(fc.tuple(...names.map(() => fc.double({ min: 1, max: 4, noNaN: true }))), { minLength: 1, maxLength: 6 });

function tableFor(
  rows: readonly (readonly number[])[],
  sigma: number | null = 0.01,
  correlations: Parameters<typeof tableOf>[1] = {},
): ReturnType<typeof tableOf> {
  const column = (i: number): QuantityGiven => ({ unit: "1", basis: "mass", value: rows.map((row) => row[i] ?? null), sigma: rows.map(() => sigma) });
  return tableOf({ a: column(0), b: column(1), c: column(2) }, correlations);
}

function evaluate(table: ReturnType<typeof tableOf>, text: string): Evaluated {
  return evaluateExpression(scopeOf(table), text, { block: "r" });
}

/** Adding or comparing ratios by mass with plain numbers is allowed, so every expression above has a meaning. */
function partialOf(evaluated: Evaluated, name: Name, row: number): number {
  return evaluated.inputs.find(({ variable }) => variable.column.name === name)?.partial[row] ?? 0;
}

describe("partial derivatives", () => {
  it("are those of central differences", () => {
    fc.assert(
      fc.property(expressions, inputs, (text, rows) => {
        const evaluated = evaluate(tableFor(rows), text);
        names.forEach((name, i) => {
          const h = 1e-5;
          const moved = (by: number): Float64Array => evaluate(tableFor(rows.map((row) => row.map((v, j) => (j === i ? v + by : v)))), text).value;
          const [up, down, far, near] = [moved(h), moved(-h), moved(10 * h), moved(-10 * h)];
          rows.forEach((_, row) => {
            if (evaluated.state[row] !== 0) return;
            const slope = ((up[row] ?? 0) - (down[row] ?? 0)) / (2 * h);
            const wide = ((far[row] ?? 0) - (near[row] ?? 0)) / (20 * h);
            const scale = 1 + Math.abs(slope) + Math.abs(evaluated.value[row] ?? 0);
            const here = evaluated.value[row] ?? 0;
            const [forward, backward] = [((up[row] ?? 0) - here) / h, (here - (down[row] ?? 0)) / h];
            // At a kink, or where the function turns within the step, differences are no derivative. At the very point of a
            // kink, where two arguments of max are equal, only the two sides tell it.
            if (Math.abs(slope - wide) > 1e-5 * scale || Math.abs(forward - backward) > 1e-3 * scale) return;
            expect(Math.abs(partialOf(evaluated, name, row) - slope)).toBeLessThan(1e-4 * scale);
          });
        });
      }),
      { seed, numRuns: 150 },
    );
  });
});

describe("σ", () => {
  it("grows with the inputs' σ in proportion", () => {
    fc.assert(
      fc.property(expressions, inputs, fc.double({ min: 0.1, max: 10, noNaN: true }), (text, rows, k) => {
        const one = evaluate(tableFor(rows, 0.01), text).sigma;
        const scaled = evaluate(tableFor(rows, 0.01 * k), text).sigma;
        one.forEach(
          (sigma, row) => Number.isNaN(sigma) || expect(Math.abs((scaled[row] ?? 0) - k * sigma)).toBeLessThanOrEqual(1e-9 * k * Math.max(sigma, 1e-12)),
        );
      }),
      { seed, numRuns: 150 },
    );
  });

  it("does not depend on the unit results are shown in", () => {
    const scope = scopeOf(tableOf({ MgO: { value: [38], sigma: [0.4] } }));
    const [percent, parts] = ["as_wtpct(Mg)", "as_ugg(Mg)"].map((text) => evaluateExpression(scope, text, { block: "r" }));
    expect((parts?.sigma[0] ?? 0) / (percent?.sigma[0] ?? 1)).toBeCloseTo(1e4, 6);
  });

  it("of x − x is 0, and of x + x twice that of x", () => {
    const table = tableFor([[2, 3, 4]], 0.1);
    expect(evaluate(table, "a - a").sigma[0]).toBe(0);
    expect(evaluate(table, "a / a").sigma[0]).toBeCloseTo(0, 15);
    expect(evaluate(table, "a + a").sigma[0]).toBeCloseTo(0.2, 15);
  });

  it("takes declared correlations of columns", () => {
    const of = (value: number): ReturnType<typeof tableOf> => tableFor([[2, 3, 4]], 0.1, { correlations: [{ of: ["b", "a"], value: Float64Array.of(value) }] });
    expect(evaluate(of(1), "a - b").sigma[0]).toBeCloseTo(0, 12);
    expect(evaluate(of(1), "a + b").sigma[0]).toBeCloseTo(0.2, 12);
    expect(evaluate(of(0.5), "a + b").sigma[0]).toBeCloseTo(Math.sqrt(0.02 + 2 * 0.5 * 0.01), 12);
    const table = of(0.5);
    expect(evaluate(table, "a").correlation(evaluate(table, "b"))[0]).toBeCloseTo(0.5, 12);
  });

  it("is unknown where no input has one, a lower bound where some have, never 0", () => {
    const table = tableOf({ a: { unit: "1", value: [2, 2, 2], sigma: [0.1, null, null] }, b: { unit: "1", value: [4, 4, 4], sigma: [0.1, 0.1, null] } });
    const ratio = evaluate(table, "a / b");
    expect([...ratio.lowerBound]).toEqual([0, 1, 0]);
    expect(ratio.sigma[1]).toBeCloseTo(0.5 * 0.025, 12);
    expect(ratio.sigma[2]).toBeNaN();
    expect(evaluate(table, "a * 0 + 3").sigma[2]).toBe(0);
    const none = tableOf({ a: { unit: "1", value: [2] } });
    expect(evaluate(none, "a").sigma[0]).toBeNaN();
    expect(evaluate(none, "wtpct(3)").sigma[0]).toBe(0);
  });

  it("counts assumed σ where they matter", () => {
    const table = tableOf({ a: { unit: "1", value: [2, 2], sigma: [0.1, 0.1], assumed: [1, 0] }, b: { unit: "1", value: [4, 4], sigma: [0.1, 0.1] } });
    expect(evaluate(table, "a / b").assumedCount).toBe(1);
    expect(evaluate(table, "b").assumedCount).toBe(0);
  });
});

describe("where first order cannot be trusted", () => {
  const table = tableOf({ a: { unit: "1", value: [2, 2, 2], sigma: [0.1, 0.1, 0.1] }, b: { unit: "1", value: [4, 4, null], sigma: [0.3, 0.5, 0.5] } });

  it("says so: a denominator with more than 10 % σ, 0 within 3σ of a logarithm's argument", () => {
    const ratio = evaluate(table, "a / b");
    expect([...ratio.nearEdge]).toEqual([0, 1, 0]);
    expect(ratio.problems.map((problem) => [problem.code, problem.severity])).toEqual([["first-order", "warning"]]);
    expect(ratio.problems[0]?.text).toContain("In 1 of 3 values the σ of b");
    expect([...evaluate(table, "ln(b - 3)").nearEdge]).toEqual([0, 1, 0]);
    expect(evaluate(table, "b / a").problems).toEqual([]);
  });
});

describe("correlation", () => {
  it("lies between −1 and 1, is 1 with itself, and is the same both ways", () => {
    fc.assert(
      fc.property(expressions, expressions, inputs, (first, second, rows) => {
        const table = tableFor(rows);
        const [x, y] = [evaluate(table, first), evaluate(table, second)];
        const there = x.correlation(y);
        const back = y.correlation(x);
        there.forEach((r, row) => {
          if (Number.isNaN(r)) return;
          expect(Math.abs(r)).toBeLessThanOrEqual(1);
          expect(Math.abs(r - (back[row] ?? 0))).toBeLessThan(1e-12);
        });
        x.correlation(x).forEach((r) => Number.isNaN(r) || expect(Math.abs(r - 1)).toBeLessThan(1e-9));
      }),
      { seed, numRuns: 150 },
    );
  });
});

describe("digits", () => {
  const bits = (evaluated: Evaluated): string =>
    [evaluated.value, evaluated.sigma, evaluated.sigmaPerSample].map((column) => [...new BigUint64Array(column.buffer)].join()).join("|");

  it("depend on the formula alone, not on what was evaluated before it", () => {
    fc.assert(
      fc.property(fc.array(expressions, { minLength: 1, maxLength: 5 }), inputs, (texts, rows) => {
        const table = tableFor(rows);
        const forth = texts.map((text) => bits(evaluate(table, text)));
        const back = [...texts].reverse().map((text) => bits(evaluate(tableFor(rows), text)));
        expect(back.reverse()).toEqual(forth);
      }),
      { seed, numRuns: 80 },
    );
  });

  it("are those of one row at a time, whatever the chunk a row falls into", () => {
    const rows = Array.from({ length: 6000 }, (_, i) => [1 + (i % 7) / 3, 1 + (i % 11) / 5, 2]);
    const text = "log10(a / b) + sqrt(a * b) / exp(a)";
    const whole = evaluate(tableFor(rows), text);
    for (const row of [0, 511, 512, 1023, 1024, 5999]) {
      const alone = evaluate(tableFor([rows[row] ?? []]), text);
      expect([alone.value[0], alone.sigma[0]]).toEqual([whole.value[row], whole.sigma[row]]);
    }
  });
});

describe("the trace of one number", () => {
  it("names its inputs, whose shares of the variance add to 1", () => {
    const scope = scopeOf(tableOf({ MgO: { value: [38, 40], sigma: [0.4, 0.3] }, SiO2: { value: [45, 44], sigma: [0.2, 0.2] } }));
    const evaluated = evaluateExpression(scope, "norm(Mg / Si, CI)", { block: "r" });
    const { inputs: traced, conversions, bodies } = traceRow(evaluated, 1);
    expect(traced.map((input) => (input.kind === "column" ? input.variable.column.name : input.variable.label))).toEqual([
      "MgO",
      "SiO2",
      "Mg of CI_PLJ14",
      "Si of CI_PLJ14",
    ]);
    expect(traced.reduce((sum, input) => sum + (input.share ?? 0), 0)).toBeCloseTo(1, 12);
    expect(traced[0]).toMatchObject({ value: 0.4, sigma: 0.003, row: 1 });
    expect(conversions).toEqual(["Mg = MgO × 0.603042", "Si = SiO2 × 0.467437"]);
    expect(bodies).toEqual({ CI: "CI_PLJ14" });
  });
});

describe("aggregates of what leans on aggregates", () => {
  const rocks = scopeOf(
    tableOf({ Mg: { value: [21, 22, 24], sigma: [0.2, 0.2, 0.2] }, Si: { value: [20, 21, 21], sigma: [0.2, 0.2, 0.2] }, Group: ["A", "A", "B"] }),
  );
  const of = (text: string) => evaluateExpression(rocks, text, { block: "r" });

  it("count a body once: a mean over itself is 1 without σ, whatever body both were divided by", () => {
    const one = of("mean(norm(Mg, CI) / mean(norm(Mg, CI)))");
    expect(one.value[0]).toBeCloseTo(1, 12);
    expect(one.sigma[0]).toBeLessThan(1e-9);
    expect(of("mean(Mg / mean(Mg))").sigma[0]).toBeLessThan(1e-9);
  });

  it("keep the body's error where it does not cancel", () => {
    const plain = of("mean(norm(Mg, CI))");
    const twice = of("mean(norm(Mg, CI) * mean(norm(Mg, CI)))");
    // The square of a mean has twice its relative σ.
    expect((twice.sigmaCommon[0] ?? NaN) / (twice.value[0] ?? NaN)).toBeCloseTo((2 * (plain.sigmaCommon[0] ?? NaN)) / (plain.value[0] ?? NaN), 9);
  });

  it("also class by class, and through a choice", () => {
    const byClass = of("mean(norm(Mg, CI) / mean(norm(Mg, CI), Group), Group)");
    expect([...byClass.value].map((v) => Math.abs(v - 1) < 1e-12)).toEqual([true, true]);
    expect(byClass.sigma[0]).toBeLessThan(1e-9);
    const chosen = of("mean((Mg > wtpct(0) ? norm(Mg, CI) : norm(Si, CI)) / mean(norm(Mg, CI)))");
    expect(chosen.sigma[0]).toBeLessThan(1e-9);
  });
});
