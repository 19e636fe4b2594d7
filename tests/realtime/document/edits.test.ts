import fc from "fast-check";
import { expect, test } from "vitest";
import * as Y from "yjs";
import { pageSchema, type Block, type PageDocument } from "@/cells";
import { createEdits, createUndo, EditError, emptyDoc, encodeNewPage, readPage, toPageDocument, type PageEdits } from "@/realtime/document";
import { canonical } from "@/realtime/document/entryEdits";
import { applyAndWatch } from "@/realtime/room/capture";
import { seed } from "../../support/seed";
import { arbitraryBlock } from "./arbitraryPage";

const page: PageDocument = {
  format: "cotectic-page/1",
  title: "Chondrites",
  bodies: { earth: "Earth" },
  blocks: [
    {
      kind: "data",
      id: "bulk",
      typed: [
        { id: "a", cells: { Mg: "14", Si: "16" } },
        { id: "b", cells: { Mg: "15", Si: "17" } },
      ],
      amendments: [{ row: "a", sample: "a", column: "Mg", was: "14", value: "14.1", reason: "Misread", by: "ada", at: "2026-01-02T03:04:05.000Z" }],
      assumed: [{ column: "Si", relative: 0.05, reason: "Typical" }],
    },
    { kind: "formula", id: "ratios", data: "bulk", text: "mg_si = Mg / Si\nother = bulk.Mg" },
    { kind: "trend", id: "line", data: "bulk", x: "Mg / Si", y: "Si", method: "york" },
    { kind: "plot", id: "picture", plot: "scatter", drawn: [{ data: "bulk", x: "Mg", y: "Si" }, { trend: "line" }] },
    { kind: "note", id: "remark", text: "See {{ ratios.mg_si }}." },
  ],
};

const fresh = (update: Uint8Array): Y.Doc => {
  const doc = emptyDoc();
  Y.applyUpdate(doc, update);
  return doc;
};

type Act = (edits: PageEdits, doc: Y.Doc, undo: Y.UndoManager) => void;
const pick = <T>(list: readonly T[], n: number): T => {
  const found = list[n % list.length];
  if (found === undefined) throw new EditError("nothing to pick");
  return found;
};
const keys = (doc: Y.Doc) => readPage(doc).blocks.map((b) => b.key);
const tables = (doc: Y.Doc) => readPage(doc).blocks.filter((b) => b.block.kind === "data");
const texts = (doc: Y.Doc) => readPage(doc).blocks.filter((b) => b.block.kind === "formula" || b.block.kind === "note");
const n = fc.nat(1000);
const handle = fc.constantFrom("one", "two", "bulk", "ratios", "line");
const column = fc.constantFrom("Mg", "Si", "Fe", "Mg2");

const acts: fc.Arbitrary<Act> = fc.oneof(
  fc.tuple(arbitraryBlock, n).map(
    ([block, at]): Act =>
      (e, d) =>
        e.addBlock(block, keys(d).length === 0 ? null : pick(keys(d), at)),
  ),
  n.map(
    (at): Act =>
      (e, d) =>
        e.binBlock(pick(keys(d), at)),
  ),
  n.map(
    (at): Act =>
      (e, d) =>
        e.restoreBlock(pick(readPage(d).bin, at).key),
  ),
  fc.tuple(n, n).map(
    ([a, b]): Act =>
      (e, d) =>
        e.moveBlock(pick(keys(d), a), pick(keys(d), b)),
  ),
  fc.tuple(n, fc.constantFrom(4, 6, 8, 12)).map(
    ([at, width]): Act =>
      (e, d) =>
        e.setWidth(pick(keys(d), at), width as 4 | 6 | 8 | 12),
  ),
  fc.string({ maxLength: 20 }).map(
    (title): Act =>
      (e) =>
        e.setTitle(title),
  ),
  fc.dictionary(handle, fc.constantFrom("Earth", "Mars"), { maxKeys: 2 }).map(
    (bodies): Act =>
      (e) =>
        e.setBodies(bodies),
  ),
  fc.tuple(n, n, fc.constantFrom("Mg", " + ", "\n", "🜨")).map(([at, where, text]): Act => (e, d) => {
    const shared = e.text(pick(texts(d), at).key);
    d.transact(() => shared.insert(where % (shared.length + 1), text), { typing: true });
  }),
  fc.tuple(n, n).map(([at, where]): Act => (e, d) => {
    const shared = e.text(pick(texts(d), at).key);
    if (shared.length > 0) d.transact(() => shared.delete(where % shared.length, 1), { typing: true });
  }),
  fc.tuple(n, fc.string({ maxLength: 30 })).map(
    ([at, text]): Act =>
      (e, d) =>
        e.setField(pick(texts(d), at).key, "text", text),
  ),
  fc.tuple(n, handle).map(
    ([at, id]): Act =>
      (e, d) =>
        e.renameHandle(pick(keys(d), at), id),
  ),
  fc.tuple(n, column, column).map(
    ([at, from, to]): Act =>
      (e, d) =>
        e.renameColumn(pick(tables(d), at).key, from, to),
  ),
  fc.tuple(n, column, fc.constantFrom("a", "b", 3), fc.string({ minLength: 1, maxLength: 5 })).map(
    ([at, of, row, value]): Act =>
      (e, d) =>
        e.putEntry(pick(tables(d), at).key, "amendments", { row, sample: "s", column: of, was: "1", value, reason: "Why" }),
  ),
  fc.tuple(n, column).map(
    ([at, of]): Act =>
      (e, d) =>
        e.putEntry(pick(tables(d), at).key, "assumed", { column: of, relative: 0.1, reason: "Why" }),
  ),
  fc.tuple(n, n).map(([at, which]): Act => (e, d) => {
    const { key } = pick(tables(d), at);
    e.removeEntry(key, "amendments", pick(e.entries(key, "amendments"), which).key);
  }),
  fc.tuple(n, fc.array(fc.constantFrom("a", "b", "c"), { maxLength: 3 })).map(
    ([at, ids]): Act =>
      (e, d) =>
        e.setEntries(
          pick(tables(d), at).key,
          "typed",
          [...new Set(ids)].map((id) => ({ id, cells: { Mg: "1" } })),
        ),
  ),
  n.map(
    (at): Act =>
      (e, d) =>
        e.duplicateBlock(pick(keys(d), at)),
  ),
  fc.constant<Act>((_e, _d, undo) => void undo.undo()),
  fc.constant<Act>((_e, _d, undo) => void undo.redo()),
);

/** A person with a copy of the page, whose edits go to others when they are let. */
class Person {
  readonly doc: Y.Doc;
  readonly outbox: Uint8Array[] = [];
  private readonly edits: PageEdits;
  private readonly undo: Y.UndoManager;

  constructor(
    readonly id: string,
    start: Uint8Array,
  ) {
    this.doc = fresh(start);
    this.edits = createEdits(this.doc, { id });
    this.undo = createUndo(this.doc);
    this.doc.on("update", (update: Uint8Array, origin: unknown) => {
      if (origin !== "other") this.outbox.push(update);
    });
  }

  act(act: Act): void {
    try {
      act(this.edits, this.doc, this.undo);
    } catch (error) {
      if (!(error instanceof EditError)) throw error;
    }
  }
}

const steps = fc.array(fc.tuple(fc.boolean(), acts, fc.boolean()), { minLength: 1, maxLength: 25 });

test("D3 every edit that the product makes is one the server takes, whatever others did meanwhile; everybody ends with one page (D1, D6)", () => {
  fc.assert(
    fc.property(steps, (list) => {
      const start = encodeNewPage(page);
      const server = fresh(start);
      const [ada, ben] = [new Person("ada", start), new Person("ben", start)];
      const onRecord = new Set<string>();
      const deliver = (): void => {
        for (const person of [ada, ben]) {
          for (const update of person.outbox.splice(0)) {
            const applied = applyAndWatch(server, update, person.id);
            expect(applied.fault).toBeNull();
            // What somebody else made and this person took away may come back, as undo brings it: the database knows it word for word.
            expect(applied.foreign.filter(({ entry }) => !onRecord.has(canonical(entry)))).toStrictEqual([]);
            for (const line of applied.record) for (const entry of [line.before, line.after]) if (entry !== null) onRecord.add(canonical(entry));
            for (const other of [ada, ben]) if (other !== person && applied.update !== null) Y.applyUpdate(other.doc, applied.update, "other");
          }
        }
      };
      for (const [isAda, act, isDelivered] of list) {
        (isAda ? ada : ben).act(act);
        if (isDelivered) deliver();
      }
      deliver();
      const said = toPageDocument(server);
      expect(toPageDocument(ada.doc)).toStrictEqual(said);
      expect(toPageDocument(ben.doc)).toStrictEqual(said);
      expect(pageSchema.safeParse(said).error?.issues ?? []).toStrictEqual([]);
      expect(new Set(said.blocks.map((b) => b.id)).size).toBe(said.blocks.length);
    }),
    { seed, numRuns: 150 },
  );
}, 120_000);

test.each(
  [
    ["one column in two ways", "Mg", "Mg2"],
    ["two columns of the same typed rows", "Si", "Mg2"],
    ["two columns to one name", "Si", "Fe"],
  ].flatMap(([what = "", from = "", to = ""]) => [[what, from, to, 9, 5] as const, [what, from, to, 5, 9] as const]),
)("D6 two who rename at once are both taken: %s (%s to %s, clients %i and %i)", (_, other, to, first, second) => {
  const server = fresh(encodeNewPage(page));
  const rename = (clientId: number, id: string, from: string, name: string): Uint8Array => {
    const doc = fresh(encodeNewPage(page));
    doc.clientID = clientId;
    let update = new Uint8Array();
    doc.on("update", (made: Uint8Array) => (update = Uint8Array.from(made)));
    createEdits(doc, { id }).renameColumn(pick(tables(doc), 0).key, from, name);
    return update;
  };
  // Whoever loses wrote the amendment, which is Ada's, under a name that no column has in the end.
  const [byCleo, byBen] = [rename(first, "cleo", other, to), rename(second, "ben", "Mg", "Fe")];
  expect(applyAndWatch(server, byCleo, "cleo").foreign).toStrictEqual([]);
  expect(applyAndWatch(server, byBen, "ben").foreign).toStrictEqual([]);
});

const find = (doc: Y.Doc, id: string): { readonly key: string; readonly block: Block } => {
  const found = readPage(doc).blocks.find((b) => b.block.id === id);
  if (found === undefined) throw new Error(`no block ${id}`);
  return found;
};

test("D4 renaming a handle rewrites every use of it, in one transaction, and keeps the old one for late uses", () => {
  const doc = fresh(encodeNewPage(page));
  const edits = createEdits(doc, { id: "ada" });
  let transactions = 0;
  doc.on("update", () => (transactions += 1));
  edits.renameHandle(find(doc, "bulk").key, "wholerock");
  expect(transactions).toBe(1);
  expect(find(doc, "wholerock").block).toMatchObject({ formerly: ["bulk"] });
  expect(find(doc, "ratios").block).toMatchObject({ data: "wholerock", text: "mg_si = Mg / Si\nother = wholerock.Mg" });
  expect(find(doc, "line").block).toMatchObject({ data: "wholerock" });
  expect(find(doc, "picture").block).toMatchObject({ drawn: [{ data: "wholerock", x: "Mg", y: "Si" }, { trend: "line" }] });
  edits.renameHandle(find(doc, "ratios").key, "r");
  expect(find(doc, "remark").block).toMatchObject({ text: "See {{ r.mg_si }}." });
});

test("D4 a use of the old handle, typed while it was renamed elsewhere, is still understood", () => {
  const start = encodeNewPage(page);
  const [ada, ben] = [new Person("ada", start), new Person("ben", start)];
  ada.act((edits, doc) => edits.renameHandle(find(doc, "bulk").key, "wholerock"));
  ben.act((edits, doc) => edits.setField(find(doc, "ratios").key, "text", "mg_si = Mg / Si\nother = bulk.Mg\nlate = bulk.Si"));
  for (const update of ben.outbox) Y.applyUpdate(ada.doc, update, "other");
  for (const update of ada.outbox) Y.applyUpdate(ben.doc, update, "other");
  expect(toPageDocument(ada.doc)).toStrictEqual(toPageDocument(ben.doc));
  expect(find(ada.doc, "ratios").block).toMatchObject({ text: "mg_si = Mg / Si\nother = wholerock.Mg\nlate = bulk.Si" });
  expect(find(ada.doc, "wholerock").block).toMatchObject({ formerly: ["bulk"] });
});

test("D4 renaming a column rewrites it where the table is meant, and amendments by others move with it and stay theirs", () => {
  const start = encodeNewPage(page);
  const server = fresh(start);
  const ben = new Person("ben", start);
  ben.act((edits, doc) => edits.renameColumn(find(doc, "bulk").key, "Mg", "MgO"));
  const applied = ben.outbox.map((update) => applyAndWatch(server, update, "ben"));
  expect(applied).toHaveLength(1);
  expect(applied[0]).toMatchObject({ fault: null, foreign: [] });
  expect(find(server, "ratios").block).toMatchObject({ text: "mg_si = MgO / Si\nother = bulk.MgO" });
  expect(find(server, "line").block).toMatchObject({ x: "MgO / Si" });
  expect(find(server, "bulk").block).toMatchObject({
    typed: [{ cells: { MgO: "14" } }, { cells: { MgO: "15" } }],
    amendments: [{ column: "MgO", value: "14.1", by: "ada" }],
  });
});

test("D3 two edits that merge into two blocks of one handle leave a page that says so, and everything else is read", () => {
  const start = encodeNewPage(page);
  const [ada, ben] = [new Person("ada", start), new Person("ben", start)];
  for (const person of [ada, ben]) person.act((edits) => edits.addBlock({ kind: "note", id: "same", text: person.id }, null));
  for (const update of ben.outbox) Y.applyUpdate(ada.doc, update, "other");
  const reading = readPage(ada.doc);
  expect(reading.problems).toMatchObject([{ code: "two-blocks-of-one-handle" }]);
  expect(reading.blocks.map((b) => b.block.id).sort()).toStrictEqual(["bulk", "line", "picture", "ratios", "remark", "same", "same_2"]);
});

test("undo takes back one's own edits only, and what came from others stays", () => {
  const start = encodeNewPage(page);
  const [ada, ben] = [new Person("ada", start), new Person("ben", start)];
  ada.act((edits) => edits.setTitle("Ada's"));
  ben.act((edits, doc) => edits.setField(find(doc, "remark").key, "text", "Ben's."));
  for (const update of ben.outbox) Y.applyUpdate(ada.doc, update, "other");
  ada.act((_edits, _doc, undo) => void undo.undo());
  ada.act((_edits, _doc, undo) => void undo.undo());
  expect(toPageDocument(ada.doc).title).toBe("Chondrites");
  expect(find(ada.doc, "remark").block).toMatchObject({ text: "Ben's." });
});

test("D5 fields and values that this release does not know survive edits of everything else", () => {
  const doc = fresh(encodeNewPage(page));
  const { key } = find(doc, "ratios");
  const block = (doc.getMap("blocks") as Y.Map<Y.Map<unknown>>).get(key);
  block?.set("fromTheFuture", { deep: [1, "two"] });
  doc.getMap("page").set("alsoNew", true);
  const edits = createEdits(doc, { id: "ada" });
  edits.renameHandle(key, "r");
  edits.setField(key, "text", "x = 1");
  edits.setWidth(key, 6);
  expect(block?.get("fromTheFuture")).toStrictEqual({ deep: [1, "two"] });
  expect(doc.getMap("page").get("alsoNew")).toBe(true);
  expect(readPage(doc).problems).toStrictEqual([]);
});
