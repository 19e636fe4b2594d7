import { describe, expect, it } from "vitest";
import { createEngine, type Engine, type TraceNode } from "@/cells";
import { nodesOf, pageOf } from "../page/pages";

/** Three analyses of A and one of B; the third of A has no σ. Invented numbers. */
const csv = "Sample,Lab,MgO (wt%),1s MgO\nA,one,38.0,0.2\nB,one,24.0,0.3\nA,two,38.6,0.4\nA,three,39.4,\n";

function engineWith(blocks: readonly object[]): Engine {
  const engine = createEngine();
  engine.setSource("a.csv", new TextEncoder().encode(csv));
  engine.evaluate(pageOf(blocks));
  return engine;
}

const source = { id: "a", kind: "data", source: { file: "a.csv" } };

function traceOf(engine: Engine, block: string, index = 0, name = "MgO"): TraceNode {
  const node = engine.trace({ block, name, index });
  if (node === null) throw new Error(`${block}.${name} has no trace`);
  return node;
}

/** Cell by cell: where it stands, its number, σ, share and what its first note says. */
function rowsOf(node: TraceNode): { row: unknown; value: number | null; sigma: number | null; share: number | null; note: string | undefined }[] {
  return nodesOf(node).flatMap(({ cell, value, sigma, share, notes }) => (cell === undefined ? [] : [{ row: cell.row, value, sigma, share, note: notes[0] }]));
}

describe("the trace of a merged replicate", () => {
  it("shows each analysis with its own cell and its weight in the weighted mean", () => {
    const node = traceOf(engineWith([{ ...source, replicates: "weighted" }]), "a");
    // 1/σ² by hand: 25 and 6.25, the third has none.
    const [w1, w2] = [25 / 31.25, 6.25 / 31.25];
    expect(rowsOf(node)).toEqual([
      { row: 1, value: 38, sigma: expect.closeTo(0.2, 12) as number, share: expect.closeTo(w1, 12) as number, note: "Counts with weight 0.8 in the mean." },
      { row: 3, value: 38.6, sigma: expect.closeTo(0.4, 12) as number, share: expect.closeTo(w2, 12) as number, note: "Counts with weight 0.2 in the mean." },
      { row: 4, value: 39.4, sigma: null, share: 0, note: "Does not count here." },
    ]);
    expect(node.value).toBeCloseTo(w1 * 38 + w2 * 38.6, 12);
    expect(node.sigma).toBeCloseTo(1 / Math.sqrt(31.25), 12);
    expect(nodesOf(node).find(({ kind }) => kind === "aggregate")?.notes).toContain("Mean of the analyses of one sample, weighted by 1/σ²; σ is 1/√Σ(1/σ²).");
  });

  it("divides the σ of a plain mean by each analysis' distance from it", () => {
    const node = traceOf(engineWith([{ ...source, replicates: "mean" }]), "a");
    const values = [38, 38.6, 39.4];
    const mean = values.reduce((sum, x) => sum + x, 0) / 3;
    const squares = values.map((x) => (x - mean) ** 2);
    const total = squares.reduce((sum, x) => sum + x, 0);
    const found = rowsOf(node);
    expect(found.map(({ row }) => row)).toEqual([4, 1, 3]);
    for (const { value, share, note } of found) {
      expect(share).toBeCloseTo((squares[values.indexOf(value ?? 0)] ?? 0) / total, 12);
      expect(note).toBe("Counts with weight 0.3333 in the mean.");
    }
    expect(node.value).toBeCloseTo(mean, 12);
    expect(node.sigma).toBeCloseTo(Math.sqrt(total / 2 / 3), 12);
  });

  it("says which analysis was preferred, and that the others do not count", () => {
    const node = traceOf(engineWith([{ ...source, replicates: { prefer: ["two", "one"] } }]), "a");
    const found = rowsOf(node);
    expect(found[0]).toMatchObject({ row: 3, value: 38.6, share: 1, note: "This analysis is the one that counts." });
    expect(found.slice(1).map(({ row, share, note }) => [row, share, note])).toEqual([
      [1, 0, "Does not count here."],
      [4, 0, "Does not count here."],
    ]);
  });

  it("is the plain cell of its source row where a sample was measured once", () => {
    const found = rowsOf(traceOf(engineWith([{ ...source, replicates: "weighted" }]), "a", 1));
    expect(found).toMatchObject([{ row: 2, value: 24, share: 1 }]);
  });

  it("keeps the weights through a stack of merged tables and through a formula", () => {
    const blocks = [
      { ...source, replicates: "weighted" },
      { id: "all", kind: "data", stack: ["a"] },
      { id: "f", kind: "formula", data: "all", text: "m = 2 * MgO" },
    ];
    const node = traceOf(engineWith(blocks), "f", 0, "m");
    expect(rowsOf(node).map(({ row, share }) => [row, share])).toEqual([
      [1, expect.closeTo(0.8, 12)],
      [3, expect.closeTo(0.2, 12)],
      [4, 0],
    ]);
  });

  it("keeps them where a join merged its tables, and where a stack merged across its own", () => {
    const engine = engineWith([
      source,
      {
        id: "b",
        kind: "data",
        columns: [
          { name: "Sample", role: "sample" },
          { name: "Al2O3", role: "quantity", species: "Al2O3", unit: "wt%" },
        ],
        typed: [{ id: "r1", cells: { Sample: "A", Al2O3: "3.1" } }],
      },
      { id: "j", kind: "data", join: ["a", "b"], replicates: "weighted" },
      { id: "s", kind: "data", stack: ["a"], replicates: "weighted" },
    ]);
    for (const block of ["j", "s"])
      expect(rowsOf(traceOf(engine, block)).map(({ row, share }) => [row, share])).toEqual([
        [1, expect.closeTo(0.8, 12)],
        [3, expect.closeTo(0.2, 12)],
        [4, 0],
      ]);
  });
});
