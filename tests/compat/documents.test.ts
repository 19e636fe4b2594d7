import { readdirSync, readFileSync } from "node:fs";
import path from "node:path";
import { expect, test } from "vitest";
import * as Y from "yjs";
import { createEdits, emptyDoc, readPage, shapeFault, toPageDocument } from "@/realtime/document";

const folder = path.resolve(import.meta.dirname, "documents");
const releases = readdirSync(folder).flatMap((file) => (file.endsWith(".base64") ? [file.slice(0, -".base64".length)] : []));

test("D5 there is a live document of a release to open", () => {
  expect(releases).toContain("0.1.0");
});

test.each(releases)("D5 a live document of release %s opens, says what it said, and can be edited", (release) => {
  const doc = emptyDoc();
  const faults: (string | null)[] = [];
  Y.applyUpdate(doc, Buffer.from(readFileSync(path.join(folder, `${release}.base64`), "utf8"), "base64"));
  const said = JSON.parse(readFileSync(path.join(folder, `${release}.json`), "utf8")) as unknown;
  const reading = readPage(doc);
  expect({ page: toPageDocument(doc), bin: reading.bin.map((b) => b.block) }).toStrictEqual(said);
  expect(reading.problems).toStrictEqual([]);
  doc.on("afterTransaction", (transaction: Y.Transaction) => void faults.push(shapeFault(transaction)));
  const edits = createEdits(doc, { id: "somebody" });
  for (const { key } of reading.blocks) edits.setWidth(key, 8);
  for (const { key } of reading.bin) edits.restoreBlock(key);
  expect(faults.filter((fault) => fault !== null)).toStrictEqual([]);
  expect(readPage(doc).bin).toStrictEqual([]);
});
