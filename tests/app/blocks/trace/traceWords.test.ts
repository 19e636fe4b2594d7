import { describe, expect, it } from "vitest";
import { askedInWords, branchWidth, cellInWords, countCells, hasShares, shareText } from "@/app/_blocks/trace/traceWords";
import type { TraceNode } from "@/cells";

const node = (change: Partial<TraceNode>): TraceNode => ({
  kind: "result",
  label: "x",
  value: 1,
  sigma: 0.1,
  unit: "1",
  share: null,
  notes: [],
  from: [],
  ...change,
});

describe("a trace in words", () => {
  it("draws branches as wide as their share, never invisibly thin", () => {
    expect([1, 0.65, 0.35, 0.001, null].map(branchWidth)).toEqual([12, 8, 4, 1, 1]);
  });

  it("says shares, and nothing where no σ is known", () => {
    expect([0.354, 0.004, 0, null].map(shareText)).toEqual(["35 %", "under 1 %", "0 %", ""]);
  });

  it("says what the number is", () => {
    expect(askedInWords(node({ basis: "mass" }))).toBe("by mass, 1σ");
    expect(askedInWords(node({ sigma: null }))).toBe("σ unknown");
  });

  it("names the row a cell stands in, as the source counts it", () => {
    expect(cellInWords({ block: "th", row: 7, sample: "TH-07", column: "MgO (wt%)", raw: "42.1", rawSigma: "" })).toBe("row 7, MgO (wt%)");
  });

  it("knows whether any branch has a share, and how many cells there are", () => {
    const tree = node({ from: [node({ share: 0.5, from: [node({ kind: "cell" })] }), node({ kind: "cell" })] });
    expect(hasShares(tree)).toBe(true);
    expect(countCells(tree)).toBe(2);
  });
});
