import { describe, expect, it } from "vitest";
import { nowhere } from "@/app/_blocks/plot/cloud/cloud";
import { buildFigure } from "@/app/_blocks/plot/figure";
import { plotFrame, wholeView } from "@/app/_blocks/plot/frame";
import { drawnInWords, stateInWords } from "@/app/_blocks/plot/plotWords";
import { newDrawn } from "@/app/_blocks/plot/newDrawn";
import { planeLight } from "@/app/_blocks/shared/usePalette";
import type { Drawing } from "@/app/_blocks/plot/traces";
import type { PlotBlock, PlotLayer, PlotResult } from "@/cells";

const axis = (label: string) => ({ expression: label, label, unit: "1", basis: "mass" as const });

function samples(n: number): Extract<PlotLayer, { what: "samples" }> {
  const x = Float64Array.from({ length: n }, (_, i) => 0.8 + (i % 50) * 0.01);
  return {
    what: "samples",
    drawn: 1,
    data: "all",
    ellipses: 1,
    points: { x, y: x.map((v) => v / 10), sigmaX: x.map(() => 0.008), sigmaY: x.map(() => 0.001), correlation: x.map(() => 0.3), state: new Uint8Array(n) },
    classes: Array.from({ length: n }, (_, i) => (i % 2 === 0 ? "H" : "L")),
    samples: Array.from({ length: n }, (_, i) => `S${i}`),
    rows: Array.from({ length: n }, (_, i) => i + 1),
    references: Array.from({ length: n }, () => ""),
  };
}

const trend: PlotLayer = {
  what: "trend",
  drawn: 0,
  trend: "t",
  line: { x: Float64Array.of(0.5, 1, 1.5), y: Float64Array.of(0.05, 0.1, 0.15) },
  range: [0.8, 1.2],
  band: { x: Float64Array.of(0.5, 1.5), lower: Float64Array.of(0.04, 0.14), upper: Float64Array.of(0.06, 0.16) },
  usesScatter: false,
};

function result(layers: readonly PlotLayer[]): PlotResult {
  return { kind: "plot", plot: "scatter", x: axis("Mg/Si"), y: axis("Al/Si"), layers, drawn: 4, notDrawn: { "set aside": 1 }, problems: [], bodiesUsed: {} };
}

const block: PlotBlock = { id: "p", kind: "plot", plot: "scatter", drawn: [{ trend: "t" }, { data: "all" }] };

function figureOf(layers: readonly PlotLayer[], plot = block, picked: readonly number[] = []) {
  const made = result(layers);
  const frame = plotFrame(680, 520, wholeView(made, plot.xAxis, plot.yAxis), false, false);
  const drawing: Drawing = {
    palette: planeLight,
    frame,
    projector: false,
    classIndex: (name) => (name === "H" ? 0 : 1),
    pickedIn: () => picked,
    pickedByOthers: () => [],
  };
  return buildFigure(plot, made, (handle) => handle, drawing, null, "select");
}

interface AnyTrace {
  readonly type?: string;
  readonly mode?: string;
  readonly fill?: string;
  readonly x?: readonly (number | null)[];
  readonly line?: { readonly dash?: string };
  readonly marker?: { readonly symbol?: string };
}
const traces = (figure: { readonly data: readonly unknown[] }): AnyTrace[] => figure.data as AnyTrace[];

describe("a plot's figure", () => {
  it("draws the list bottom first: trends under samples, picks on top", () => {
    const all = traces(figureOf([trend, samples(4)], block, [2]));
    expect(all[0]?.fill).toBe("toself");
    expect(all.at(-1)?.marker?.symbol).toBe("circle-open");
    expect(all.findIndex((t) => t.mode === "markers")).toBeGreaterThan(all.findIndex((t) => t.line?.dash === "solid"));
  });

  it("is dashed where a trend is carried past its samples", () => {
    const lines = traces(figureOf([trend])).filter((t) => t.mode === "lines" && t.fill === undefined);
    expect(lines.map((t) => [t.x?.[0], t.x?.at(-1), t.line?.dash])).toEqual([
      [0.5, 0.8, "5px,3px"],
      [0.8, 1.2, "solid"],
      [1.2, 1.5, "5px,3px"],
    ]);
  });

  it("draws one ellipse a sample with gaps between them, in one trace a class", () => {
    const ellipses = traces(figureOf([samples(4)])).filter((t) => t.mode === "lines");
    expect(ellipses).toHaveLength(2);
    expect(ellipses[0]?.x?.filter((v) => v === null)).toHaveLength(2);
  });

  it("paints more than 2,000 samples as a cloud under its lines, without ellipses, and says so", () => {
    const few = figureOf([trend, samples(2000)]);
    expect(few.cloud).toBeNull();
    const many = figureOf([trend, samples(2001)]);
    expect(traces(many).filter((t) => t.mode === "markers")).toEqual([]);
    expect(many.cloud?.clouds.map((cloud) => cloud.lookOf.filter((look) => look !== nowhere).length)).toEqual([2001]);
    expect(drawnInWords({ data: "all" }, samples(2001)).says).toBe("ellipses left off above 2000 samples");
  });

  it("draws nothing that is hidden", () => {
    const hidden: PlotBlock = { ...block, drawn: [{ trend: "t", hidden: true }, { data: "all" }] };
    expect(traces(figureOf([trend, samples(4)], hidden)).some((t) => t.fill === "toself")).toBe(false);
  });

  it("keeps a range that the block sets, and widens the rest to what is drawn", () => {
    const view = wholeView(result([samples(4)]), { from: 0.5 }, undefined);
    expect(view.x[0]).toBe(0.5);
    expect(view.x[1]).toBeGreaterThan(0.83);
  });

  it("says in the list what each line came to", () => {
    expect(drawnInWords({ data: "all", where: 'Group == "H"' }, samples(4))).toEqual({
      title: "Samples of all",
      says: 'ellipses 1σ, hold 39 %; where Group == "H"',
      count: "4",
    });
    expect(drawnInWords({ trend: "t", hidden: true }, undefined).says).toBe("hidden");
    expect(drawnInWords({ budget: "b" }, undefined).says).toBe("b; nothing to draw");
  });

  it("says at its head how many are drawn and what became of the others", () => {
    expect(stateInWords(result([]))).toEqual({ text: "4 drawn, 1 set aside", problem: false });
  });

  it("offers what is not drawn yet", () => {
    const offered = newDrawn(
      block,
      [
        { id: "all", kind: "data", typed: [] },
        { id: "t", kind: "trend", data: "all", x: "x", y: "y", method: "york", crossWith: "t2" },
        { id: "t2", kind: "trend", data: "all", x: "x", y: "y", method: "york" },
      ],
      ["CI"],
    );
    expect(offered.map((o) => o.label)).toEqual(["Samples", "Crossing of t with t2", "Trend t2", "Bodies", "Annotation"]);
  });
});
