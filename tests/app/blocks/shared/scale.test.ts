import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { scale, tickDecimals, ticks, tickStep } from "@/app/_blocks/shared/scale";
import { seed } from "../../../support/seed";

describe("ticks", () => {
  it("stand at round values inside the range", () => {
    expect(ticks(0.62, 1.4, 8)).toEqual([0.7, 0.8, 0.9, 1, 1.1, 1.2, 1.3, 1.4]);
    expect(ticks(-0.01, 0.13, 7)).toEqual([0, 0.02, 0.04, 0.06, 0.08, 0.1, 0.12]);
  });

  it("are never more than asked for, by more than the one at the end", () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e6, max: 1e6, noNaN: true }),
        fc.double({ min: 1e-6, max: 1e6, noNaN: true }),
        fc.integer({ min: 2, max: 20 }),
        (from, width, count) => {
          const made = ticks(from, from + width, count);
          expect(made.length).toBeLessThanOrEqual(count + 1);
          for (const t of made) expect(t).toBeGreaterThanOrEqual(from - width * 1e-6 - Math.abs(from) * 1e-9);
        },
      ),
      { seed },
    );
  });

  it("carry as many decimals as their step needs", () => {
    expect(tickDecimals(tickStep(0.14, 7))).toBe(2);
    expect(tickDecimals(20)).toBe(0);
  });
});

describe("scale", () => {
  it("maps the ends, and a range of no width to the middle", () => {
    expect(scale(1, 3, 10, 20).at(3)).toBe(20);
    expect(scale(2, 2, 10, 20).at(2)).toBe(15);
  });
});
