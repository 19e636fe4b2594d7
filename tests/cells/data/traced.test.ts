import { describe, expect, it } from "vitest";
import { createEngine, readPageDocument, type TraceNode } from "../../../cells";

const encode = (text: string): Uint8Array => new TextEncoder().encode(text);

/** A page of three tables: two sources, their stack and their join. */
function pageOf(): ReturnType<typeof createEngine> {
  const engine = createEngine();
  engine.setSource("a.csv", encode("Sample,MgO\nA,37\nB,38\n"));
  engine.setSource("b.csv", encode("Name,magnesia\nB,390000\nB,410000\n"));
  const page = readPageDocument({
    format: "cotectic-page/1",
    title: "t",
    blocks: [
      {
        id: "a",
        kind: "data",
        source: { file: "a.csv" },
        columns: [
          { header: "Sample", role: "sample" },
          { header: "MgO", role: "quantity", species: "MgO", unit: "wt%" },
        ],
      },
      {
        id: "b",
        kind: "data",
        source: { file: "b.csv" },
        columns: [
          { header: "Name", role: "sample" },
          { header: "magnesia", name: "MgO", role: "quantity", species: "MgO", unit: "µg/g" },
        ],
        setAside: [{ row: 2, reason: "x" }],
      },
      { id: "all", kind: "data", stack: ["a", "b"], replicates: "mean" },
      { id: "j", kind: "data", join: ["a", "b"] },
    ],
  });
  engine.evaluate(page);
  return engine;
}

/** The cells that a trace ends in. */
function cells(node: TraceNode | null): string[] {
  if (node === null) return [];
  return node.cell === undefined ? node.from.flatMap(cells) : [`${node.cell.block} ${node.cell.row} ${node.cell.column}: ${node.cell.raw}`];
}

describe("values of tables made of tables", () => {
  it("are traced to every cell they came from", () => {
    const engine = pageOf();
    expect(cells(engine.trace({ block: "all", name: "MgO", index: 1 }))).toEqual(["a 2 MgO: 38", "b 1 MgO: 390000"]);
    expect(cells(engine.trace({ block: "all", name: "MgO", index: 0 }))).toEqual(["a 1 MgO: 37"]);
  });

  it("are traced to the table they came from, and not to its neighbour's column of the same species", () => {
    const engine = pageOf();
    expect(cells(engine.trace({ block: "j", name: "MgO_b", index: 1 }))).toEqual(["b 1 MgO: 390000"]);
    expect(cells(engine.trace({ block: "j", name: "MgO", index: 1 }))).toEqual(["a 2 MgO: 38"]);
  });
});
