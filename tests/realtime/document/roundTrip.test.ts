import fc from "fast-check";
import { expect, test } from "vitest";
import * as Y from "yjs";
import { pageSchema, type PageDocument } from "@/cells";
import { createEdits, encodeNewPage, fillPage, readPage, shapeFault, toPageDocument } from "@/realtime/document";
import { seed } from "../../support/seed";
import { arbitraryPage } from "./arbitraryPage";

test("D2 a page document goes into the live document and comes back the same", () => {
  fc.assert(
    fc.property(arbitraryPage, (page) => {
      const doc = new Y.Doc();
      fillPage(doc, page);
      expect(pageSchema.parse(toPageDocument(doc))).toStrictEqual(page);
      const other = new Y.Doc();
      Y.applyUpdate(other, Y.encodeStateAsUpdate(doc));
      expect(toPageDocument(other)).toStrictEqual(page);
    }),
    { seed, numRuns: 300 },
  );
});

test("D2 a page is filled once", () => {
  const doc = new Y.Doc();
  Y.applyUpdate(doc, encodeNewPage({ format: "cotectic-page/1", title: "A", blocks: [] }));
  expect(() => fillPage(doc, { format: "cotectic-page/1", title: "B", blocks: [] })).toThrow(/filled once/);
  expect(toPageDocument(doc).title).toBe("A");
});

test("D2 a wish to simulate comes back, is changed and taken away", () => {
  const wish = { draws: 20_000, seed: 42 };
  const page: PageDocument = {
    format: "cotectic-page/1",
    title: "A",
    blocks: [
      { id: "f", kind: "formula", text: "a = 1", simulate: wish },
      { id: "b", kind: "budget", start: { body: "CI" }, steps: [], simulate: { draws: 200, seed: 0 } },
      { id: "g", kind: "formula", text: "b = 2" },
    ],
  };
  const doc = new Y.Doc();
  fillPage(doc, page);
  const other = new Y.Doc();
  Y.applyUpdate(other, Y.encodeStateAsUpdate(doc));
  expect(toPageDocument(other)).toStrictEqual(page);
  const edits = createEdits(other, { id: "p1" });
  const faults: (string | null)[] = [];
  doc.on("afterTransaction", (transaction: Y.Transaction) => void faults.push(shapeFault(transaction)));
  const keys = readPage(other).blocks.map(({ key }) => key);
  edits.setField(keys[0] ?? "", "simulate", { ...wish, seed: 43 });
  edits.setField(keys[1] ?? "", "simulate", undefined);
  edits.setField(keys[2] ?? "", "simulate", wish);
  Y.applyUpdate(doc, Y.encodeStateAsUpdate(other));
  expect(toPageDocument(doc).blocks.map((block) => ("simulate" in block ? block.simulate : undefined))).toStrictEqual([{ ...wish, seed: 43 }, undefined, wish]);
  // The server takes every one of these edits.
  expect(faults).toStrictEqual([null]);
});
