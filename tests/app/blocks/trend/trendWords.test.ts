import { describe, expect, it } from "vitest";
import { residualLayout } from "@/app/_blocks/trend/residualLayout";
import { equationOf, mswdPlace, probabilityInWords, rulerEnd, samplesOfFit, stateInWords, trendSimulated } from "@/app/_blocks/trend/trendWords";
import type { TrendPoint, TrendResult } from "@/cells";

const axis = (label: string) => ({ expression: label, label, unit: "1", basis: "mass" as const });
const point = (index: number, change: Partial<TrendPoint> = {}): TrendPoint => ({
  index,
  row: index + 1,
  sample: `S${index}`,
  class: "H",
  x: index,
  y: index,
  sigmaX: 1,
  sigmaY: 1,
  correlation: 0,
  residual: 0,
  outlier: false,
  ...change,
});

function trend(change: Partial<TrendResult> = {}): TrendResult {
  return {
    kind: "trend",
    method: "york",
    ok: true,
    n: 11,
    leftOut: { "not chosen": 2, "set aside": 1, missing: 0 },
    x: axis("Mg / Si"),
    y: axis("Al / Si"),
    slope: { value: 0.161, sigma: 0.007, sigmaWithScatter: 0.009 },
    intercept: { value: -0.066, sigma: 0.005, sigmaWithScatter: 0.006 },
    mswd: 1.22,
    mswdExpected: [0.3, 2.11],
    p: 0.28,
    scatter: 0,
    usesScatter: false,
    converged: true,
    points: [point(0), point(1, { class: "EL" })],
    fromBodies: [],
    problems: [],
    bodiesUsed: {},
    ...change,
  };
}

describe("a trend in words", () => {
  it("writes its equation with the intercept's sign outside", () => {
    expect(equationOf(trend())).toEqual({
      y: "Al/Si",
      x: "Mg/Si",
      slope: { value: 0.161, sigma: 0.007 },
      sign: "−",
      intercept: { value: 0.066, sigma: 0.005 },
      withScatter: false,
    });
  });

  it("uses the σ with scatter where the points scatter beyond their errors", () => {
    expect(equationOf(trend({ usesScatter: true }))?.slope.sigma).toBe(0.009);
    expect(stateInWords(trend({ p: 0.003, usesScatter: true }))).toEqual({ text: "scatter beyond errors", problem: true });
  });

  it("has no equation without a fit", () => {
    expect(equationOf(trend({ ok: false }))).toBeNull();
    expect(stateInWords(trend({ ok: false }))).toEqual({ text: "no fit", problem: true });
  });

  it("places the MSWD on what is expected, whose ends belong to it", () => {
    expect([0.29, 0.3, 2.11, 2.12].map((m) => mswdPlace(m, [0.3, 2.11]))).toEqual(["below", "inside", "inside", "above"]);
    expect(rulerEnd(1.22, [0.3, 2.11])).toBe(3);
  });

  it("says what p means, and does not praise points that lie too well", () => {
    expect(probabilityInWords(trend())).toBe("0.28, the errors explain the scatter");
    expect(probabilityInWords(trend({ p: 0.003, scatter: 0.0053 }))).toBe("0.003, more scatter than the errors explain; 0.0053 in Al/Si added");
    expect(probabilityInWords(trend({ p: 0.99 }))).toContain("less than their errors allow");
  });

  it("names the classes and counts who is left out, by why", () => {
    expect(samplesOfFit(trend())).toBe("H and EL; 2 not chosen, 1 set aside");
  });
});

describe("residuals on their strip", () => {
  it("stand along x, outliers by name", () => {
    const layout = residualLayout([point(0, { x: 2, residual: 3, outlier: true }), point(1, { x: 1, residual: -1 })], 428);
    expect(layout.marks.map((m) => m.point.index)).toEqual([1, 0]);
    expect(layout.marks[0]?.name).toBeNull();
    expect(layout.marks[1]?.name).not.toBeNull();
    expect((layout.marks[1]?.y ?? 0) < layout.middle).toBe(true);
  });

  it("keep a wild point from flattening the others, and count it", () => {
    const layout = residualLayout([point(0, { residual: 100 }), point(1)], 428);
    expect(layout.clipped).toBe(1);
    expect(layout.height).toBeLessThan(260);
  });
});

describe("a simulated trend", () => {
  const quantiles = (at: number) => ({ median: at, from68: at - 0.01, to68: at + 0.01, from95: at - 0.02, to95: at + 0.02 });

  it("is said number by number, those without draws left out", () => {
    expect(trendSimulated(trend())).toEqual([]);
    const simulated = {
      draws: 2000,
      seed: 1,
      withoutLine: 0,
      slope: quantiles(0.16),
      intercept: null,
      crossing: { withoutCrossing: 3, x: quantiles(1.05), y: quantiles(0.1) },
    };
    const said = trendSimulated(trend({ simulated }));
    expect(said.map(({ head }) => head)).toEqual(["slope", "crossing, across", "crossing, upwards"]);
    expect(said[0]?.text).toContain("68 % within 0.150 to 0.170");
  });
});
