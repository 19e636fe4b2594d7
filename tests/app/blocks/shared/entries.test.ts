import { describe, expect, it } from "vitest";
import * as Y from "yjs";
import { changeEntry, dropEntry, shiftEntry } from "@/app/_blocks/shared/entries";
import type { Drawn } from "@/cells";
import { createEdits, fillPage, readPage } from "@/realtime/document";

const a: Drawn = { trend: "a" };
const b: Drawn = { trend: "b" };
const c: Drawn = { trend: "c" };

function plot(drawn: Drawn[]) {
  const doc = new Y.Doc();
  fillPage(doc, { format: "cotectic-page/1", title: "", blocks: [{ id: "p", kind: "plot", plot: "scatter", drawn }] });
  const key = readPage(doc).blocks[0]?.key ?? "";
  const now = (): unknown => {
    const block = readPage(doc).blocks[0]?.block;
    return block?.kind === "plot" ? block.drawn : undefined;
  };
  return { edits: createEdits(doc, { id: "me" }), key, now };
}

describe("entries of a block's list", () => {
  it("are changed in their place", () => {
    const { edits, key, now } = plot([a, b, c]);
    changeEntry(edits, key, "drawn", 1, b, { trend: "b", hidden: true });
    expect(now()).toEqual([a, { trend: "b", hidden: true }, c]);
  });

  it("move by one and stop at the ends", () => {
    const { edits, key, now } = plot([a, b, c]);
    shiftEntry(edits, key, "drawn", 2, c, -1);
    expect(now()).toEqual([a, c, b]);
    shiftEntry(edits, key, "drawn", 0, a, 1);
    expect(now()).toEqual([c, a, b]);
    shiftEntry(edits, key, "drawn", 0, c, -1);
    expect(now()).toEqual([c, a, b]);
    shiftEntry(edits, key, "drawn", 1, a, -1);
    expect(now()).toEqual([a, c, b]);
  });

  it("are found again when somebody moved them meanwhile", () => {
    const { edits, key, now } = plot([a, b, c]);
    shiftEntry(edits, key, "drawn", 0, a, 1);
    dropEntry(edits, key, "drawn", 0, a);
    expect(now()).toEqual([b, c]);
  });
});
