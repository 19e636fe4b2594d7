import { describe, expect, it } from "vitest";
import { pathOn } from "../../../cells/budget";
import { emptyResult } from "../../../cells/page/emptyResult";
import type { TrendResult } from "../../../cells/page/results";
import { blockSchema } from "../../../cells/page/schema";
import { blockOf, contextOf, errorIn, evaluate, present, type Surroundings } from "./budgets";

const metal = (amount: unknown): object => ({
  start: { body: "BSE" },
  steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0 }, amount }],
  report: ["Mg / Si", "Al / Si"],
});
const toCi = { expression: "Mg / Si", equals: { body: "CI" } };

describe("paths", () => {
  it("go from nothing to the solved amount in 101 points, the last of them the answer", () => {
    const result = evaluate({ ...metal("solve"), target: toCi });
    expect(result.path).toHaveLength(101);
    expect(result.path[0]).toEqual({ amount: 0, values: result.report.map(({ start }) => start) });
    expect(result.path[100]?.amount).toBe(result.solved?.value);
    result.path[100]?.values.forEach((value, i) => expect(value).toBeCloseTo(present(result.report[i]?.end), 14));
  });

  it("go over the range that is swept, both ends exact, and the budget ends at the end", () => {
    const result = evaluate(metal({ from: 2, to: 12 }));
    expect(result.path.map(({ amount }) => amount)).toEqual(Array.from({ length: 101 }, (_, i) => (i === 100 ? 12 : 2 + (10 * i) / 100)));
    expect(result.report[0]?.end).toBeCloseTo(present(result.path[100]?.values[0]), 14);
    expect(result.solved).toBeUndefined();
    expect(result.byCompilation).toEqual([]);
  });

  it("go along the last step where all amounts are fixed, and nowhere without steps", () => {
    const add = (amount: number): object => ({ do: "add", what: { phase: "forsterite" }, amount: { value: amount } });
    const result = evaluate({ start: { body: "BSE" }, steps: [add(0.1), add(0.3)], report: ["Mg / Si"] });
    expect(result.path.map(({ amount }) => amount)).toEqual(expect.arrayContaining([0, 0.15, 0.3]));
    expect(present(result.path[0]?.values[0])).toBeGreaterThan(present(result.report[0]?.start));
    expect(evaluate({ start: { body: "BSE" }, steps: [], report: ["Mg / Si"] }).path).toEqual([]);
  });

  it("are null where an expression has no value", () => {
    const result = evaluate({ ...metal({ from: 0, to: 10 }), report: ["Fe / Si"] });
    expect(result.path.every(({ values }) => values[0] === null)).toBe(true);
  });
});

describe("a path on two expressions", () => {
  it("has its points, ticks at round amounts, and its end", () => {
    const block = blockOf({ ...metal("solve"), target: toCi });
    const { line, ticks, end, units } = pathOn(block, contextOf(), "Mg / Si", "Al / Si");
    const result = evaluate({ ...metal("solve"), target: toCi });
    expect([...line.x]).toEqual(result.path.map(({ values }) => values[0]));
    expect([...line.y]).toEqual(result.path.map(({ values }) => values[1]));
    expect(ticks.map(({ label }) => label)).toEqual(["0 wt%", "2 wt%", "4 wt%", "6 wt%", "8 wt%"]);
    // Mg/Si at 4 wt% by hand.
    expect(ticks[2]?.x).toBeCloseTo((0.677 * 0.228) / (0.677 * 0.21 + 0.323 * 0.04), 12);
    expect(end).toMatchObject({ label: "9.58 wt%", x: line.x[100], y: line.y[100] });
    expect(units).toEqual({ x: "1", y: "1" });
  });

  it("takes the amount of the budget's own result where that is there", () => {
    const budget = { ...metal("solve"), target: toCi };
    const block = blockOf(budget);
    const { end } = pathOn(block, contextOf({ results: { b: evaluate(budget) } }), "Mg / Si", "Al / Si");
    expect(end?.label).toBe("9.58 wt%");
  });

  it("writes fractions in percent, and sweeps backwards as well", () => {
    const mix = { start: { body: "BSE" }, steps: [{ do: "mix", what: { body: "CI" }, amount: { from: 1, to: 0 } }] };
    const { line, ticks } = pathOn(blockOf(mix), contextOf(), "Mg / Si", "Al / Si");
    expect(line.x[0]).toBeCloseTo(95400 / 107000, 14);
    expect(line.x[100]).toBeCloseTo(0.228 / 0.21, 14);
    expect(ticks.map(({ label }) => label)).toEqual(["0 %", "20 %", "40 %", "60 %", "80 %", "100 %"]);
  });

  it("puts the expressions of lines in the place of their names", () => {
    const context = { ...contextOf(), expand: (text: string, data: string | undefined) => (data === "ch" && text === "mg_si" ? "(Mg / Si)" : text) };
    const { line } = pathOn(blockOf(metal({ value: 5 })), context, "mg_si", "Al / Si", "ch");
    expect(line.x[0]).toBeCloseTo(0.228 / 0.21, 14);
  });

  it("says why it cannot be drawn", () => {
    const on =
      (budget: object, x: string): (() => unknown) =>
      () =>
        pathOn(blockOf(budget), contextOf(), x, "Al / Si");
    expect(on(metal({ value: 5 }), "Fe / Si")).toThrow(/The path of b cannot be drawn on Fe \/ Si and Al \/ Si\. The metal may hold Fe/u);
    expect(on({ start: { body: "BSE" }, steps: [] }, "Mg / Si")).toThrow(/b has no step/u);
    expect(on(metal({ value: 5 }), "Quux / Si")).toThrow(/Quux/u);
    expect(on({ ...metal("solve"), target: { expression: "Mg / Si", equals: { value: 2, basis: "mass" } } }, "Mg / Si")).toThrow(/No possible amount/u);
  });
});

/** A trend that has the line y = a + b x, as a page would have fitted it. */
function trendOf(more: Partial<TrendResult> = {}): Surroundings {
  const block = blockSchema.parse({ kind: "trend", id: "t", data: "ch", x: "Mg / Si", y: "Al / Si", method: "york" });
  if (block.kind !== "trend") throw new Error("expected a trend");
  const axis = { label: "", unit: "1", basis: "mass" as const };
  const result: TrendResult = {
    ...(emptyResult(block, []) as TrendResult),
    ok: true,
    x: { ...axis, expression: "Mg / Si" },
    y: { ...axis, expression: "Al / Si" },
    slope: { value: 0.05, sigma: 0.01, sigmaWithScatter: 0.02 },
    intercept: { value: 0.05, sigma: 0.008, sigmaWithScatter: 0.016 },
    covariance: -0.00006,
    covarianceWithScatter: -0.00024,
    usesScatter: false,
    ...more,
  };
  return { blocks: [block], results: { t: result } };
}

describe("a trend as the target", () => {
  const budget = {
    start: { body: "BSE" },
    steps: [{ do: "remove", what: { composition: { "Mg kg/kg": 0, "Si kg/kg": 0, "Al kg/kg": 1 } }, amount: "solve" }],
    target: { trend: "t" },
  };

  it("is reached where the path meets the line, in the trend's own x and y", () => {
    const result = evaluate(budget, trendOf());
    const [x, y] = result.report.map(({ end }) => present(end));
    expect(y).toBeCloseTo(0.05 + 0.05 * present(x), 12);
    // Removing Al moves y alone: x stays that of BSE, and Al′ = Si (a + b x).
    const mgSi = 0.228 / 0.21;
    expect(result.solved?.value).toBeCloseTo(0.0235 - 0.21 * (0.05 + 0.05 * mgSi), 12);
    expect(result.report.map(({ expression }) => expression)).toEqual(["Mg / Si", "Al / Si"]);
  });

  it("brings the σ of slope and intercept and their covariance along, with scatter where that is in use", () => {
    const mgSi = 0.228 / 0.21;
    const sigma = (slope: number, intercept: number, covariance: number): number =>
      0.21 * Math.sqrt(slope * slope * mgSi * mgSi + intercept * intercept + 2 * mgSi * covariance);
    const plain = evaluate(budget, trendOf());
    expect(plain.solved).toMatchObject({ sigmaIs: "lower bound" });
    expect(present(plain.solved?.sigma)).toBeCloseTo(sigma(0.01, 0.008, -0.00006), 12);
    expect(present(evaluate(budget, trendOf({ usesScatter: true })).solved?.sigma)).toBeCloseTo(sigma(0.02, 0.016, -0.00024), 12);
  });

  it("brings the line's units to those of compositions, and refuses another basis", () => {
    const inAtoms = trendOf({ y: { expression: "Al / Si", label: "", unit: "1", basis: "atoms" } });
    expect(errorIn(evaluate(budget, inAtoms))).toMatchObject({ code: "basis-mismatch", field: "target.trend" });
    const inKelvin = trendOf({ y: { expression: "T", label: "", unit: "K", basis: null } });
    expect(errorIn(evaluate(budget, inKelvin))).toMatchObject({ code: "unit-mismatch", field: "target.trend" });
  });
});
