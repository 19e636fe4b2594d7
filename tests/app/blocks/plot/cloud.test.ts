import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Cloud, CloudView } from "@/app/_blocks/plot/cloud/cloud";
import { nowhere } from "@/app/_blocks/plot/cloud/cloud";
import { insideOutline, nearestInCloud } from "@/app/_blocks/plot/cloud/findInCloud";
import { paintCloud } from "@/app/_blocks/plot/cloud/paintCloud";
import { stampOf } from "@/app/_blocks/plot/cloud/stamp";
import { plotFrame } from "@/app/_blocks/plot/frame";
import { seed } from "../../../support/seed";

const frame = plotFrame(300, 200, { x: [0, 10], y: [0, 10] }, false, false);
const looks = [{ shape: "circle", color: "#0072b2", alpha: 1, radius: 2.5 }] as const;

function cloud(points: readonly (readonly [number, number])[], lookOf = points.map(() => 0)): Cloud {
  return { data: "d", x: Float64Array.from(points, ([x]) => x), y: Float64Array.from(points, ([, y]) => y), lookOf: Uint16Array.from(lookOf), looks };
}

const view = (...clouds: readonly Cloud[]): CloudView => ({ clouds, frame, paper: "#f6f5f1" });

function colorAt(painting: ReturnType<typeof paintCloud>, x: number, y: number): readonly number[] {
  const at = (Math.floor(y * painting.ratio) * painting.width + Math.floor(x * painting.ratio)) * 4;
  return [...painting.pixels.slice(at, at + 4)];
}

describe("a cloud of samples", () => {
  it.each([1, 2])("has its samples' colour where the axes say, at %i pixels in one", (ratio) => {
    const painting = paintCloud(view(cloud([[4, 7]])), ratio);
    expect(painting.width).toBe(300 * ratio);
    expect(colorAt(painting, frame.px(4), frame.py(7))).toEqual([0x00, 0x72, 0xb2, 255]);
    expect(colorAt(painting, frame.px(8), frame.py(2))).toEqual([0xf6, 0xf5, 0xf1, 255]);
  });

  it("leaves out what lies outside of the axes or has no look, and paints nothing over them", () => {
    const painting = paintCloud(
      view(
        cloud(
          [
            [-1, 5],
            [5, 11],
            [3, 3],
            [0.001, 0.001],
          ],
          [0, 0, nowhere, 0],
        ),
      ),
      1,
    );
    for (let y = 0; y < painting.height; y++)
      for (let x = 0; x < painting.width; x++) {
        const isInside = x >= frame.margin.l && x < 300 - frame.margin.r && y >= frame.margin.t && y < 200 - frame.margin.b;
        if (!isInside) expect(colorAt(painting, x, y)).toEqual([0xf6, 0xf5, 0xf1, 255]);
      }
    expect(painting.middles.filter((entry) => entry !== 0)).toEqual(Uint32Array.of(4));
  });

  it("finds the sample under the pointer, in the table it is of, and none where none is near", () => {
    const second = { ...cloud([[6, 6]]), data: "e" };
    const painted = view(
      cloud([
        [2, 2],
        [2, 8],
      ]),
      second,
    );
    const painting = paintCloud(painted, 2);
    const find = (x: number, y: number): unknown => nearestInCloud(painting, painted.clouds, frame.px(x) + 2, frame.py(y) - 3)?.ref ?? null;
    expect(find(2, 8)).toEqual({ data: "d", index: 1 });
    expect(find(6, 6)).toEqual({ data: "e", index: 0 });
    expect(find(9, 1)).toBeNull();
  });

  it("finds every sample alone by its own place, on linear and logarithmic axes", () => {
    fc.assert(
      fc.property(fc.double({ min: 1, max: 99, noNaN: true }), fc.double({ min: 1, max: 99, noNaN: true }), fc.boolean(), (x, y, log) => {
        const range = log ? ([-0.1, 2] as const) : ([0, 100] as const);
        const own = plotFrame(300, 200, { x: range, y: range }, log, log);
        const painted = { ...view(cloud([[x, y]])), frame: own };
        const found = nearestInCloud(paintCloud(painted, 1), painted.clouds, own.px(x), own.py(y));
        expect(found?.ref).toEqual({ data: "d", index: 0 });
        expect(Math.hypot((found?.x ?? 0) - own.px(x), (found?.y ?? 0) - own.py(y))).toBeLessThanOrEqual(Math.SQRT1_2 + 1e-9);
      }),
      { seed, numRuns: 60 },
    );
  });

  it("picks what lies in a box or in a drawn outline, whichever way it was drawn", () => {
    const clouds = [
      cloud(
        [
          [1, 1],
          [5, 5],
          [9, 9],
          [5, 6],
        ],
        [0, 0, 0, nowhere],
      ),
    ];
    expect(insideOutline(clouds, { box: { x: [6, 4], y: [4, 7] } })).toEqual([{ data: "d", index: 1 }]);
    // A triangle with the right angle at the origin.
    expect(insideOutline(clouds, { corners: { x: [0, 11, 0], y: [0, 0, 11] } })).toEqual([
      { data: "d", index: 0 },
      { data: "d", index: 1 },
    ]);
  });

  it("gives all markers about the same weight", () => {
    const weight = (shape: Parameters<typeof stampOf>[0]): number => stampOf(shape, 5, 1).cover.reduce((sum, one) => sum + one, 0) / 256;
    const circle = weight("circle");
    expect(circle).toBeCloseTo(Math.PI * 25, -1);
    for (const shape of ["square", "diamond", "triangle-up", "triangle-down", "hexagon", "pentagon"] as const) {
      expect(weight(shape) / circle).toBeGreaterThan(0.7);
      expect(weight(shape) / circle).toBeLessThan(1.15);
    }
  });
});
