import { describe, expect, it } from "vitest";
import { packPlot, unpackPlot } from "@/app/_page/plotPacking";
import { createEngine, PAGE_FORMAT, type BlockResult, type PlotResult, type Table } from "@/cells";

const csv = "Sample,Group,MgO (wt%),SiO2 (wt%),Reference\nTH-1,a,38,45,Orr 2025\nTH-2,b,39,44,Orr 2025\nTH-3,a,37,46,\n";

function results(): ReadonlyMap<string, BlockResult> {
  const engine = createEngine();
  engine.setSource("t.csv", new TextEncoder().encode(csv));
  return engine.evaluate({
    format: PAGE_FORMAT,
    title: "",
    blocks: [
      { id: "d", kind: "data", source: { file: "t.csv" } },
      { id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "d", x: "MgO", y: "SiO2" }] },
    ],
  }).blocks;
}

function plotOf(blocks: ReadonlyMap<string, BlockResult>): PlotResult {
  const plot = blocks.get("p");
  if (plot?.kind !== "plot") throw new Error("no plot");
  return plot;
}

const tableOf =
  (blocks: ReadonlyMap<string, BlockResult>) =>
  (handle: string): Table | undefined => {
    const result = blocks.get(handle);
    return result?.kind === "data" ? result.table : undefined;
  };

describe("a plot on its way to the page", () => {
  it("leaves the texts of its samples with their table, and has them again", () => {
    const blocks = results();
    const packed = packPlot(plotOf(blocks), tableOf(blocks));
    expect(JSON.stringify(packed)).not.toContain("TH-1");
    const [layer] = unpackPlot(structuredClone(packed), blocks).layers;
    if (layer?.what !== "samples") throw new Error("no samples");
    const [before] = plotOf(blocks).layers;
    if (before?.what !== "samples") throw new Error("no samples");
    expect([layer.samples, layer.classes, layer.rows, layer.references]).toEqual([before.samples, before.classes, before.rows, before.references]);
    expect(layer.samples).toEqual(["TH-1", "TH-2", "TH-3"]);
  });

  it("takes its texts along where the page has another table than the plot was made from", () => {
    const packed = packPlot(plotOf(results()), tableOf(results()));
    expect(JSON.stringify(packed)).toContain("TH-1");
  });
});
