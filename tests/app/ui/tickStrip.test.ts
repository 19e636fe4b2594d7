import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { crowds, stripPlace } from "@/app/_ui/TickStrip";
import { seed } from "../../support/seed";

describe("a strip of more samples than pixels", () => {
  it("counts every sample that is drawn once, on its pixel and in its class", () => {
    const sample = fc.record({
      value: fc.oneof(fc.double({ min: -2, max: 12, noNaN: true }), fc.constant(NaN)),
      of: fc.integer({ min: -1, max: 3 }),
      hidden: fc.boolean(),
    });
    fc.assert(
      fc.property(fc.array(sample, { maxLength: 300 }), fc.integer({ min: 3, max: 120 }), (samples, width) => {
        const range = [0, 10] as const;
        const found = crowds(
          samples.map((s) => s.value),
          range,
          width,
          (i) => samples[i]?.of ?? -1,
          samples.map((s) => (s.hidden ? 1 : 0)),
        );
        const drawn = samples.filter((s) => s.value >= 0 && s.value <= 10 && !s.hidden);
        for (const { value, of } of drawn) expect(found.get(of)?.[Math.floor(stripPlace(value, range, width))]).toBeGreaterThan(0);
        expect([...found.values()].reduce((sum, counts) => sum + counts.reduce((a, b) => a + b, 0), 0)).toBe(drawn.length);
      }),
      { seed },
    );
  });
});
