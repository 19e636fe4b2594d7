import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { packRows, placeAfterStep, type BlockWidth } from "@/app/_page/arrangement";
import { seed } from "@/tests/support/seed";

describe("rows of twelve columns", () => {
  it("puts blocks beside each other as long as they fit", () => {
    const widths: BlockWidth[] = [12, 6, 6, 8, 4, 6, 12];
    expect(packRows(widths, (w) => w)).toEqual([[12], [6, 6], [8, 4], [6], [12]]);
  });

  it("keeps every block, in order, and no row over twelve", () => {
    fc.assert(
      fc.property(fc.array(fc.constantFrom<BlockWidth>(4, 6, 8, 12)), (widths) => {
        const rows = packRows(widths, (w) => w);
        expect(rows.flat()).toEqual(widths);
        for (const row of rows) expect(row.reduce((a, b) => a + b, 0)).toBeLessThanOrEqual(12);
      }),
      { seed },
    );
  });
});

describe("moving by one place", () => {
  const order = ["a", "b", "c"];
  it("names the block that comes before the new place", () => {
    expect(placeAfterStep(order, "b", -1)).toBeNull();
    expect(placeAfterStep(order, "c", -1)).toBe("a");
    expect(placeAfterStep(order, "a", 1)).toBe("b");
  });
  it("knows the ends", () => {
    expect(placeAfterStep(order, "a", -1)).toBeUndefined();
    expect(placeAfterStep(order, "c", 1)).toBeUndefined();
    expect(placeAfterStep(order, "x", 1)).toBeUndefined();
  });
});
