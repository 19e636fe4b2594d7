import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { buildStrip, countFinite, leastRow, nearestRow, placeInWalk, rowsByValue, stripSlot } from "@/app/_blocks/formula/strip";
import { seed } from "../../../support/seed";

describe("tick strip", () => {
  it("draws nothing where there is no value", () => {
    expect(buildStrip([NaN, NaN], [])).toBeNull();
  });

  it("puts a lone value in the middle", () => {
    const strip = buildStrip([5], [""]);
    expect(strip?.classes[0]?.slots).toEqual([500]);
  });

  it("keeps every sample's place, in its class, and shares ticks that fall together", () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.double({ min: -1e3, max: 1e3, noNaN: true }), fc.constantFrom("L", "H", "")), { minLength: 1, maxLength: 200 }),
        (rows) => {
          const values = rows.map(([v]) => v);
          const strip = buildStrip(
            values,
            rows.map(([, name]) => name),
          );
          expect(strip).not.toBeNull();
          if (strip === null) return;
          for (const [value, name] of rows) {
            const slot = stripSlot(value, strip.from, strip.to);
            expect(slot).toBeGreaterThanOrEqual(0);
            expect(slot).toBeLessThanOrEqual(1000);
            expect(strip.classes.find((c) => c.class === name)?.slots).toContain(slot);
          }
          for (const one of strip.classes) expect(new Set(one.slots).size).toBe(one.slots.length);
        },
      ),
      { seed },
    );
  });

  it("walks from the least to the greatest, over the gaps", () => {
    expect(rowsByValue([3, NaN, 1, 3])).toEqual([2, 0, 3]);
    expect(nearestRow([3, NaN, 1], 1.4)).toBe(2);
    expect(nearestRow([NaN], 1)).toBe(-1);
  });

  it("counts a row's place in the walk without walking", () => {
    fc.assert(
      fc.property(fc.array(fc.oneof(fc.integer({ min: -9, max: 9 }), fc.constant(NaN)), { maxLength: 60 }), (values) => {
        const walk = rowsByValue(values);
        expect(countFinite(values)).toBe(walk.length);
        expect(leastRow(values)).toBe(walk[0] ?? -1);
        walk.forEach((row, place) => expect(placeInWalk(values, row)).toBe(place));
      }),
      { seed },
    );
  });
});
