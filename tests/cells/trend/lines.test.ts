import { describe, expect, it } from "vitest";

import { fitPoints } from "./pages";

// A worked example small enough for paper: Sxx = 10, Sxy = 6, Syy = 6, means 3 and 4.
const x = [1, 2, 3, 4, 5];
const y = [2, 4, 5, 4, 5];

describe("lines that take their σ from the scatter of the points", () => {
  it("ordinary least squares: b = 6/10, a = 4 − 0.6·3; s² = 2.4/3, var b = s²/10, var a = s²(1/5 + 9/10), cov = −3 var b (by hand)", () => {
    const fit = fitPoints({ x, y }, { method: "ordinary least squares" });
    expect(fit.slope?.value).toBeCloseTo(0.6, 14);
    expect(fit.intercept?.value).toBeCloseTo(2.2, 14);
    expect(fit.slope?.sigma).toBeCloseTo(Math.sqrt(0.08), 14);
    expect(fit.intercept?.sigma).toBeCloseTo(Math.sqrt(0.88), 14);
    expect(fit.covariance).toBeCloseTo(-0.24, 14);
    expect(fit.mswd).toBeUndefined();
  });

  it("ordinary least squares: the first of Anscombe's four sets (1973, Am. Stat. 27, 17) has slope 0.5, intercept 3 and σ of slope 0.118", () => {
    const fit = fitPoints(
      { x: [10, 8, 13, 9, 11, 14, 6, 4, 12, 7, 5], y: [8.04, 6.95, 7.58, 8.81, 8.33, 9.96, 7.24, 4.26, 10.84, 4.82, 5.68] },
      { method: "ordinary least squares" },
    );
    expect(fit.slope?.value).toBeCloseTo(0.5, 3);
    expect(fit.intercept?.value).toBeCloseTo(3, 2);
    expect(fit.slope?.sigma).toBeCloseTo(0.118, 3);
  });

  it("ordinary least squares keeps its digits 10⁸ away from the origin", () => {
    const fit = fitPoints({ x: x.map((v) => v + 1e8), y }, { method: "ordinary least squares" });
    expect(fit.slope?.value).toBeCloseTo(0.6, 12);
    expect(fit.slope?.sigma).toBeCloseTo(Math.sqrt(0.08), 12);
  });

  it("reduced major axis: b = √(6/10), a = 4 − 3b, σ of b = b√((1 − 0.6)/3) (by hand)", () => {
    const fit = fitPoints({ x, y }, { method: "reduced major axis" });
    const b = Math.sqrt(0.6);
    expect(fit.slope?.value).toBeCloseTo(b, 14);
    expect(fit.intercept?.value).toBeCloseTo(4 - 3 * b, 14);
    expect(fit.slope?.sigma).toBeCloseTo(b * Math.sqrt(0.4 / 3), 14);
    const falling = fitPoints({ x, y: y.map((v) => -v) }, { method: "reduced major axis" });
    expect(falling.slope?.value).toBeCloseTo(-b, 14);
  });

  it("Theil–Sen: median of −1, 0, 0, 1/3, 2/3, 3/4, 1, 1, 3/2, 2 is 17/24; median of y − bx is 35/24 (by hand)", () => {
    const fit = fitPoints({ x, y }, { method: "theil-sen" });
    expect(fit.slope?.value).toBeCloseTo(17 / 24, 14);
    expect(fit.intercept?.value).toBeCloseTo(35 / 24, 14);
    expect(fit.problems.find((problem) => problem.code === "intercept-convention")?.text).toContain("median of y − slope · x");
  });

  it("Theil–Sen does not follow one wild point, least squares does", () => {
    const wild = [0, 1, 2, 3, 4, 5, 6, 7, 8, 90];
    const at = wild.map((_, i) => i);
    expect(fitPoints({ x: at, y: wild }, { method: "theil-sen" }).slope?.value).toBeCloseTo(1, 12);
    expect(fitPoints({ x: at, y: wild }, { method: "ordinary least squares" }).slope?.value).toBeGreaterThan(3);
  });

  it("refuses what has no direction", () => {
    const none = fitPoints({ x: [0, 1, 2, 1], y: [1, 2, 1, 0] }, { method: "reduced major axis" });
    expect(none.ok).toBe(false);
    expect(none.problems.map((problem) => problem.code)).toContain("no-direction");
    for (const method of ["ordinary least squares", "theil-sen", "reduced major axis"] as const) {
      expect(fitPoints({ x: [1, 2], y: [1, 2] }, { method }).problems.map((problem) => problem.code)).toEqual(expect.arrayContaining(["too-few-points"]));
      expect(fitPoints({ x: [3, 3, 3], y: [1, 2, 4] }, { method }).problems.map((problem) => problem.code)).toEqual(expect.arrayContaining(["x-all-equal"]));
    }
  });
});
