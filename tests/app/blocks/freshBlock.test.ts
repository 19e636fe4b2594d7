import { describe, expect, it } from "vitest";
import { freshBlock } from "@/app/_blocks/freshBlock";
import type { Block } from "@/cells";

const finds: Block = { id: "d", kind: "data", typed: [] };
const rocks: Block = { id: "d2", kind: "data", typed: [] };
const ratios: Block = { id: "f", kind: "formula", data: "d", text: "al = Al / Si # by mass\n\nmg_si = Mg / Si\nal_si = al" };
const single: Block = { id: "f2", kind: "formula", data: "d", text: "fe = Fe / Si" };
const broken: Block = { id: "f3", kind: "formula", data: "d2", text: "ca_si = Ca / Si\nwithout a name\nti_si = Ti / Si" };
const bodies = { BSE: "BSE_MS95" };

const fresh = (kind: "plot" | "trend", blocks: readonly Block[], after: Block | null) => freshBlock(kind, { blocks, after, bodies });

describe("a new plot", () => {
  it("draws the two last results over its table, in their order", () => {
    expect(fresh("plot", [finds, ratios], ratios)).toMatchObject({ drawn: [{ data: "d", x: "mg_si", y: "al_si" }] });
  });

  it("passes over formula blocks with fewer than two results, and over other tables", () => {
    expect(fresh("plot", [rocks, broken, finds, ratios, single], single)).toMatchObject({ drawn: [{ data: "d", x: "mg_si", y: "al_si" }] });
    expect(fresh("plot", [finds, ratios, rocks], rocks)).toMatchObject({ drawn: [{ data: "d2", x: "", y: "" }] });
    expect(fresh("plot", [finds, single], single)).toMatchObject({ drawn: [{ data: "d", x: "", y: "" }] });
  });

  it("looks above first, then below", () => {
    const below: Block = { id: "g", kind: "formula", data: "d", text: "a = Mg\nb = Si" };
    expect(fresh("plot", [finds, ratios, below], ratios)).toMatchObject({ drawn: [{ x: "mg_si", y: "al_si" }] });
    expect(fresh("plot", [finds, below, ratios], finds)).toMatchObject({ drawn: [{ x: "a", y: "b" }] });
  });

  it("draws nothing on a page without a table", () => {
    expect(fresh("plot", [], null)).toMatchObject({ drawn: [] });
  });
});

describe("a new trend", () => {
  it("fits the two last results that can be read", () => {
    expect(fresh("trend", [rocks, broken], broken)).toMatchObject({ data: "d2", x: "ca_si", y: "ti_si" });
  });

  it("asks for both where there are none", () => {
    expect(fresh("trend", [finds], finds)).toMatchObject({ data: "d", x: "", y: "" });
  });
});
