import { expect, test } from "vitest";
import * as Y from "yjs";
import { pageSchema, type PageDocument } from "@/cells";
import { createEdits, fillPage, readPage, toPageDocument, type PageEdits } from "@/realtime/document";

const page: PageDocument = pageSchema.parse({
  format: "cotectic-page/1",
  title: "Renaming",
  blocks: [
    {
      id: "ch",
      kind: "data",
      columns: [
        { name: "MgO", role: "quantity", species: "MgO", unit: "wt%" },
        { name: "SiO2", role: "quantity", species: "SiO2", unit: "wt%" },
      ],
      typed: [{ id: "r1", cells: { MgO: "38", SiO2: "45" } }],
    },
    { id: "r", kind: "formula", data: "ch", text: "mg_si = MgO / SiO2 # MgO stays\nch_only = ch.MgO - mean(ch.SiO2)" },
    { id: "t", kind: "trend", data: "ch", x: "mg_si", y: "MgO / ch.SiO2", where: "MgO > wtpct(3)", method: "york" },
    { id: "n", kind: "note", text: "MgO of the chondrites: {{mean(ch.MgO)}}; ratio {{r.mg_si}}" },
  ],
});

function renamed(change: (edits: PageEdits, keyOf: (handle: string) => string) => void): PageDocument {
  const doc = new Y.Doc();
  fillPage(doc, page);
  const keyOf = (handle: string): string => readPage(doc).blocks.find(({ block }) => block.id === handle)?.key ?? "";
  change(createEdits(doc, { id: "someone" }), keyOf);
  return toPageDocument(doc);
}

const text = (of: PageDocument, handle: string): unknown => of.blocks.find(({ id }) => id === handle);

test("D4 a new handle keeps what stands after the point", () => {
  const after = renamed((edits, keyOf) => edits.renameHandle(keyOf("ch"), "chondrites"));
  expect(text(after, "r")).toMatchObject({ data: "chondrites", text: "mg_si = MgO / SiO2 # MgO stays\nch_only = chondrites.MgO - mean(chondrites.SiO2)" });
  expect(text(after, "t")).toMatchObject({ data: "chondrites", y: "MgO / chondrites.SiO2" });
  expect(text(after, "n")).toMatchObject({ text: "MgO of the chondrites: {{mean(chondrites.MgO)}}; ratio {{r.mg_si}}" });
});

test("D4 a column's new name is written with the backticks it needs, after a point too", () => {
  const after = renamed((edits, keyOf) => edits.renameColumn(keyOf("ch"), "MgO", "MgO (wt%)"));
  expect(text(after, "r")).toMatchObject({ text: "mg_si = `MgO (wt%)` / SiO2 # MgO stays\nch_only = ch.`MgO (wt%)` - mean(ch.SiO2)" });
  expect(text(after, "t")).toMatchObject({ y: "`MgO (wt%)` / ch.SiO2", where: "`MgO (wt%)` > wtpct(3)" });
  expect(text(after, "n")).toMatchObject({ text: "MgO of the chondrites: {{mean(ch.`MgO (wt%)`)}}; ratio {{r.mg_si}}" });
  expect(text(after, "ch")).toMatchObject({ typed: [{ cells: { "MgO (wt%)": "38", SiO2: "45" } }] });
});

test("D4 a column's new name with a point in it is one name", () => {
  const after = renamed((edits, keyOf) => edits.renameColumn(keyOf("ch"), "MgO", "Mg.O"));
  expect(text(after, "r")).toMatchObject({ text: "mg_si = `Mg.O` / SiO2 # MgO stays\nch_only = ch.`Mg.O` - mean(ch.SiO2)" });
});

test("D4 a column is not given a name that no formula could write", () => {
  expect(() => renamed((edits, keyOf) => edits.renameColumn(keyOf("ch"), "MgO", "Mg`O"))).toThrow(/backtick/);
});
