import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { layerPath, layOutRail, railPlace, type RailBlock } from "@/app/_page/rail/railLayout";
import { seed } from "@/tests/support/seed";

const block = (key: string, top: number, height: number, width = 900): RailBlock => ({
  key,
  handle: key,
  kind: "note",
  name: "",
  top,
  height,
  width,
  problem: false,
});
const box = { x: 44, y: 16, width: 44, height: 400 };

describe("the section rail", () => {
  it("draws thickness to scale", () => {
    const [a, b] = layOutRail([block("a", 0, 100), block("b", 140, 300)], box);
    expect(a?.h).toBeCloseTo(100, 6);
    expect(b?.h).toBeCloseTo(300, 6);
    expect(b?.y).toBeCloseTo(116, 6);
  });

  it("draws blocks side by side as one bed", () => {
    const [a, b, c] = layOutRail([block("a", 0, 100, 600), block("b", 1, 80, 300), block("c", 200, 100)], box);
    expect(a?.y).toBe(b?.y);
    expect(a?.h).toBe(b?.h);
    expect(a?.last).toBe(false);
    expect(b?.last).toBe(true);
    expect(b?.x).toBeCloseTo(44 + (44 * 600) / 900, 6);
    expect((c?.y ?? 0) > (a?.y ?? 0)).toBe(true);
  });

  it("fills its box exactly and keeps every layer big enough to hit while there is room", () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 1, max: 5000 }), { minLength: 1, maxLength: 20 }), (heights) => {
        let top = 0;
        const blocks = heights.map((h, i) => {
          const one = block(String(i), top, h);
          top += h + 40;
          return one;
        });
        const layers = layOutRail(blocks, box);
        expect(layers.reduce((sum, l) => sum + l.h, 0)).toBeCloseTo(400, 6);
        if (heights.length * 14 <= 400) for (const layer of layers) expect(layer.h).toBeGreaterThanOrEqual(14 - 1e-9);
      }),
      { seed },
    );
  });

  it("finds the place of the page on the rail, always downwards", () => {
    const layers = layOutRail([block("a", 100, 100), block("b", 240, 300)], box);
    expect(railPlace(layers, 0)).toBe(16);
    expect(railPlace(layers, 10_000)).toBeCloseTo(416, 6);
    expect(railPlace(layers, 150)).toBeCloseTo(66, 6);
    let last = 0;
    for (let y = 0; y < 700; y += 7) {
      const at = railPlace(layers, y);
      expect(at).toBeGreaterThanOrEqual(last);
      last = at;
    }
  });

  it("tears the edge of a layer with a problem, always in the same way", () => {
    const [plain] = layOutRail([block("a", 0, 100)], box);
    const [torn] = layOutRail([{ ...block("a", 0, 100), problem: true }], box);
    if (plain === undefined || torn === undefined) throw new Error("no layer");
    expect(layerPath(plain, 4.5).edge.split("L")).toHaveLength(2);
    expect(layerPath(torn, 4.5).edge.split("L").length).toBeGreaterThan(10);
    expect(layerPath(torn, 4.5)).toEqual(layerPath(torn, 4.5));
  });
});
