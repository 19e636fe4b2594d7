import { describe, expect, it } from "vitest";
import { quotesIn } from "@/cells";

describe("values that a note quotes", () => {
  it("finds names, block.name and parts of reported expressions", () => {
    const text = "From {{mg_si}} to {{ t.slope }}: {{b.`Al / Si`.miss}}.";
    expect(quotesIn(text)).toEqual([
      { span: [5, 14], name: "mg_si", parts: ["mg_si"] },
      { span: [18, 31], name: "t.slope", parts: ["t", "slope"] },
      { span: [33, 53], name: "b.`Al / Si`.miss", parts: ["b", "Al / Si", "miss"] },
    ]);
  });

  it("leaves braces after a backslash alone", () => {
    expect(quotesIn("Write \\{{name}} for a value.")).toEqual([]);
  });

  it("gives no parts to what is not a name, so that the note can say so", () => {
    expect(quotesIn("{{3x}} {{a.}} {{a b}}").map((quote) => quote.parts)).toEqual([[], [], []]);
  });
});
