import { afterAll, beforeAll, expect, test } from "vitest";
import * as Y from "yjs";
import { toPageDocument } from "@/realtime/document";
import { encodeSync, Sync } from "@/realtime/protocol";
import { live, samplePage, type Live } from "../support/live";
import { pause, RawSocket } from "../support/rawSocket";

let l: Live;
let lead: string;
let analyst: string;
beforeAll(async () => {
  l = await live();
  [lead, analyst] = await Promise.all([l.cookieOf(l.lead), l.cookieOf(l.analyst)]);
});
afterAll(() => l.stop());

const open = (cookie: string, pageId = l.pageId) => RawSocket.synced({ port: l.port, pageId, cookie });

test("S5 a page is synced as the database has it", async () => {
  const one = await open(lead);
  expect(toPageDocument(one.doc)).toStrictEqual(samplePage);
  await one.close();
});

test("S1, S2 an edit reaches the others and is acknowledged by number, and it is in the database by then", async () => {
  const pageId = await l.newPage();
  const [one, two] = [await open(lead, pageId), await open(analyst, pageId)];
  const number = one.type("ratios", "\nal_si = Al / Si");
  await one.stored(number);
  const rows = await l.query<{ update: Buffer; user_id: string }>("select update, user_id from page_updates where page_id = $1 order by seq", [pageId]);
  const doc = new Y.Doc();
  for (const row of rows) Y.applyUpdate(doc, row.update);
  expect(toPageDocument(doc).blocks[1]).toMatchObject({ text: "mg_si = Mg / Si\nal_si = Al / Si" });
  expect(rows.at(-1)?.user_id).toBe(l.lead);
  await two.until(() => two.textOf("ratios").endsWith("Al / Si"));
  await Promise.all([one.close(), two.close()]);
});

test("S2 a step 2 that brings nothing is acknowledged too", async () => {
  const one = await open(lead);
  await one.stored(1);
  const number = one.update(new Uint8Array([0, 0]));
  await one.stored(number);
  await one.close();
});

test("S4 edits made while nothing was connected arrive with the step 2 of the next connection", async () => {
  const pageId = await l.newPage();
  const one = await open(lead, pageId);
  await one.close();
  const text = one.doc;
  const two = new RawSocket({ port: l.port, pageId, cookie: lead });
  two.answers = false;
  await two.opened();
  await two.sync();
  const offline = new Y.Doc();
  Y.applyUpdate(offline, Y.encodeStateAsUpdate(text));
  offline.getMap("page").set("title", "Offline");
  two.send(encodeSync(Sync.step2, Y.encodeStateAsUpdate(offline, Y.encodeStateVector(two.doc))));
  await two.stored(two.sent);
  const three = await open(analyst, pageId);
  expect(toPageDocument(three.doc).title).toBe("Offline");
  const [row] = await l.query<{ title: string }>("select title from pages where id = $1", [pageId]);
  expect(row?.title).toBe("Offline");
  await Promise.all([two.close(), three.close()]);
});

test("H2 an update that builds on something nobody has is asked for again, and others are unharmed", async () => {
  const pageId = await l.newPage();
  const [one, two] = [await open(lead, pageId), await open(analyst, pageId)];
  one.doc.transact(() => one.doc.getMap("page").set("title", "never sent"));
  one.edit((doc) => doc.getMap("page").set("title", "builds on it"));
  expect((await one.closed).code).toBe(4522);
  await two.stored(two.type("remark", " More."));
  await two.close();
});

test("D1 two people who add a block each at once both keep theirs", async () => {
  const { createEdits } = await import("@/realtime/document");
  const pageId = await l.newPage();
  const [one, two] = [await open(lead, pageId), await open(analyst, pageId)];
  const number = one.edit((doc) => createEdits(doc, { id: l.lead }).addBlock({ kind: "note", id: "mine", text: "one" }, null));
  const other = two.edit((doc) => createEdits(doc, { id: l.analyst }).addBlock({ kind: "note", id: "yours", text: "two" }, null));
  await Promise.all([one.stored(number), two.stored(other)]);
  for (const socket of [one, two]) await socket.until(() => toPageDocument(socket.doc).blocks.length === 5);
  expect(toPageDocument(one.doc)).toStrictEqual(toPageDocument(two.doc));
  expect(new Set(toPageDocument(one.doc).blocks.map((b) => b.id))).toStrictEqual(new Set(["mine", "yours", "bulk", "ratios", "remark"]));
  await Promise.all([one.close(), two.close()]);
});

test("the health address says how the server is", async () => {
  const one = await open(lead);
  const answer = await fetch(`http://127.0.0.1:${l.port.toString()}/health`);
  expect(answer.status).toBe(200);
  expect(await answer.json()).toMatchObject({ status: "ok", connections: 1 });
  await one.close();
  await pause(50);
  expect(await (await fetch(`http://127.0.0.1:${l.port.toString()}/health`)).json()).toMatchObject({ connections: 0 });
  expect((await fetch(`http://127.0.0.1:${l.port.toString()}/`)).status).toBe(404);
});
