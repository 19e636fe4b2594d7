import { expect, test } from "vitest";
import * as Y from "yjs";
import type { OwnBody, PageDocument } from "@/cells";
import { createEdits, createUndo, EditError, emptyDoc, encodeNewPage, readPage, toPageDocument } from "@/realtime/document";
import { blocksOf, LOCAL, ownBodiesOf } from "@/realtime/document/shape";
import { applyAndWatch } from "@/realtime/room/capture";

const mantle: OwnBody = { name: "a mantle", source: "10.1000/xyz", fromMemory: false, values: [{ species: "Mg", unit: "wt%", value: 22, sigma: 0.4 }] };
const richer: OwnBody = { ...mantle, values: [{ species: "Mg", unit: "wt%", value: 24 }] };
const page: PageDocument = {
  format: "cotectic-page/1",
  title: "Bodies",
  bodies: { CI: "CI_PLJ14" },
  blocks: [{ kind: "formula", id: "f", text: "a = at(Mg, M)" }],
};

function made(of: PageDocument = page) {
  const doc = emptyDoc();
  Y.applyUpdate(doc, encodeNewPage(of));
  const server = emptyDoc();
  Y.applyUpdate(server, Y.encodeStateAsUpdate(doc));
  const edits = createEdits(doc, { id: "ada" });
  /** What the server says to everything this person did since. */
  const judge = () => applyAndWatch(server, Y.encodeStateAsUpdate(doc, Y.encodeStateVector(server)), "ada");
  return { doc, server, edits, judge };
}

test("D1 a body of the group's own comes onto the page with its name, whole, in one step of undo", () => {
  const { doc, server, edits, judge } = made();
  const undo = createUndo(doc);
  edits.setBodies({ CI: "CI_PLJ14", M: "OWN_M_1" }, { OWN_M_1: mantle });
  expect(judge().fault).toBeNull();
  expect(toPageDocument(server)).toStrictEqual({ ...page, bodies: { CI: "CI_PLJ14", M: "OWN_M_1" }, ownBodies: { OWN_M_1: mantle } });
  undo.undo();
  expect(judge().fault).toBeNull();
  expect(toPageDocument(server)).toStrictEqual(page);
  undo.redo();
  expect(judge().fault).toBeNull();
  expect(toPageDocument(server).ownBodies).toStrictEqual({ OWN_M_1: mantle });
});

test("what neither a name nor a block speaks of any more leaves the page; what a formula names stays", () => {
  const { doc, edits } = made();
  edits.setBodies({ M: "OWN_M_1", N: "OWN_N_1" }, { OWN_M_1: mantle, OWN_N_1: richer });
  const [f] = readPage(doc).blocks;
  edits.setField(f?.key ?? "", "text", "a = at(Mg, OWN_N_1)");
  edits.setBodies({ CI: "CI_PLJ14" });
  expect(toPageDocument(doc).ownBodies).toStrictEqual({ OWN_N_1: richer });
  edits.binBlock(f?.key ?? "");
  edits.setBodies({});
  // From the bin a block comes back whole, and so must what it speaks of.
  expect(toPageDocument(doc).ownBodies).toStrictEqual({ OWN_N_1: richer });
});

test("a copy that nothing names is not taken, and one with a fault is refused with its row", () => {
  const { doc, edits } = made();
  edits.setBodies({ CI: "CI_PLJ14" }, { OWN_M_1: mantle });
  expect(toPageDocument(doc)).toStrictEqual(page);
  const wrong = { ...mantle, values: [{ species: "Xx", unit: "wt%", value: 1 }] };
  expect(() => edits.setBodies({ M: "OWN_M_1" }, { OWN_M_1: wrong })).toThrow(/OWN_M_1 cannot be taken: Row 1, Xx/);
  expect(() => edits.setBodies({ M: "CI_MS95" }, { CI_MS95: mantle })).toThrow(EditError);
  expect(toPageDocument(doc)).toStrictEqual(page);
});

test("what an id stands for never changes, whoever tries", () => {
  const { doc, server, edits, judge } = made();
  edits.setBodies({ M: "OWN_M_1" }, { OWN_M_1: mantle });
  expect(judge().fault).toBeNull();
  // The same again is nothing new, in whatever order its keys come.
  edits.setBodies({ M: "OWN_M_1", O: "OWN_M_1" }, { OWN_M_1: { values: mantle.values, fromMemory: false, source: mantle.source, name: mantle.name } });
  expect(() => edits.setBodies({ M: "OWN_M_1" }, { OWN_M_1: richer })).toThrow(/on this page already with other values/);
  // A client of somebody's own making.
  doc.transact(() => ownBodiesOf(doc).set("OWN_M_1", structuredClone(richer)), LOCAL);
  expect(judge().fault).toMatch(/OWN_M_1 is on this page already with other values/);
  expect(server.isDestroyed).toBe(false);
});

test("two people who choose the same body at once have it once", () => {
  const { doc, server } = made();
  const ben = emptyDoc();
  Y.applyUpdate(ben, Y.encodeStateAsUpdate(doc));
  createEdits(doc, { id: "ada" }).setBodies({ A: "OWN_M_1" }, { OWN_M_1: mantle });
  createEdits(ben, { id: "ben" }).setBodies({ B: "OWN_M_1" }, { OWN_M_1: mantle });
  for (const [one, name] of [
    [doc, "ada"],
    [ben, "ben"],
  ] as const)
    expect(applyAndWatch(server, Y.encodeStateAsUpdate(one, Y.encodeStateVector(server)), name).fault).toBeNull();
  expect(toPageDocument(server)).toMatchObject({ bodies: { A: "OWN_M_1", B: "OWN_M_1" }, ownBodies: { OWN_M_1: mantle } });
});

test.each<[string, string, unknown, RegExp]>([
  ["an id of a built-in body", "CI_PLJ14", mantle, /id of an own body is damaged/],
  ["no body at all", "OWN_M_1", "mantle", /OWN_M_1 cannot be taken/],
  ["a value that is no number", "OWN_M_1", { ...mantle, values: [{ species: "Mg", unit: "wt%", value: Number.NaN }] }, /OWN_M_1 cannot be taken/],
  ["a negative value", "OWN_M_1", { ...mantle, values: [{ species: "Mg", unit: "wt%", value: -1 }] }, /Row 1, Mg: the value is -1/],
  ["a key that bodies do not have", "OWN_M_1", { ...mantle, checked: "by me" }, /OWN_M_1 cannot be taken/],
])("D3 the server refuses %s", (_, id, body, says) => {
  const { doc, judge } = made();
  doc.transact(() => ownBodiesOf(doc).set(id, body), LOCAL);
  expect(judge().fault).toMatch(says);
});

test("D3 the server refuses more bodies than a page may carry", () => {
  const { doc, judge, edits } = made();
  doc.transact(() => {
    for (let n = 1; n <= 41; n++) ownBodiesOf(doc).set(`OWN_M_${n}`, mantle);
  }, LOCAL);
  expect(judge().fault).toMatch(/at most 40 own bodies/);
  const many = Object.fromEntries(Array.from({ length: 41 }, (_, n) => [`OWN_N_${n}`, mantle]));
  expect(() => edits.setBodies(Object.fromEntries(Object.keys(many).map((id) => [`a${id}`, id])), many)).toThrow(/at most 40/);
});

test("a body that cannot be read is left out and said, and the rest of the page is read", () => {
  const { doc } = made({ ...page, bodies: { M: "OWN_M_1" }, ownBodies: { OWN_M_1: mantle } });
  doc.transact(() => ownBodiesOf(doc).set("OWN_B_1", { name: "half a body" }), LOCAL);
  const { ownBodies, problems } = readPage(doc);
  expect(Object.keys(ownBodies)).toEqual(["OWN_M_1"]);
  expect(problems).toMatchObject([{ code: "unreadable-body", severity: "error", text: expect.stringMatching(/OWN_B_1/) }]);
});

test("a body that did not change is the identical object after other edits", () => {
  const { doc, edits } = made({ ...page, bodies: { M: "OWN_M_1" }, ownBodies: { OWN_M_1: mantle } });
  const before = readPage(doc).ownBodies["OWN_M_1"];
  edits.setTitle("Another title");
  expect(readPage(doc).ownBodies["OWN_M_1"]).toBe(before);
  expect(blocksOf(doc).size).toBe(1);
});
