import { describe, expect, it } from "vitest";

import { createRandom } from "../../../cells/numeric";
import { evaluateTrend, fitOf } from "../../../cells/trend";
import { covariance, variance } from "../../../cells/trend/linearForm";
import type { TrendBlock } from "../../../cells/page/schema";
import type { Table } from "../../../cells/table/table";
import { tableOf } from "../language/scopes";
import { codes, contextOf, pointsTable, trend } from "./pages";

type Method = TrendBlock["method"];

const SEED = 4711;
const SETS = 400;
const n = 40;
/** Rows 1–12 belong to the first line alone, 13–28 to both, 29–40 to the second alone. */
const Group = Array.from({ length: n }, (_, i) => (i < 12 ? "first" : i < 28 ? "both" : "second"));

function mean(values: readonly number[]): number {
  return values.reduce((sum, v) => sum + v, 0) / values.length;
}
function productMoment(a: readonly number[], b: readonly number[]): number {
  const [ma, mb] = [mean(a), mean(b)];
  return a.reduce((sum, v, i) => sum + (v - ma) * ((b[i] ?? NaN) - mb), 0) / (a.length - 1);
}

/** Points about y = 0.3 + 0.8 x, x normal, with a natural spread of 0.25 in y beside errors of 0.1, drawn anew each time. */
function drawTable(random: { normal(): number }): Table {
  const x = Array.from({ length: n }, () => random.normal());
  return pointsTable({
    x,
    y: x.map((v) => 0.3 + 0.8 * v + 0.25 * random.normal() + 0.1 * random.normal()),
    sigmaX: x.map(() => 0),
    sigmaY: x.map(() => 0.1),
    group: Group,
  });
}

interface Simulated {
  /** Covariance of both slopes, and of both heights at x = 1, that the fits say, on average. */
  readonly said: readonly [number, number];
  /** The same of the fitted numbers themselves, over all data sets. */
  readonly seen: readonly [number, number];
  readonly correlation: number;
}

function simulate(first: Method, second: Method): Simulated {
  const random = createRandom(SEED);
  const said: [number[], number[]] = [[], []];
  const slopes: [number[], number[]] = [[], []];
  const heights: [number[], number[]] = [[], []];
  for (let k = 0; k < SETS; k++) {
    const context = contextOf(drawTable(random));
    const a = fitOf(evaluateTrend(trend({ method: first, where: 'Group != "second"' }), context));
    const b = fitOf(evaluateTrend(trend({ id: "t2", method: second, where: 'Group != "first"' }), context));
    if (a === undefined || b === undefined) throw new Error(`no line in set ${k} of seed ${SEED}`);
    said[0].push(covariance(a.line.slope, b.line.slope));
    said[1].push(
      covariance(a.line.slope, b.line.slope) +
        covariance(a.line.slope, b.line.intercept) +
        covariance(a.line.intercept, b.line.slope) +
        covariance(a.line.intercept, b.line.intercept),
    );
    for (const [i, fit] of [a, b].entries()) {
      slopes[i]?.push(fit.line.slope.value);
      heights[i]?.push(fit.line.slope.value + fit.line.intercept.value);
    }
  }
  return {
    said: [mean(said[0]), mean(said[1])],
    seen: [productMoment(slopes[0], slopes[1]), productMoment(heights[0], heights[1])],
    correlation: productMoment(slopes[0], slopes[1]) / Math.sqrt(productMoment(slopes[0], slopes[0]) * productMoment(slopes[1], slopes[1])),
  };
}

describe("two lines that share sixteen of their twenty-eight samples", () => {
  const pairs: readonly (readonly [Method, Method])[] = [
    ["ordinary least squares", "ordinary least squares"],
    ["reduced major axis", "reduced major axis"],
    ["theil-sen", "theil-sen"],
    ["ordinary least squares", "reduced major axis"],
    ["york", "ordinary least squares"],
    ["york", "reduced major axis"],
  ];
  it.each(pairs)("%s and %s: the covariance said is the one that 400 data sets show", (first, second) => {
    const { said, seen, correlation } = simulate(first, second);
    process.stdout.write(
      `shared samples, seed ${SEED}: ${first} × ${second}: slopes said ${said[0].toExponential(2)}, seen ${seen[0].toExponential(2)} (correlation ${correlation.toFixed(2)}); heights said ${said[1].toExponential(2)}, seen ${seen[1].toExponential(2)}\n`,
    );
    // A covariance of 400 pairs with correlation r is known to √((1 + r²)/400)/r of itself, 11 % at r = 0.5; three times that, and a bias of a few %.
    const tolerance = (3 * Math.sqrt((1 + correlation * correlation) / SETS)) / Math.abs(correlation) + 0.04;
    expect(Math.abs(said[0] / seen[0] - 1)).toBeLessThan(tolerance);
    expect(Math.abs(said[1] / seen[1] - 1)).toBeLessThan(tolerance);
    expect(correlation).toBeGreaterThan(0.3);
  });
});

describe("what samples are the same", () => {
  const random = createRandom(SEED);
  const table = drawTable(random);

  it("a line and itself fitted by the same samples have the whole variance in common, whatever the method", () => {
    for (const method of ["york", "ordinary least squares", "reduced major axis", "theil-sen"] as const) {
      const context = contextOf(table);
      const [a, b] = [fitOf(evaluateTrend(trend({ method }), context)), fitOf(evaluateTrend(trend({ id: "t2", method }), context))];
      if (a === undefined || b === undefined) throw new Error("no line");
      for (const which of ["slope", "intercept"] as const) {
        const ratio = covariance(a.line[which], b.line[which]) / variance(a.line[which]);
        expect(ratio, `${method}, ${which}`).toBeCloseTo(1, 9);
      }
    }
  });

  it("are known by their origins in another table, as a stack has them", () => {
    const stacked: Table = { ...table, handle: "all", columns: table.columns.map((column) => ({ ...column })) };
    const [a, b] = [fitOf(evaluateTrend(trend(), contextOf(table))), fitOf(evaluateTrend(trend({ id: "t2", data: "all" }), contextOf(stacked)))];
    if (a === undefined || b === undefined) throw new Error("no line");
    expect(covariance(a.line.slope, b.line.slope) / variance(a.line.slope)).toBeCloseTo(1, 6);
    const other: Table = { ...stacked, origins: stacked.origins.map((_, row) => [{ table: "elsewhere", row: row + 1 }]) };
    const c = fitOf(evaluateTrend(trend({ id: "t3", data: "all" }), contextOf(other)));
    if (c === undefined) throw new Error("no line");
    expect(covariance(a.line.slope, c.line.slope)).toBe(0);
  });

  it("says where it is estimated, and how many samples", () => {
    const steep = tableOf({
      X: { unit: "1", species: null, value: [0, 1, 2, 3, 4, 5, 0.5, 1, 3.5] },
      Y: { unit: "1", species: null, value: [0, 1.1, 1.9, 3.1, 3.9, 5.1, 3.6, 2.9, 0.4] },
      W: { unit: "1", species: null, value: [0, 0, 1, 0, 0, 0, 2, 2, 2] },
    });
    const second = evaluateTrend(trend({ id: "t2", method: "reduced major axis", where: "W > 0.5" }), contextOf(steep));
    const first = evaluateTrend(trend({ method: "reduced major axis", where: "W < 1.5", crossWith: "t2" }), contextOf(steep, { others: [second] }));
    expect(codes(first)).toContain("shared-samples");
    expect(first.problems.find(({ code }) => code === "shared-samples")).toMatchObject({
      severity: "note",
      text: expect.stringContaining("share 1 sample;") as string,
    });
  });
});
