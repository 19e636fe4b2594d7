import fc from "fast-check";
import { expect, test } from "vitest";
import * as Y from "yjs";
import { pageSchema } from "@/cells";
import { encodeNewPage, fillPage, toPageDocument } from "@/realtime/document";
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
