import fc from "fast-check";
import * as encoding from "lib0/encoding";
import { afterAll, afterEach, beforeAll, beforeEach, expect, test } from "vitest";
import * as Y from "yjs";
import { createEdits, toPageDocument } from "@/realtime/document";
import { blocksOf, listOf } from "@/realtime/document/shape";
import { encodeAwareness, encodeSync, Message, MOST_LIVE_BYTES, MOST_STEP2_BYTES, Sync } from "@/realtime/protocol";
import { seed } from "../../support/seed";
import { live, samplePage, type Live } from "../support/live";
import { changed, keyOf, pause, RawSocket, textOf } from "../support/rawSocket";

let l: Live;
let cookies: Record<"lead" | "analyst", string>;
let pageId: string;
/** Somebody else on the same page, who must notice nothing. */
let other: RawSocket;

beforeAll(async () => {
  // Longer than any test: bans hold a page, and every test has one of its own.
  l = await live({ banMs: 60_000 });
  cookies = { lead: await l.cookieOf(l.lead), analyst: await l.cookieOf(l.analyst) };
});
afterAll(() => l.stop());
beforeEach(async () => {
  pageId = await l.newPage();
  other = await RawSocket.synced({ port: l.port, pageId, cookie: cookies.lead });
});
/** Whatever was tried: the other is still there, their edits are stored, and the page is what they made of it. */
afterEach(async () => {
  const number = other.type("remark", " Still here.");
  await other.stored(number);
  const fresh = await RawSocket.synced({ port: l.port, pageId, cookie: cookies.lead });
  expect(toPageDocument(fresh.doc)).toStrictEqual(toPageDocument(other.doc));
  expect(fresh.textOf("remark")).toBe("A note. Still here.");
  await Promise.all([fresh.close(), other.close()]);
});

const attacker = () => RawSocket.synced({ port: l.port, pageId, cookie: cookies.analyst });
const rows = async () => (await l.query("select seq from page_updates where page_id = $1", [pageId])).length;

function frame(...numbers: number[]): Uint8Array {
  const encoder = encoding.createEncoder();
  for (const n of numbers) encoding.writeVarUint(encoder, n);
  return encoding.toUint8Array(encoder);
}

const badFrames: readonly [string, (socket: RawSocket) => void][] = [
  ["an empty frame", (s) => s.send(new Uint8Array())],
  ["a message of no known type", (s) => s.send(frame(99))],
  ["a receipt, which only the server gives", (s) => s.send(frame(Message.receipt, 0, 5))],
  ["a sync message of no known kind", (s) => s.send(frame(Message.sync, 7, 0))],
  ["a length far beyond the frame", (s) => s.send(frame(Message.sync, Sync.update, 2 ** 40))],
  ["a number that never ends", (s) => s.send(new Uint8Array(40).fill(0xff))],
  ["text instead of bytes", (s) => s.sendText("hello")],
  ["a damaged state vector", (s) => s.send(encodeSync(Sync.step1, Uint8Array.of(200, 1, 2)))],
  ["awareness that is no JSON", (s) => s.send(frame(Message.awareness, 5, 1, 1, 1, 1, 123))],
  ["an awareness state that is a list", (s) => s.send(encodeAwareness([{ clientId: 1, clock: 1, state: [] as never }]))],
  ["an update that is no update", (s) => s.update(Uint8Array.of(1, 200, 200, 200, 7))],
  ["an update of zeros", (s) => s.update(new Uint8Array(300))],
];
test.each(badFrames)("H1 %s ends the connection that sent it", async (_, attack) => {
  const one = await attacker();
  const before = await rows();
  attack(one);
  // Two of these say nothing at all, and may be taken for what they are.
  await Promise.race([one.closed, pause(300)]);
  if (one.isClosed) expect((await one.closed).code).toBeGreaterThanOrEqual(4400);
  expect(await rows()).toBe(before);
  one.drop();
});

test("H1 an update of more than 1 MiB is refused with a sentence", async () => {
  const one = await attacker();
  const number = one.type("remark", "x".repeat(MOST_LIVE_BYTES + 10));
  const closed = await one.closed;
  expect(closed.code).toBe(4413);
  expect(closed.reason).toMatch(/too large/);
  expect(one.refusals).toMatchObject([{ number, code: 4413 }]);
});

test("H1 a step 2 of more than 8 MiB, and a frame no message can have, are refused", async () => {
  const one = await attacker();
  one.send(encodeSync(Sync.step2, new Uint8Array(MOST_STEP2_BYTES + 1)));
  expect((await one.closed).code).toBe(4413);
  const two = await attacker();
  two.send(new Uint8Array(13 << 20));
  expect([1006, 1009]).toContain((await two.closed).code);
});

test("H1 a text that grows past its limit is refused, though each edit is small", async () => {
  const one = await attacker();
  one.type("remark", "x".repeat(60_000));
  one.type("remark", "x".repeat(60_000));
  const closed = await one.closed;
  expect(closed.code).toBe(4422);
  expect(closed.reason).toMatch(/at most 100,000 characters/);
  await other.until(() => other.textOf("remark").length > 60_000);
  await other.stored(other.edit((doc) => textOf(doc, "remark").delete(7, 60_000)));
});

test("H1 more than 50 messages a second sustained ends the connection, to try again", async () => {
  const one = await attacker();
  for (let n = 0; n < 260; n++) one.update(Uint8Array.of(0, 0));
  expect((await one.closed).code).toBe(4529);
});

test("H1 asking for the whole page over and over ends the connection", async () => {
  const one = await attacker();
  for (let n = 0; n < 40; n++) one.send(encodeSync(Sync.step1, Uint8Array.of(0)));
  expect((await one.closed).code).toBe(4529);
});

const block = (doc: Y.Doc, handle: string) => {
  const found = blocksOf(doc).get(keyOf(doc, handle));
  if (found === undefined) throw new Error("no block");
  return found;
};
const amendment = { row: "a", sample: "A", column: "Mg", was: "14.2", value: "14.9", reason: "Misread digit" };
const putAmendment = (doc: Y.Doc, entry: object) => listOf(block(doc, "bulk"), "amendments")?.set("a/Mg", { place: "a0", entry });
const nested = (depth: number): unknown => (depth === 0 ? 1 : [nested(depth - 1)]);
const badShapes: readonly [string, (doc: Y.Doc) => void][] = [
  ["a root that pages do not have", (doc) => doc.getMap("extra").set("a", 1)],
  ["a field that has another type", (doc) => block(doc, "ratios").set("data", 7)],
  ["a kind that changes", (doc) => block(doc, "ratios").set("kind", "note")],
  [
    "a block without its containers",
    (doc) => blocksOf(doc).set("newblock", new Y.Map(Object.entries({ kind: "plot", id: "p", place: "a9", plot: "scatter" }))),
  ],
  ["something that is no block", (doc) => blocksOf(doc).set("newblock", "text" as never)],
  ["a text that takes another's place", (doc) => block(doc, "ratios").set("text", "plain")],
  ["a picture in a text", (doc) => textOf(doc, "remark").insertEmbed(0, { image: "x" })],
  ["bold letters in a text", (doc) => textOf(doc, "remark").format(0, 3, { bold: true })],
  ["a list inside a list", (doc) => block(doc, "bulk").set("amendments", new Y.Array())],
  ["a title that is a number", (doc) => doc.getMap("page").set("title", 12)],
  ["another shape of page", (doc) => doc.getMap("page").set("shape", 2)],
  ["an order key that no order can be built on", (doc) => block(doc, "ratios").set("place", "!!")],
  ["a NUL character", (doc) => block(doc, "ratios").set("name", "a\u0000b")],
  ["an entry that is no amendment", (doc) => listOf(block(doc, "bulk"), "amendments")?.set("k", { place: "a0", entry: { row: 1 } })],
  ["a document inside the document", (doc) => block(doc, "ratios").set("sub", new Y.Doc())],
  ["bytes in a field", (doc) => block(doc, "ratios").set("bytes", Uint8Array.of(1, 2))],
  ["an amendment with a number that JSON has not", (doc) => putAmendment(doc, { ...amendment, by: l.analyst, at: "2026-01-02T03:04:05.000Z", extra: 12n })],
  ["an amendment with bytes", (doc) => putAmendment(doc, { ...amendment, by: l.analyst, at: "2026-01-02T03:04:05.000Z", extra: Uint8Array.of(1) })],
  ["an amendment with a million characters", (doc) => putAmendment(doc, { ...amendment, by: l.analyst, extra: "x".repeat(1_000_000) })],
  ["a value nested a thousand times", (doc) => block(doc, "ratios").set("deep", nested(1000))],
  ["a number that JSON has not", (doc) => block(doc, "ratios").set("big", 12n)],
];
test.each(badShapes)("D3 %s is refused, its sender kept out for a moment, and nobody else sees it", async (_, attack) => {
  const one = await attacker();
  const before = await rows();
  const number = one.edit(attack);
  const closed = await one.closed;
  expect(closed.code).toBe(4422);
  expect(one.refusals).toMatchObject([{ number, code: 4422 }]);
  expect(await rows()).toBe(before);
  expect((await new RawSocket({ port: l.port, pageId, cookie: cookies.analyst }).closed).code).toBe(4529);
  const fresh = await RawSocket.synced({ port: l.port, pageId, cookie: cookies.lead });
  expect(toPageDocument(fresh.doc)).toStrictEqual(samplePage);
  await fresh.close();
});

test("H2 a ban ends by itself", async () => {
  const short = await live({ banMs: 300 });
  try {
    const ask = { port: short.port, pageId: short.pageId, cookie: await short.cookieOf(short.analyst) };
    const one = await RawSocket.synced(ask);
    one.edit((doc) => doc.getMap("page").set("title", 12));
    expect((await one.closed).code).toBe(4422);
    const admitted = async (): Promise<boolean> => {
      const again = new RawSocket(ask);
      const isIn = await Promise.race([
        again.closed.then(() => false),
        again
          .opened()
          .then(() => again.sync())
          .then(
            () => true,
            () => false,
          ),
      ]);
      again.drop();
      return isIn;
    };
    while (!(await admitted())) await pause(50);
  } finally {
    await short.stop();
  }
});

test("D3 a fault of reference is no fault of shape: it is stored, and the page says it", async () => {
  const one = await attacker();
  await one.stored(one.edit((doc) => block(doc, "ratios").set("data", "gone")));
  await other.until(() => block(other.doc, "ratios").get("data") === "gone");
  await one.close();
});

test("H2 an edit under the mark of somebody else's browser is refused", async () => {
  const one = await attacker();
  await other.stored(other.type("ratios", " "));
  await one.until(() => one.textOf("ratios").endsWith(" "));
  const forged = new Y.Doc();
  Y.applyUpdate(forged, Y.encodeStateAsUpdate(one.doc));
  forged.clientID = other.doc.clientID;
  one.update(changed(forged, (doc) => textOf(doc, "ratios").insert(0, "forged")));
  expect(await one.closed).toMatchObject({ code: 4422 });
  expect(other.textOf("ratios")).not.toMatch(/forged/);
});

test("H2 one's own older mark is welcome: that is how offline edits arrive", async () => {
  const one = await attacker();
  await one.stored(one.type("ratios", "\na = 1"));
  await one.close();
  const two = await attacker();
  const offline = new Y.Doc();
  Y.applyUpdate(offline, Y.encodeStateAsUpdate(two.doc));
  offline.clientID = one.doc.clientID;
  await two.stored(two.update(changed(offline, (doc) => textOf(doc, "ratios").insert(0, "b = 2\n"))));
  await other.until(() => other.textOf("ratios").startsWith("b = 2"));
  await two.close();
});

test("H2 deleting what others wrote is everybody's right", async () => {
  const one = await attacker();
  await other.stored(other.type("ratios", "\nextra = 1"));
  await one.until(() => one.textOf("ratios").endsWith("extra = 1"));
  await one.stored(one.edit((doc) => textOf(doc, "ratios").delete(12, 9)));
  await other.until(() => !other.textOf("ratios").includes("extra"));
  await one.close();
});

test("D6 an amendment is on record in the same transaction, with the person whose it is", async () => {
  const one = await attacker();
  const edit = (value: string) => one.edit((doc) => createEdits(doc, { id: l.analyst }).putEntry(keyOf(doc, "bulk"), "amendments", { ...amendment, value }));
  edit("14.9");
  await one.stored(edit("15.0"));
  const lines = await l.query(
    "select list, before ->> 'value' as before, after ->> 'value' as after, reason, user_id from amendment_log where page_id = $1 order by id",
    [pageId],
  );
  expect(lines).toStrictEqual([
    { list: "amendments", before: null, after: "14.9", reason: "Misread digit", user_id: l.analyst },
    { list: "amendments", before: "14.9", after: "15.0", reason: "Misread digit", user_id: l.analyst },
  ]);
  const key = keyOf(one.doc, "bulk");
  await one.stored(one.edit((doc) => createEdits(doc, { id: l.analyst }).removeEntry(key, "amendments", amendmentKey(doc))));
  expect(await l.query("select after from amendment_log where page_id = $1 order by id desc limit 1", [pageId])).toStrictEqual([{ after: null }]);
  await one.close();
});

const amendmentKey = (doc: Y.Doc): string => createEdits(doc, { id: "" }).entries(keyOf(doc, "bulk"), "amendments")[0]?.key ?? "";

test("D6 the loser of two amendments made at once is still on record", async () => {
  const one = await attacker();
  const put = (socket: RawSocket, by: string, value: string) =>
    changed(socket.doc, (doc) => createEdits(doc, { id: by }).putEntry(keyOf(doc, "bulk"), "amendments", { ...amendment, value }));
  const [a, b] = [put(one, l.analyst, "15.1"), put(other, l.lead, "15.2")];
  await Promise.all([one.stored(one.update(a)), other.stored(other.update(b))]);
  const lines = await l.query<{ after: string; user_id: string }>("select after ->> 'value' as after, user_id from amendment_log where page_id = $1", [pageId]);
  expect(new Set(lines.map((line) => `${line.after} ${line.user_id}`))).toStrictEqual(new Set([`15.1 ${l.analyst}`, `15.2 ${l.lead}`]));
  await one.close();
});

test("D6 an amendment in another's name is refused", async () => {
  const one = await attacker();
  one.edit((doc) => createEdits(doc, { id: l.lead }).putEntry(keyOf(doc, "bulk"), "amendments", amendment));
  const closed = await one.closed;
  expect(closed.code).toBe(4422);
  expect(closed.reason).toMatch(/names somebody else/);
  expect(await l.query("select 1 from amendment_log where page_id = $1", [pageId])).toStrictEqual([]);
});

test("D6 another's amendment may come back as it was, as undo brings it", async () => {
  await other.stored(other.edit((doc) => createEdits(doc, { id: l.lead }).putEntry(keyOf(doc, "bulk"), "amendments", amendment)));
  const one = await attacker();
  const list = () => listOf(block(one.doc, "bulk"), "amendments");
  const key = amendmentKey(one.doc);
  const was = list()?.get(key);
  await one.stored(one.edit(() => list()?.delete(key)));
  await one.stored(one.edit(() => list()?.set(key, was)));
  await other.until(() => listOf(block(other.doc, "bulk"), "amendments")?.has(key) === true);
  await one.close();
});

test("H2 whatever bytes come as an update, the others are unharmed", async () => {
  const real = changed(other.doc, () => undefined);
  const template = new Y.Doc();
  Y.applyUpdate(template, Y.encodeStateAsUpdate(other.doc));
  const valid = changed(template, (doc) => createEdits(doc, { id: l.analyst }).addBlock({ kind: "note", id: "n", text: "text" }, null));
  expect(real.length).toBeLessThan(valid.length);
  const bytes = fc.oneof(
    fc.uint8Array({ maxLength: 60 }),
    // A real update with a few bytes changed comes much further than noise.
    fc.array(fc.tuple(fc.nat(valid.length - 1), fc.nat(255)), { minLength: 1, maxLength: 4 }).map((changes) => {
      const copy = valid.slice();
      for (const [at, byte] of changes) copy[at] = byte;
      return copy;
    }),
  );
  const before = toPageDocument(other.doc);
  for (const update of fc.sample(bytes, { seed, numRuns: 60 })) {
    const one = new RawSocket({ port: l.port, pageId, cookie: cookies.analyst });
    one.answers = false;
    await one.opened();
    one.update(update);
    await Promise.race([one.closed, one.until(() => one.storedUpTo > 0)]);
    if (!one.isClosed) await one.close();
  }
  await other.stored(other.type("ratios", " "));
  expect(other.isClosed).toBe(false);
  // A note may have come through whole under changed letters; nothing of the page is damaged.
  expect(toPageDocument(other.doc).blocks.slice(-2)).toMatchObject([{ id: "ratios" }, { id: "remark" }]);
  expect(before.title).toBe(toPageDocument(other.doc).title);
}, 60_000);
