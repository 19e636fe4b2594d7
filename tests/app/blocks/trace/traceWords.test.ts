import { describe, expect, it } from "vitest";
import {
  askedInWords,
  askedTitle,
  branchWidth,
  cellInWords,
  countCells,
  dividedBranches,
  hasShares,
  mostOfSigma,
  restText,
  shareText,
  startsOpen,
} from "@/app/_blocks/trace/traceWords";
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

  const cell = (row: number, sample: string, column: string, share: number, sigma: number): TraceNode =>
    node({ kind: "cell", label: column, sigma, unit: "wt%", share, cell: { block: "th", row, sample, column, raw: "1", rawSigma: "" } });

  it("says in one sentence what dominates σ, with that input's own 1σ", () => {
    const tree = node({ share: 1, from: [cell(7, "TH-07", "Al2O3", 0.61, 0.05), cell(7, "TH-07", "SiO2", 0.39, 0.2)] });
    expect(mostOfSigma(tree).map(({ text }) => text)).toEqual(["61 % of the variance comes from Al2O3 of TH-07, 1σ 0.050\u2009wt%."]);
    expect(mostOfSigma(tree)[0]?.cell).toMatchObject({ row: 7, column: "Al2O3" });
    expect(mostOfSigma(node({ share: 1, from: [cell(7, "", "Al2O3", 1, 0.05)] }))[0]?.text).toContain("All of the variance comes from Al2O3 of row 7 of th");
    expect(mostOfSigma(node({ sigma: null }))).toEqual([]);
  });

  it("names the measurement that brings most, where something else dominates or nothing does", () => {
    const body = node({ kind: "body", label: "Al of CI_PLJ14", sigma: 0.04, unit: "wt%", share: 0.9 });
    expect(mostOfSigma(node({ share: 1, from: [body, cell(7, "TH-07", "Al2O3", 0.1, 0.05)] })).map(({ text }) => text)).toEqual([
      "90 % of the variance comes from Al of CI_PLJ14, 1σ 0.040\u2009wt%.",
      "Of the measurements, Al2O3 of TH-07, 1σ 0.050\u2009wt% brings most, 10 %.",
    ]);
    const even = node({ share: 1, from: Array.from({ length: 10 }, (_, i) => cell(i, `S${i}`, "MgO", 0.1, 0.2)) });
    expect(mostOfSigma(even)[0]?.text).toMatch(/^No single input dominates: of 10, MgO of S\d, 1σ 0\.20\u2009wt% brings most, 10 % of the variance\.$/u);
  });

  it("adds up one cell that stands in two branches", () => {
    const tree = node({
      share: 1,
      from: [
        node({ share: 0.5, from: [cell(1, "A", "MgO", 0.3, 1), cell(2, "B", "MgO", 0.2, 1)] }),
        node({ share: 0.5, from: [cell(2, "B", "MgO", 0.25, 1), cell(3, "C", "MgO", 0.25, 1)] }),
      ],
    });
    expect(mostOfSigma(tree)[0]?.text).toContain("45 % of the variance comes from MgO of B");
  });

  it("keeps long lists readable: the largest, the way to what dominates, and the rest in one line", () => {
    const many = Array.from({ length: 30 }, (_, i) => node({ label: `S${i}`, share: 0.01 }));
    const late = many[20];
    if (late === undefined) throw new Error("thirty samples");
    const { shown, rest } = dividedBranches(many, 1, new Set([late]));
    expect(shown.map(({ label }) => label)).toEqual(["S0", "S1", "S2", "S3", "S4", "S20"]);
    expect(restText(rest)).toBe("24 more, 24 % together");
    expect(dividedBranches(many.slice(0, 6), 1, new Set()).rest).toEqual([]);
    expect(startsOpen(late, 1, new Set())).toBe(false);
    expect(startsOpen(late, 1, new Set([late]))).toBe(true);
  });

  it("calls what is asked as the page does", () => {
    const titles = ["crossing.x", "solved", "from_CI", "crossing.from_CI", "left.mass", "left.Si", "Al / Si.miss", "mg_si"].map((name) =>
      askedTitle({ block: "b", name }, null),
    );
    expect(titles).toEqual([
      "crossing, across",
      "solved amount",
      "distance of CI from the line",
      "distance of CI from the crossing",
      "mass left behind",
      "Si of what was left behind",
      "Al/Si, miss",
      "mg_si",
    ]);
    expect(askedTitle({ block: "p", name: "0:x", index: 3 }, node({ label: "Mg / Si" }))).toBe("Mg/Si");
  });
});
