import { describe, expect, it } from "vitest";
import { countsText, natureText, rangeText, stateInWords } from "@/app/_blocks/formula/headWords";
import type { LineResult } from "@/cells";

function line(change: Partial<LineResult>): LineResult {
  const value = Float64Array.of(0.67, 1.352, NaN);
  return {
    name: "mg_si",
    span: [0, 5],
    expressionSpan: [0, 5],
    ok: true,
    unit: "1",
    basis: "mass",
    remark: null,
    perSample: true,
    n: 29,
    states: { "set aside": 1 },
    value,
    sigma: value.map((v) => (Number.isFinite(v) ? 0.008 : NaN)),
    sigmaCommon: value.map(() => 0),
    state: Uint8Array.of(0, 0, 4),
    lowerBound: new Uint8Array(3),
    assumed: 0,
    ...change,
  };
}

describe("head of a formula line", () => {
  it("says range, basis, typical σ and what became of every sample", () => {
    expect(rangeText(line({}), "concise")).toBe("0.670 – 1.352");
    expect(natureText(line({}))).toBe("by mass, median σ 0.008");
    expect(countsText(line({}))).toBe("29 samples, 1 set aside");
  });

  it("never takes one value of many samples, or one value a class, for samples", () => {
    expect(countsText(line({ perSample: false, n: 1, states: {} }))).toBe("one value");
    expect(countsText(line({ perSample: false, n: 0, states: {} }))).toBe("no samples in it");
    expect(countsText(line({ perSample: false, n: 2, states: {}, byClass: ["CM", "CV"] }))).toBe("2 classes");
  });

  it("never takes an unknown σ for none", () => {
    expect(natureText(line({ sigma: Float64Array.of(NaN, NaN, NaN), sigmaCommon: Float64Array.of(NaN, NaN, NaN) }))).toBe("by mass, σ unknown");
  });

  it("says what is assumed, what is a lower bound and what all samples share", () => {
    const text = natureText(line({ assumed: 12, lowerBound: Uint8Array.of(1, 0, 0), sigmaCommon: Float64Array.of(0.006, 0.006, NaN) }));
    expect(text).toBe("by mass, median σ 0.008, part of σ is common to all, σ a lower bound for 1, 12 on assumed σ");
  });

  it("says a single value with its σ and unit", () => {
    expect(rangeText(line({ perSample: false, unit: "wt%", value: Float64Array.of(24.1), sigma: Float64Array.of(0.15) }), "concise")).toBe(
      "24.10(15)\u2009wt%",
    );
  });

  it("counts the lines that have a problem", () => {
    const result = { kind: "formula" as const, problems: [], bodiesUsed: {}, correlation: [], lines: [line({}), line({ ok: false })] };
    expect(stateInWords(result)).toEqual({ text: "1 line of 2 has a problem", problem: true });
  });
});
