import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { logTicks, spreadLabels } from "@/app/_blocks/plot/axisTicks";

describe("figures of a logarithmic axis", () => {
  it.each([
    [[-1, 1], 8, ["0.1", "0.2", "0.5", "1", "2", "5", "10"]],
    [[-6, 6], 5, ["10<sup>−6</sup>", "0.001", "1", "1000", "10<sup>6</sup>"]],
    // Less than half a power: evenly spaced, so that it has more than one figure.
    [[Math.log10(0.8), Math.log10(1.25)], 5, ["0.8", "0.9", "1.0", "1.1", "1.2"]],
  ] as const)("between 10^%j with room for %d", (range, room, figures) => {
    expect(logTicks(range, room).major.map(({ text }) => text)).toEqual(figures);
  });

  it("are never more than have room, nor fewer than two, in any range", () => {
    fc.assert(
      fc.property(
        fc.double({ min: -8, max: 7, noNaN: true }),
        fc.double({ min: 0.05, max: 12, noNaN: true }),
        fc.integer({ min: 3, max: 12 }),
        (low, width, room) => {
          const { major, minor } = logTicks([low, low + width], room);
          expect(major.length).toBeGreaterThanOrEqual(1);
          expect(major.length).toBeLessThanOrEqual(room + 1);
          for (const at of [...major.map((tick) => tick.at), ...minor]) expect(Math.log10(at)).toBeGreaterThan(low - 1e-6);
        },
      ),
      { seed: 20_261_201 },
    );
  });
});

describe("labels along a line", () => {
  it("stay over their places where they have room, and touch where not", () => {
    expect(spreadLabels([10, 100, 200], 30, 0, 300)).toEqual([10, 100, 200]);
    expect(spreadLabels([100, 101, 200], 30, 0, 300)).toEqual([85.5, 115.5, 200]);
  });

  it("keep apart, in order and inside, wherever they belong", () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: 0, max: 400, noNaN: true }), { minLength: 1, maxLength: 12 }), (places) => {
        const made = spreadLabels(
          [...places].sort((a, b) => a - b),
          30,
          0,
          400,
        );
        made.forEach((at, i) => {
          expect(at).toBeGreaterThanOrEqual(-1e-9);
          expect(at).toBeLessThanOrEqual(400 + 1e-9);
          if (i > 0) expect(at - (made[i - 1] ?? 0)).toBeGreaterThanOrEqual(30 - 1e-9);
        });
      }),
      { seed: 20_261_201 },
    );
  });
});
