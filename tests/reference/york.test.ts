import { describe, expect, it } from "vitest";
import type { TrendResult } from "@/cells";
import { resultOf } from "../cells/page/pages";
import { evaluateTable, Nearness, numberColumns, recorded } from "./recorded";

interface Line {
  readonly slope: number;
  readonly intercept: number;
  readonly "sigma slope": number;
  readonly "sigma intercept": number;
  readonly covariance: number;
}

interface Case {
  readonly id: string;
  readonly given: Readonly<Record<"x" | "y" | "sigma x" | "sigma y" | "correlation", readonly number[]>>;
  readonly exact: Line & { readonly S: number; readonly p: number; readonly observed: { readonly "sigma slope": number; readonly "sigma intercept": number } };
  readonly odr: Line & { readonly "sd_beta slope": number };
}

const cases = recorded<Case>("york");
/** The whole way of a page: a table read, error correlations declared by column, a line by the errors alone. */
const fits = cases.map(({ given }): TrendResult => {
  const blocks = [
    {
      id: "d",
      kind: "data",
      source: { file: "given.csv" },
      columns: numberColumns({ x: "sigma x", y: "sigma y", correlation: null }),
      correlations: [{ of: ["x", "y"], value: "correlation" }],
    },
    { id: "t", kind: "trend", data: "d", x: "x", y: "y", method: "york", scatter: "none" },
  ];
  return resultOf(evaluateTable(given, blocks), "t", "trend");
});
const each = (work: (known: Case, fit: TrendResult) => void): void =>
  cases.forEach((known, i) => {
    const fit = fits[i];
    if (fit === undefined) throw new Error(`${known.id} was not fitted`);
    work(known, fit);
  });

describe("York's line on Pearson's data for three error correlations and on 200 random sets (scripts/reference/york.py)", () => {
  it("converges on all of them", () => {
    expect(cases).toHaveLength(203);
    each(({ id, given }, fit) => {
      expect(fit.converged, id).toBe(true);
      expect(fit.n, id).toBe(given.x.length);
    });
  });

  it("has the slope, intercept, S and p of least S at 50 digits, to 1e-12", () => {
    const near = new Nearness();
    each(({ id, exact }, fit) => {
      near.relative("slope", id, fit.slope?.value, exact.slope, 1e-12);
      // An intercept near 0 is a difference of large numbers: it is held to 1e-12 of what it is the difference of.
      const size = Math.max(Math.abs(exact.intercept), 10 * Math.abs(exact.slope));
      near.add("intercept", id, fit.intercept?.value, exact.intercept, 1e-12 * size);
      near.relative("S", id, fit.S, exact.S, 1e-12);
      // p answers S by about S/2 of its own size.
      near.relative("p", id, fit.p, exact.p, 1e-12 * Math.max(1, exact.S / 2));
    });
    near.hold();
  });

  it("has σ and covariance of the expected information at the adjusted points, inverted, to 1e-12", () => {
    const near = new Nearness();
    each(({ id, exact }, fit) => {
      near.relative("σ of slope", id, fit.slope?.sigma, exact["sigma slope"], 1e-12);
      near.relative("σ of intercept", id, fit.intercept?.sigma, exact["sigma intercept"], 1e-12);
      near.add("covariance", id, fit.covariance, exact.covariance, 1e-12 * exact["sigma slope"] * exact["sigma intercept"]);
    });
    near.hold();
  });

  it("is the line of scipy.odr's implicit form, and its σ are those of cov_beta", () => {
    // ODRPACK comes to an implicit fit by growing penalties: to 1e-6 σ of the slope, and to 1e-4 of the covariances.
    const near = new Nearness();
    each(({ id, odr, exact }, fit) => {
      near.add("slope", id, fit.slope?.value, odr.slope, 1e-6 * exact["sigma slope"]);
      near.add("intercept", id, fit.intercept?.value, odr.intercept, 1e-6 * exact["sigma intercept"]);
      near.relative("σ of slope", id, fit.slope?.sigma, odr["sigma slope"], 1e-4);
      near.relative("σ of intercept", id, fit.intercept?.sigma, odr["sigma intercept"], 1e-4);
      near.add("covariance", id, fit.covariance, odr.covariance, 1e-4 * exact["sigma slope"] * exact["sigma intercept"]);
    });
    near.hold();
  });
});

describe("σ that other programs print and that are not ours", () => {
  it("scipy.odr's sd_beta is σ × √MSWD: it takes the errors as known up to a factor", () => {
    const near = new Nearness();
    each(({ id, odr }, fit) => near.relative("sd_beta", id, (fit.slope?.sigma ?? Number.NaN) * Math.sqrt(fit.mswd ?? Number.NaN), odr["sd_beta slope"], 1e-4));
    near.hold();
  });

  it("the observed information (second derivatives of S, residuals in them) differs by up to some percent", () => {
    const apart = cases.map(({ exact }) => Math.abs(exact.observed["sigma slope"] / exact["sigma slope"] - 1)).sort((a, b) => a - b);
    const [middle, most] = [apart[Math.floor(apart.length / 2)] ?? Number.NaN, apart.at(-1) ?? Number.NaN];
    console.log(`σ of slope by observed over expected information: apart by ${(100 * middle).toFixed(2)} % (median), ${(100 * most).toFixed(2)} % (most)`);
    // Both are right to first order; that they are apart shows that the tests above hold York's own, not any.
    expect(middle).toBeGreaterThan(1e-4);
    expect(most).toBeLessThan(0.05);
  });
});
