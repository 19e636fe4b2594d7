import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { shareStructure } from "@/app/_page/structure";
import { seed } from "@/tests/support/seed";

describe("sharing structure", () => {
  it("keeps the old object where nothing changed, and equals the new one always", () => {
    fc.assert(
      fc.property(fc.jsonValue(), fc.jsonValue(), (a, b) => {
        const old: unknown = structuredClone(a);
        expect(shareStructure(old, structuredClone(a))).toStrictEqual(old);
        if (typeof old === "object" && old !== null) expect(shareStructure(old, structuredClone(old))).toBe(old);
        expect(shareStructure(old, structuredClone(b) as unknown)).toStrictEqual(b);
      }),
      { seed },
    );
  });

  it("keeps the parts that did not change", () => {
    const old = { a: { x: 1 }, b: [{ y: 2 }, { y: 3 }] };
    const next = shareStructure(old, { a: { x: 1 }, b: [{ y: 2 }, { y: 4 }] });
    expect(next).not.toBe(old);
    expect(next.a).toBe(old.a);
    expect(next.b[0]).toBe(old.b[0]);
    expect(next.b[1]).toEqual({ y: 4 });
  });

  it("notices a key that is gone", () => {
    expect(shareStructure<Record<string, number>>({ a: 1, b: 2 }, { a: 1 })).toEqual({ a: 1 });
  });
});
