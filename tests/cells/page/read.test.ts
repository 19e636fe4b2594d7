import { describe, expect, it } from "vitest";
import { readPageDocument, UnreadablePageError } from "@/cells";

function page(...blocks: unknown[]): unknown {
  return { format: "cotectic-page/1", title: "Test page", blocks };
}

describe("reading a page document", () => {
  it("takes a page as it stands", () => {
    const note = { id: "n", kind: "note", text: "Hello" };
    expect(readPageDocument(page(note)).blocks).toEqual([note]);
  });

  it.each([
    ["no object", 3, 'A page is a JSON object with "format": "cotectic-page/1"; this is 3.'],
    ["another format", { format: "x" }, 'The page says "format": "x"; this engine reads "cotectic-page/1".'],
    ["an unknown key of a block", page({ id: "r", kind: "formula", text: "", dota: "ch" }), 'block r: unknown key "dota".'],
    ["an unknown key of the page", { ...(page() as object), authors: [] }, 'the page: unknown key "authors".'],
    ["an unknown kind", page({ id: "p", kind: "pot" }), 'block p: kind is "pot", which is not one this page format knows.'],
    ["a wrong type", page({ id: "n", kind: "note", text: 3 }), "block n: text: expected string, got 3."],
    ["a misspelt key of one of several forms", page({ id: "b", kind: "budget", start: { bodyy: "BSE" }, steps: [] }), 'block b: start: unknown key "bodyy".'],
    [
      "a misspelt key in a plot's list",
      page({ id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "r", elipses: "1 sigma" }] }),
      'block p: drawn[0]: unknown key "elipses".',
    ],
    ["a data block of no content", page({ id: "d", kind: "data" }), "block d: a data block has exactly one of source, typed, stack, join."],
    [
      "a handle that no formula could write",
      page({ id: "1p", kind: "note", text: "" }),
      "block 1p: id: a handle has letters, digits and _ only, and does not begin with a digit.",
    ],
    [
      "two blocks of one id",
      page({ id: "a", kind: "note", text: "" }, { id: "a", kind: "note", text: "" }),
      'Blocks 1 and 2 both have the id "a"; every block of a page needs its own.',
    ],
    [
      "a target value without basis",
      page({ id: "b", kind: "budget", start: { body: "BSE" }, steps: [], target: { expression: "Mg / Si", equals: { value: 1 } } }),
      'block b: target.equals.basis: expected "mass" or "atoms", got nothing.',
    ],
  ])("refuses %s, naming block and key", (_, json, message) => {
    expect(() => readPageDocument(json)).toThrow(UnreadablePageError);
    expect(() => readPageDocument(json)).toThrow(message);
  });

  it("counts the faults it does not list", () => {
    expect(() => readPageDocument(page({ id: "a", kind: "note", text: 3 }, { id: "b", kind: "note", text: 4 }))).toThrow(
      "block a: text: expected string, got 3. 1 more like this.",
    );
  });
});
