import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { findRoots } from "../../../cells/budget/roots";

describe("findRoots", () => {
  it("finds every root, in order", () => {
    const { roots } = findRoots((x) => (x - 0.2) * (x - 0.5) * (x - 0.9), 0, 1);
    expect(roots).toHaveLength(3);
    roots.forEach((root, i) => expect(root).toBeCloseTo([0.2, 0.5, 0.9][i] ?? Number.NaN, 14));
  });

  it("finds two roots between two points of its grid, where |f| dips", () => {
    const { roots } = findRoots((x) => (x - 0.50123) * (x - 0.50124), 0, 1);
    expect(roots).toHaveLength(2);
    expect(roots[0]).toBeCloseTo(0.50123, 9);
    expect(roots[1]).toBeCloseTo(0.50124, 9);
  });

  it("takes no pole for a root, and looks beyond it", () => {
    expect(findRoots((x) => 1 / (x - 0.3217), 0, 1).roots).toEqual([]);
    const { roots } = findRoots((x) => (x - 0.7) / (x - 0.3217), 0, 1);
    expect(roots).toHaveLength(1);
    expect(roots[0]).toBeCloseTo(0.7, 14);
  });

  it("finds a root right before a gap, and none in it", () => {
    const f = (x: number): number => (x > 0.70001 ? Number.NaN : x - 0.7);
    expect(findRoots(f, 0, 1).roots[0]).toBeCloseTo(0.7, 14);
    expect(findRoots((x) => (x > 0.699 ? Number.NaN : x - 0.7), 0, 1).roots).toEqual([]);
    expect(findRoots(() => Number.NaN, 0, 1)).toMatchObject({ roots: [], least: Number.NaN, most: Number.NaN });
  });

  it("takes roots at both ends, exactly", () => {
    expect(findRoots((x) => x * (1 - x), 0, 1).roots).toEqual([0, 1]);
    expect(findRoots((x) => x - 7, 0, 7).roots).toEqual([7]);
  });

  it("looks over all amounts where nothing limits them", () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 150, noNaN: true }), (wanted) => {
        const { roots } = findRoots((x) => x / (1 + x) - wanted / (1 + wanted), 0, Infinity);
        expect(roots).toHaveLength(1);
        expect(Math.abs((roots[0] ?? Number.NaN) / wanted - 1)).toBeLessThan(1e-8);
      }),
      { seed: 5, numRuns: 50 },
    );
  });

  it("knows a flat f, rounding beside the size of its numbers included", () => {
    expect(findRoots(() => 0, 0, 1)).toMatchObject({ roots: [], isFlat: true });
    expect(findRoots((x) => 1e-16 * (x > 0.5 ? 1 : -1), 0, 1, 1)).toMatchObject({ roots: [], isFlat: true });
    expect(findRoots((x) => x - 0.5, 0, 1, 1).isFlat).toBe(false);
  });
});
