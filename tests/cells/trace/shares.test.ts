import { describe, expect, it } from "vitest";
import { dominantOf } from "@/cells";
import { nodesOf } from "../page/pages";
import { data, opened, ratios, table, trendOver, worstMiss } from "./pageWithMany";

const aggregates = (text: string): object => ({ id: "q", kind: "formula", data: "d", text });

describe("shares of the variance", () => {
  it("of a fit go through its samples to their cells, and sum to 1 at every node", () => {
    const page = opened([data, ratios, trendOver("ta", "a", { crossWith: "tb" }), trendOver("tb", "b")]);
    for (const name of ["slope", "intercept", "crossing.x", "crossing.y"]) {
      const node = page.ask({ block: "ta", name });
      expect(worstMiss(node), name).toBeLessThan(1e-9);
      const cells = nodesOf(node).filter(({ cell }) => cell !== undefined);
      expect(cells.length, name).toBe(name.startsWith("crossing") ? 180 : 90);
      const sum = cells.reduce((total, { share }) => total + (share ?? 0), 0);
      const scatter = nodesOf(node).reduce((total, { label, share }) => total + (label.startsWith("scatter of") ? (share ?? 0) : 0), 0);
      expect(sum + scatter, name).toBeCloseTo(1, 9);
    }
  });

  // York's σ takes points at their adjusted places and weights as given, which finite differences do not: they agree to 1 % of all.
  it("of a slope are what finite differences say: (∂slope/∂cell)² σ², over all cells", () => {
    const blocks = [data, ratios, trendOver("ta", "a", { scatter: "none" })];
    const node = opened(blocks, 12).ask({ block: "ta", name: "slope" });
    const rows = table(12).split("\n");
    const slopeWith = (text: string): number => opened(blocks, 12, {}, text).ask({ block: "ta", name: "slope" }).value ?? Number.NaN;
    const parts = new Map<string, number>();
    for (let row = 1; row <= 12; row++)
      for (const [place, column] of [
        [2, "SiO2"],
        [4, "MgO"],
        [6, "Al2O3"],
      ] as const) {
        const shifted = (by: number): string => {
          const cells = (rows[row] ?? "").split(",");
          cells[place] = String(Number(cells[place]) + by);
          return rows.with(row, cells.join(",")).join("\n");
        };
        const sigma = Number((rows[row] ?? "").split(",")[place + 1]);
        const step = 0.02 * sigma;
        parts.set(`${row} ${column}`, (((slopeWith(shifted(step)) - slopeWith(shifted(-step))) / (2 * step)) * sigma) ** 2);
      }
    const total = [...parts.values()].reduce((sum, part) => sum + part, 0);
    for (const { cell, share } of nodesOf(node))
      if (cell !== undefined) expect(Math.abs((share ?? Number.NaN) - (parts.get(`${cell.row} ${cell.column}`) ?? 0) / total)).toBeLessThan(0.01);
    const [first] = [...parts].sort((x, y) => y[1] - x[1]);
    const most = dominantOf(node);
    expect(`${most?.node.cell?.row} ${most?.node.cell?.column}`).toBe(first?.[0]);
    expect(most?.inputs).toBe(36);
  });

  it("add up what stands in several branches before they name the largest", () => {
    const page = opened([data, { id: "q", kind: "formula", data: "d", text: "m = (Mg + Al) / (Si + Mg)" }]);
    const most = dominantOf(page.ask({ block: "q", name: "m", index: 3 }));
    const cells = nodesOf(page.ask({ block: "q", name: "m", index: 3 })).filter(({ cell }) => cell !== undefined);
    expect(most?.share).toBeCloseTo(Math.max(...cells.map(({ share }) => share ?? 0)), 12);
  });

  it("of a plain mean are by the distances from it, of a weighted mean by 1/σ² down to the cells", () => {
    const page = opened([data, ratios, aggregates('m = mean(mg_si, "a")\nw = wmean(mg_si, "a")\nx = least(mg_si)\nmed = median(mg_si, "b")')]);
    for (const name of ["m", "w", "x", "med"]) expect(worstMiss(page.ask({ block: "q", name })), name).toBeLessThan(1e-9);
    const line = page.results.blocks.get("r");
    const values = line?.kind === "formula" ? Array.from(line.lines[0]?.value ?? []).slice(0, 30) : [];
    const sigmas = line?.kind === "formula" ? Array.from(line.lines[0]?.sigma ?? []).slice(0, 30) : [];
    const mean = values.reduce((sum, x) => sum + x, 0) / 30;
    const squares = values.map((x) => (x - mean) ** 2);
    const total = squares.reduce((sum, x) => sum + x, 0);
    const [ofMean] = page.ask({ block: "q", name: "m" }).from;
    for (const { label, share } of ofMean?.from ?? []) expect(share).toBeCloseTo((squares[Number(label.slice(2)) - 1] ?? 0) / total, 10);
    const weights = sigmas.map((sigma) => 1 / sigma ** 2);
    const sum = weights.reduce((a, b) => a + b, 0);
    const [ofWeighted] = page.ask({ block: "q", name: "w" }).from;
    for (const { label, share } of ofWeighted?.from ?? []) expect(share).toBeCloseTo((weights[Number(label.slice(2)) - 1] ?? 0) / sum, 10);
    expect(dominantOf(page.ask({ block: "q", name: "w" }))?.node.cell).toBeDefined();
    expect(dominantOf(page.ask({ block: "q", name: "m" }))).toMatchObject({ isSample: true });
    expect(dominantOf(page.ask({ block: "q", name: "x" }))?.node.cell).toBeDefined();
  });

  it("of a mean over 300 samples list the 200 that bring most, and sum the rest", () => {
    const page = opened([data, ratios, aggregates("m = mean(mg_si)")], 150);
    const [mean] = page.ask({ block: "q", name: "m" }).from;
    expect(mean?.from).toHaveLength(201);
    expect(mean?.from[200]).toMatchObject({ kind: "aggregate", label: "100 more samples" });
    const shares = (mean?.from ?? []).map(({ share }) => share ?? 0);
    expect(shares.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 10);
    expect(shares.slice(0, 200)).toEqual([...shares.slice(0, 200)].sort((a, b) => b - a));
    // What was summed is no single input, however large.
    expect(dominantOf(page.ask({ block: "q", name: "m" }))?.node.label).toBe(mean?.from[0]?.label);
  });

  it("of least squares, reduced major axis and Theil–Sen end at the samples", () => {
    for (const method of ["ordinary least squares", "reduced major axis", "theil-sen"]) {
      const page = opened([data, ratios, trendOver("ta", "a", { method })]);
      const node = page.ask({ block: "ta", name: "slope" });
      expect(worstMiss(node), method).toBeLessThan(1e-9);
      expect(node.from[0]?.from, method).toHaveLength(30);
      expect(dominantOf(node), method).toMatchObject({ isSample: true });
    }
  });

  it("of a line through class means end at the samples of the classes", () => {
    const four = table(12).replace(/^(?<name>[AB]-[1-6]),(?<group>[ab])/gmu, "$<name>,$<group>2");
    const page = opened([data, trendOver("t", "", { where: undefined, x: "mean(MgO, Group)", y: "mean(Al2O3, Group)" })], 12, {}, four);
    const node = page.ask({ block: "t", name: "slope" });
    expect(node.from[0]?.from.map(({ label }) => label).sort()).toEqual(["a", "a2", "b", "b2"]);
    expect(worstMiss(node)).toBeLessThan(1e-9);
    expect(nodesOf(node).filter(({ cell }) => cell !== undefined)).toHaveLength(48);
  });

  it("is null where no σ is known", () => {
    const page = opened([data, aggregates("b = at(Mg / Si, BSE)")]);
    expect(dominantOf(page.ask({ block: "q", name: "b" }))).toBeNull();
  });
});
