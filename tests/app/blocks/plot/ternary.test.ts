import { describe, expect, it } from "vitest";
import { placeAt } from "@/app/_blocks/plot/AnnotationHandles";
import { layOutPlot } from "@/app/_blocks/plot/layOutPlot";
import { HEIGHT, sharesAt, ternaryAxes, ternaryFrame, ternaryPoint } from "@/app/_blocks/plot/ternary";
import type { PlotBlock, PlotResult } from "@/cells";

describe("a ternary on paper", () => {
  it("is equilateral: its corners are one side apart, on the screen too, whole and close up", () => {
    const corners = [ternaryPoint(1, 0), ternaryPoint(0, 1), ternaryPoint(0, 0)] as const;
    for (const view of [null, { x: [0.2, 0.4], y: [0, 0.1] } as const])
      for (const [width, height] of [
        [680, 640],
        [358, 420],
      ] as const) {
        const frame = ternaryFrame(width, height, view);
        const at = corners.map(([u, v]) => [frame.px(u), frame.py(v)] as const);
        const side = (a: number, b: number): number => Math.hypot((at[a]?.[0] ?? 0) - (at[b]?.[0] ?? 0), (at[a]?.[1] ?? 0) - (at[b]?.[1] ?? 0));
        expect(side(0, 1)).toBeCloseTo(side(1, 2), 6);
        expect(side(0, 2)).toBeCloseTo(side(1, 2), 6);
      }
  });

  it("has each axis' share along its grid line, counted from the right edge", () => {
    for (const axis of ternaryAxes)
      for (const share of [0.2, 0.5, 0.8])
        for (const [u, v] of [axis.from(share), axis.to(share)]) {
          const [x, y] = sharesAt(u, v);
          expect({ x, y, z: 1 - x - y }[axis.corner]).toBeCloseTo(share, 12);
        }
  });

  it("turns σ and correlation with the axes: the covariance of u = x + y/2, v = y√3/2", () => {
    const [sx, sy, rho] = [0.02, 0.03, -0.8];
    const one = (value: number): Float64Array => Float64Array.of(value);
    const points = { x: one(0.3), y: one(0.4), sigmaX: one(sx), sigmaY: one(sy), correlation: one(rho), state: new Uint8Array(1) };
    const result = {
      kind: "plot",
      plot: "ternary",
      layers: [{ what: "samples", drawn: 0, data: "d", ellipses: 1, points, classes: [""], samples: ["a"], rows: [1], references: [""] }],
    } as unknown as PlotResult;
    const [layer] = layOutPlot({ plot: "ternary", drawn: [] } as unknown as PlotBlock, result, { width: 600, height: 560 }, null, () => 0).result.layers;
    if (layer?.what !== "samples") throw new Error("samples are laid out");
    const { x, y, sigmaX, sigmaY, correlation } = layer.points;
    expect([x[0], y[0]]).toEqual([0.5, HEIGHT * 0.4]);
    const u = Math.sqrt(sx ** 2 + rho * sx * sy + sy ** 2 / 4);
    expect(sigmaX[0]).toBeCloseTo(u, 12);
    expect(sigmaY[0]).toBeCloseTo(HEIGHT * sy, 12);
    expect((correlation[0] ?? 0) * u * HEIGHT * sy).toBeCloseTo(HEIGHT * (rho * sx * sy + sy ** 2 / 2), 12);
  });

  it("gives a place on the screen back as shares, in as many digits as a pixel is worth", () => {
    const frame = ternaryFrame(600, 560, null);
    const [u, v] = ternaryPoint(0.25, 0.5);
    expect(placeAt(frame, "ternary", frame.px(u), frame.py(v))).toEqual({ x: 0.25, y: 0.5 });
  });
});
