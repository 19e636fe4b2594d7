import { describe, expect, it } from "vitest";
import type { TrendResult } from "@/cells";
import { resultOf } from "../cells/page/pages";
import { evaluateTable, Nearness, numberColumns, recorded } from "./recorded";

interface Line {
  readonly slope: number;
  readonly intercept: number;
  readonly "sigma slope": number;
  readonly "sigma intercept": number;
}

interface Case {
  readonly id: string;
  readonly given: { readonly x: readonly number[]; readonly y: readonly number[] };
  readonly certified?: Line & { readonly "residual sd": number };
  readonly linregress?: Line;
  readonly exact: Line & { readonly "residual sd": number };
  readonly theilslopes: { readonly slope: number; readonly intercept: number; readonly low: number; readonly high: number };
}

const cases = recorded<Case>("lines");
const fit = ({ x, y }: Case["given"], method: string): TrendResult => {
  const blocks = [
    { id: "d", kind: "data", source: { file: "given.csv" }, columns: numberColumns({ x: null, y: null }) },
    { id: "t", kind: "trend", data: "d", x: "x", y: "y", method },
  ];
  return resultOf(evaluateTable({ x, y }, blocks), "t", "trend");
};

function hold(near: Nearness, at: string, line: TrendResult, known: Line, tolerance: number): void {
  near.relative("slope", at, line.slope?.value, known.slope, tolerance);
  near.add("intercept", at, line.intercept?.value, known.intercept, tolerance * Math.max(Math.abs(known.intercept), Math.abs(10 * known.slope)));
  near.relative("σ of slope", at, line.slope?.sigma, known["sigma slope"], tolerance);
  near.relative("σ of intercept", at, line.intercept?.sigma, known["sigma intercept"], tolerance);
}

describe("ordinary least squares", () => {
  it("has NIST's certified values for Norris to 1e-12 (certified to 15 digits; σ rest on residuals a thousand times smaller than y)", () => {
    const norris = cases.find(({ certified }) => certified !== undefined);
    if (norris?.certified === undefined) throw new Error("Norris is not among the recorded lines");
    expect(norris.given.x).toHaveLength(36);
    const near = new Nearness();
    const line = fit(norris.given, "ordinary least squares");
    hold(near, norris.id, line, norris.certified, 1e-12);
    near.hold();
    // The table as typed is NIST's: rational arithmetic on it gives the certified values.
    for (const [what, value] of Object.entries(norris.certified)) expect(Math.abs(Reflect.get(norris.exact, what) / value - 1), what).toBeLessThan(1e-14);
  });

  it("is that of rational arithmetic to 1e-13 and of scipy.stats.linregress to 1e-11, on 50 random sets", () => {
    const near = new Nearness();
    const byScipy = new Nearness();
    for (const { id, given, exact, linregress } of cases) {
      if (linregress === undefined) continue;
      const line = fit(given, "ordinary least squares");
      hold(near, id, line, exact, 1e-13);
      hold(byScipy, id, line, linregress, 1e-11);
    }
    near.hold();
    byScipy.hold();
  });
});

describe("Theil–Sen", () => {
  it("has the slope and intercept of scipy.stats.theilslopes (median of y − slope·x) to 1e-12", () => {
    const near = new Nearness();
    for (const { id, given, theilslopes } of cases) {
      const line = fit(given, "theil-sen");
      near.relative("slope", id, line.slope?.value, theilslopes.slope, 1e-12);
      near.add(
        "intercept",
        id,
        line.intercept?.value,
        theilslopes.intercept,
        1e-12 * Math.max(Math.abs(theilslopes.intercept), 10 * Math.abs(theilslopes.slope)),
      );
    }
    near.hold();
  });

  it("takes σ of the slope from Sen's 95 % interval", () => {
    // Sen 1968: of N pairs' slopes in order, the M-th and the (N + 1 − M)-th, M = (N − C)/2 and C = 1.96 σ of Kendall's statistic.
    // M is seldom whole: scipy rounds it to the nearest, we take the outer slope. So ours is scipy's, or one slope wider at an end.
    let wider = 0;
    const random = cases.filter(({ id }) => id.startsWith("random")); // Norris has equal x, for which scipy takes another σ.
    for (const { id, given, theilslopes } of random) {
      const slopes = given.x
        .flatMap((x, i) => given.x.slice(i + 1).map((other, j) => ((given.y[i + 1 + j] ?? NaN) - (given.y[i] ?? NaN)) / (other - x)))
        .sort((a, b) => a - b);
      const rank = (value: number): number => slopes.findIndex((slope) => Math.abs(slope - value) <= 1e-9 * Math.abs(value));
      const [low, high] = [rank(theilslopes.low), rank(theilslopes.high)];
      const widths = [0, 1].flatMap((below) =>
        [0, 1].map((above) => (slopes[high + above] ?? slopes[high] ?? NaN) - (slopes[low - below] ?? slopes[low] ?? NaN)),
      );
      const width = 2 * 1.959963984540054 * (fit(given, "theil-sen").slope?.sigma ?? Number.NaN);
      expect(Math.min(...widths.map((each) => Math.abs(each / width - 1))), id).toBeLessThan(1e-12);
      if (width > (widths[0] ?? NaN) * (1 + 1e-12)) wider++;
    }
    console.log(`Sen's interval is wider than scipy's in ${wider} of ${random.length} sets`);
  });
});
