import { describe, expect, it } from "vitest";
import { layOutDistribution } from "@/app/_blocks/plot/distribution";
import type { PlotLayer, PlotResult } from "@/cells";

const axis = { expression: "x", label: "x", unit: "1", basis: null };
const none = new Float64Array(5).fill(NaN);
const samples: PlotLayer = {
  what: "samples",
  drawn: 0,
  data: "all",
  ellipses: 1,
  points: { x: Float64Array.of(1, 1, 1, 2, NaN), y: none, sigmaX: none, sigmaY: none, correlation: none, state: Uint8Array.of(0, 0, 0, 0, 1) },
  classes: ["H", "H", "H", "L", "H"],
  samples: ["a", "b", "c", "d", "e"],
  rows: [1, 2, 3, 4, 5],
  references: ["", "", "", "", ""],
};
const bodies: PlotLayer = {
  what: "bodies",
  drawn: 1,
  bodies: [{ name: "CI", compilation: "CI_PLJ14", x: 1.5, y: NaN, sigmaX: null, sigmaY: null, correlation: 0 }],
};
const result: PlotResult = {
  kind: "plot",
  plot: "distribution",
  x: axis,
  y: axis,
  layers: [samples, bodies],
  drawn: 4,
  notDrawn: { missing: 1 },
  problems: [],
  bodiesUsed: {},
};

describe("a distribution", () => {
  const laid = layOutDistribution(result, (name) => (name === "H" ? 0 : 1));
  const layer = laid.result.layers[0];
  const heights = layer?.what === "samples" ? Array.from(layer.points.y) : [];

  it("has a row a class, the page's first class on top, bodies at the foot", () => {
    expect(laid.rows).toEqual(["bodies", "L", "H"]);
  });

  it("puts every sample into its class's row, none over another", () => {
    expect(heights.slice(0, 3).every((y) => Math.abs(y - 2) < 0.4)).toBe(true);
    expect(new Set(heights.slice(0, 3)).size).toBe(3);
    expect(heights[3]).toBeCloseTo(1, 12);
  });

  it("gives no place to what has no value", () => {
    expect(heights[4]).toBeNaN();
  });
});
