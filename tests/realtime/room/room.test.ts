import { expect, test } from "vitest";
import * as Y from "yjs";
import { Close } from "@/realtime/protocol";
import { changed, keyOf, textOf } from "../support/rawSocket";
import { house, soon, TestMember } from "./house";

const sortedRows = (batch: readonly string[] | undefined) => [...(batch ?? [])].sort();

test("S1 an edit is broadcast, and acknowledged, only after it is committed", async () => {
  const { storage, addPage } = house();
  const room = await addPage("p");
  const [ada, ben] = [new TestMember("ada", room), new TestMember("ben", room)];
  storage.hold();
  const number = ada.type(" Mine.");
  await soon();
  expect(storage.batches).toHaveLength(1);
  expect([ben.text, ada.storedUpTo]).toStrictEqual(["A note.", 0]);
  storage.release();
  await soon();
  expect([ben.text, ada.storedUpTo]).toStrictEqual(["A note. Mine.", number]);
});

test("S1 an answer to step 1 waits until everything in it is committed", async () => {
  const { storage, addPage } = house();
  const room = await addPage("p");
  const ada = new TestMember("ada", room);
  storage.hold();
  ada.type(" Mine.");
  await soon();
  const late = new TestMember("ben", room);
  await soon();
  expect(late.heard).toStrictEqual([]);
  storage.release();
  await soon();
  expect(late.text).toBe("A note. Mine.");
});

test("S1 one flush is in flight; what arrives meanwhile goes into the next together", async () => {
  const { storage, addPage } = house();
  const room = await addPage("p");
  const [ada, ben] = [new TestMember("ada", room), new TestMember("ben", room)];
  storage.hold();
  ada.type("1");
  await soon();
  for (const n of ["2", "3", "4"]) ada.type(n);
  await soon();
  expect(storage.batches).toHaveLength(1);
  storage.release();
  await soon();
  expect(storage.batches.map((batch) => batch.length)).toStrictEqual([1, 3]);
  expect(ben.text).toBe("A note.1234");
});

test("S1 a page with much to store does not starve another: pages take turns, at most 256 rows a flush", async () => {
  const { storage, addPage } = house();
  const [busy, quiet] = [await addPage("busy"), await addPage("quiet")];
  const [ada, ben] = [new TestMember("ada", busy), new TestMember("ben", quiet)];
  storage.hold();
  ada.type("-");
  await soon();
  for (let n = 0; n < 600; n++) ada.type("x");
  const number = ben.type("y");
  storage.release(false);
  await soon();
  expect(storage.batches[1]).toHaveLength(256);
  expect(storage.batches[1]).toContain("quiet");
  expect(storage.batches[1]?.indexOf("quiet")).toBeGreaterThan(0);
  storage.release();
  await soon(30);
  expect([ada.storedUpTo, ben.storedUpTo]).toStrictEqual([601, number]);
  expect(storage.batches.every((batch) => batch.length <= 256)).toBe(true);
});

test("S1 a flush takes at most 1 MiB", async () => {
  const { storage, addPage } = house();
  const room = await addPage("p");
  const ada = new TestMember("ada", room);
  storage.hold();
  ada.type("-");
  await soon();
  room.receive(
    ada,
    2,
    changed(ada.doc, (doc) => textOf(doc, "ratios").insert(0, "x".repeat(90_000))),
    false,
  );
  for (let n = 0; n < 20; n++) {
    const insert = changed(ada.doc, (doc) => textOf(doc, "remark").insert(0, "y".repeat(60_000)));
    const remove = changed(ada.doc, (doc) => textOf(doc, "remark").delete(0, 60_000));
    room.receive(ada, 3 + 2 * n, insert, false);
    room.receive(ada, 4 + 2 * n, remove, false);
  }
  storage.release();
  await soon(50);
  expect(ada.closedWith).toBeNull();
  expect(ada.storedUpTo).toBe(42);
  // 90 kB and 20 × 60 kB do not fit into one.
  expect(storage.batches.length).toBeGreaterThanOrEqual(3);
});

test("S4 a flush that fails is tried again page by page; only the guilty page is closed, to come back, and its edits were shown to nobody", async () => {
  const { storage, rooms, open, addPage } = house();
  const [good, bad] = [await addPage("good"), await addPage("bad")];
  const [ada, ben, cy] = [new TestMember("ada", good), new TestMember("ben", bad), new TestMember("ada", bad)];
  storage.failing.add("bad");
  storage.hold();
  const number = ada.type(" Good.");
  ben.type(" Bad.");
  storage.release();
  await soon();
  expect(storage.batches.map(sortedRows)).toStrictEqual([["bad", "good"], ["good"], ["bad"]]);
  expect([ada.storedUpTo, ada.closedWith]).toStrictEqual([number, null]);
  expect([ben.closedWith, cy.closedWith]).toStrictEqual([Close.notDurable, Close.notDurable]);
  expect([ben.storedUpTo, cy.text]).toStrictEqual([0, "A note."]);
  expect(rooms.find("bad")).toBeUndefined();
  // The disk is well again: the page is loaded anew, and the edit, still in the browser, arrives.
  storage.failing.clear();
  const again = await open("bad");
  expect(again).not.toBe(bad);
  const back = new TestMember("ben", again);
  Y.applyUpdate(back.doc, Y.encodeStateAsUpdate(ben.doc));
  again.receive(back, 1, Y.encodeStateAsUpdate(ben.doc), true);
  await soon();
  expect(back.storedUpTo).toBe(1);
  expect(new TestMember("ada", again).text).toBe("A note. Bad.");
});

test("S4 an edit by somebody who may not edit any more is named, and the others of its batch come back", async () => {
  const { storage, addPage } = house();
  const room = await addPage("p");
  const [ada, ben] = [new TestMember("ada", room), new TestMember("ben", room)];
  storage.setEditor("group", "ben", false);
  storage.hold();
  ada.type(" A.");
  const number = ben.type(" B.");
  storage.release();
  await soon();
  expect(ben.refusals).toMatchObject([{ number, code: Close.forbidden }]);
  expect(ada.closedWith).toBe(Close.notDurable);
});

test("S5 loading a page twice at once is one load", async () => {
  const { storage, rooms } = house();
  storage.addPage("p", "group", new Uint8Array([0, 0]));
  const [one, two] = await Promise.all([rooms.get("p"), rooms.get("p")]);
  expect(one).toBe(two);
  expect(storage.loads).toBe(1);
  expect(await rooms.get("nothing")).toBeNull();
});

test("S5 a page leaves memory only after its last flush, and is folded when idle", async () => {
  const { storage, rooms, addPage } = house({ lingerMs: 20 });
  const room = await addPage("p");
  const ada = new TestMember("ada", room);
  storage.hold();
  ada.type(" Last words.");
  ada.close(1000);
  rooms.leaveSoon(room);
  await soon(60);
  expect(rooms.find("p")).toBe(room);
  storage.release();
  await soon(60);
  expect(rooms.find("p")).toBeUndefined();
  const stored = await storage.load("p");
  expect(stored?.updates).toStrictEqual([]);
  expect(stored?.base).not.toBeNull();
});

test("S5 a page dropped while an edit of it is being committed is loaded again only after that", async () => {
  const { storage, rooms, open, addPage } = house();
  const room = await addPage("p");
  const ada = new TestMember("ada", room);
  storage.hold();
  ada.type(" Under way.");
  await soon();
  room.fail(Close.restarting, null);
  const again = open("p");
  await soon();
  storage.release();
  expect(new TestMember("ben", await again).text).toBe("A note. Under way.");
  expect(rooms.all).toHaveLength(1);
});

test("S6 a page is folded when so many rows were stored, and goes on", async () => {
  const { storage, addPage } = house({ compactRows: 10 });
  const room = await addPage("p");
  const ada = new TestMember("ada", room);
  for (let n = 0; n < 25; n++) {
    ada.type("x");
    await soon(2);
  }
  await soon();
  const stored = await storage.load("p");
  expect(stored?.updates.length).toBeLessThan(10);
  expect(ada.storedUpTo).toBe(25);
  expect(new TestMember("ben", room).text).toBe(`A note.${"x".repeat(25)}`);
});

test("S6 a page that cannot be folded goes on all the same", async () => {
  const { storage, addPage } = house({ compactRows: 2 });
  const room = await addPage("p");
  storage.compact = () => Promise.reject(new Error("no worker"));
  const ada = new TestMember("ada", room);
  for (let n = 0; n < 5; n++) {
    ada.type("x");
    await soon(2);
  }
  expect(ada.storedUpTo).toBe(5);
});

test("H1 a page holds at most 10 MiB; what would pass that is refused with a sentence, and the page goes on", async () => {
  const { addPage } = house();
  const room = await addPage("p");
  const [ada, ben] = [new TestMember("ada", room), new TestMember("ben", room)];
  const block = (doc: Y.Doc) => doc.getMap<Y.Map<unknown>>("blocks").get(keyOf(doc, "remark"));
  let number = 0;
  // A field of a later release may hold 64 kB each.
  for (; ada.closedWith === null && number < 200; number++)
    room.receive(
      ada,
      number + 1,
      changed(ada.doc, (doc) => block(doc)?.set(`later${number.toString()}`, "x".repeat(64_000))),
      false,
    );
  expect(number).toBe(Math.ceil((10 << 20) / 64_020));
  expect(ada.refusals).toMatchObject([{ number, code: Close.tooLarge, reason: expect.stringMatching(/at most 10.0 MiB/) as string }]);
  await soon(100);
  const mine = ben.type(" Small.");
  await soon(50);
  expect([ben.storedUpTo, ben.closedWith, ben.text]).toStrictEqual([mine, null, "A note. Small."]);
});
