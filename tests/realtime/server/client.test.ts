import { afterAll, beforeAll, expect, test } from "vitest";
import { notifyAccess } from "@/db/queries/accessEvents";
import { createEdits, createUndo } from "@/realtime/document";
import { join, somebody } from "../../db/world";
import { live, type Live } from "../support/live";
import { nodeClient } from "../support/nodeClient";
import { Relay } from "../support/processes";
import { keyOf, pause, RawSocket } from "../support/rawSocket";

let l: Live;
let lead: string;
let relay: Relay;
beforeAll(async () => {
  l = await live({ banMs: 300 });
  lead = await l.cookieOf(l.lead);
  relay = await new Relay().open();
  relay.lead(l.port);
});
afterAll(async () => {
  await relay.close();
  await l.stop();
});

const user = () => ({ id: l.lead, name: "Lead" });

test("S2 says Saving while an edit is under way and Saved once it is acknowledged", async () => {
  const one = nodeClient({ port: l.port, pageId: await l.newPage(), cookie: lead, user: user() });
  await one.until(() => one.save.kind === "saved");
  expect(one.isReady).toBe(true);
  one.type("remark", "!");
  expect(one.save).toStrictEqual({ kind: "saving", text: "Saving", waiting: 1 });
  await one.until(() => one.save.kind === "saved");
  expect(one.saves.map((save) => save.text)).toStrictEqual(["Saving", "Saved", "Saving", "Saved"]);
  one.close();
});

test("S2 counts edits made offline, and they arrive, with those typed before the server asked", async () => {
  const pageId = await l.newPage();
  const one = nodeClient({ port: relay.port, pageId, cookie: lead, user: user() });
  await one.until(() => one.save.kind === "saved");
  relay.lead(null);
  relay.cut();
  await one.until(() => one.save.kind === "offline");
  expect(one.save.text).toBe("Offline");
  one.type("remark", "1");
  expect(one.save.text).toBe("Offline, 1 edit waiting");
  one.type("remark", "2");
  expect(one.save).toStrictEqual({ kind: "offline", text: "Offline, 2 edits waiting", waiting: 2 });
  relay.lead(l.port);
  const typing = setInterval(() => one.type("remark", "."), 1);
  await one.until(() => one.save.kind === "saving");
  await pause(60);
  clearInterval(typing);
  await one.until(() => one.save.kind === "saved");
  // Nothing ended the connection: nothing that builds on unsent edits went before them.
  expect(one.saves.filter((save) => save.kind === "offline" && save.waiting === 0)).toHaveLength(1);
  const two = await RawSocket.synced({ port: l.port, pageId, cookie: lead });
  expect(two.textOf("remark")).toBe(one.textOf("remark"));
  expect(two.textOf("remark")).toMatch(/^A note\.12\.+$/);
  one.close();
  await two.close();
});

test("S2 a refused edit is said with its reason, and nothing is called saved any more", async () => {
  const one = nodeClient({ port: l.port, pageId: await l.newPage(), cookie: lead, user: user() });
  await one.until(() => one.save.kind === "saved");
  one.doc.getMap("page").set("title", 7);
  await one.until(() => one.ended !== null);
  expect(one.ended).toMatchObject({ code: 4422, sentence: expect.stringMatching(/title of a page is a text/) as string });
  expect(one.save).toMatchObject({ kind: "refused", text: expect.stringMatching(/^Refused: The title/) as string, waiting: 1 });
  one.type("remark", "!");
  expect(one.save).toMatchObject({ kind: "refused", waiting: 2 });
  await pause(700);
  expect(one.ended?.code).toBe(4422);
  one.close();
});

test("A6 somebody who lost the right to edit while offline is told so at the next connection, and nothing of theirs merges", async () => {
  const pageId = await l.newPage();
  const id = await somebody(l.database.db);
  await join(l.database.db, l.groupId, id, "analyst");
  const one = nodeClient({ port: relay.port, pageId, cookie: await l.cookieOf(id), user: { id, name: "A" } });
  await one.until(() => one.save.kind === "saved");
  relay.lead(null);
  relay.cut();
  await one.until(() => one.save.kind === "offline");
  one.type("remark", " Mine.");
  await l.query("update memberships set role = 'reader' where user_id = $1", [id]);
  await notifyAccess(l.database.db, { groupId: l.groupId, userId: id });
  relay.lead(l.port);
  await one.until(() => one.ended !== null);
  expect(one.ended?.code).toBe(4405);
  expect(one.save).toMatchObject({ kind: "refused", waiting: 1 });
  const two = await RawSocket.synced({ port: l.port, pageId, cookie: lead });
  expect(two.textOf("remark")).toBe("A note.");
  one.close();
  await two.close();
});

test("A2 a reader's client gets the page and every edit, and sends none", async () => {
  const pageId = await l.newPage();
  const [one, two] = [
    nodeClient({ port: l.port, pageId, cookie: await l.cookieOf(l.reader), user: { id: l.reader, name: "Reader" }, mayEdit: false }),
    nodeClient({ port: l.port, pageId, cookie: lead, user: user() }),
  ];
  await one.until(() => one.isReady);
  await two.until(() => two.save.kind === "saved");
  two.type("remark", " For all.");
  await one.until(() => one.textOf("remark").endsWith("For all."));
  expect(one.save).toStrictEqual({ kind: "saved", text: "Saved", waiting: 0 });
  one.close();
  two.close();
});

test("A3 a removal is explained, and the client does not come back", async () => {
  const id = await somebody(l.database.db);
  await join(l.database.db, l.groupId, id, "analyst");
  const one = nodeClient({ port: l.port, pageId: l.pageId, cookie: await l.cookieOf(id), user: { id, name: "A" } });
  await one.until(() => one.save.kind === "saved");
  await l.query("delete from memberships where user_id = $1", [id]);
  await notifyAccess(l.database.db, { userId: id });
  await one.until(() => one.ended !== null);
  expect(one.ended).toStrictEqual({ code: 4403, sentence: "You have no access to this page any more. Ask a lead of the group." });
  one.close();
});

test("A4 people see each other, under the names the server knows", async () => {
  const pageId = await l.newPage();
  const [one, two] = [
    nodeClient({ port: l.port, pageId, cookie: lead, user: user() }),
    nodeClient({ port: relay.port, pageId, cookie: await l.cookieOf(l.analyst), user: { id: l.analyst, name: "Analyst" } }),
  ];
  one.awareness.setLocalStateField("block", "b1");
  two.awareness.setLocalStateField("block", "b2");
  const seenBy = (client: typeof one) =>
    [...client.awareness.getStates()].filter(([id]) => id !== client.doc.clientID).map(([, state]) => state as Record<string, unknown>);
  await one.until(() => seenBy(one).length === 1 && seenBy(two).length === 1);
  expect(seenBy(one)).toMatchObject([{ block: "b2", user: { id: l.analyst, name: "Analyst" } }]);
  expect(seenBy(two)).toMatchObject([{ block: "b1", user: { id: l.lead, name: "Lead" } }]);
  relay.cut();
  await two.until(() => seenBy(two).length === 0);
  await two.until(() => two.save.kind === "saved" && seenBy(two).length === 1);
  two.awareness.setLocalStateField("block", "b3");
  await one.until(() => seenBy(one)[0]?.block === "b3");
  two.close();
  await one.until(() => seenBy(one).length === 0);
  one.close();
});

test("what undo brings back comes to everybody, as the server wants it", async () => {
  const pageId = await l.newPage();
  const [one, two] = [nodeClient({ port: l.port, pageId, cookie: lead, user: user() }), await RawSocket.synced({ port: l.port, pageId, cookie: lead })];
  await one.until(() => one.save.kind === "saved");
  const undo = createUndo(one.doc);
  const edits = createEdits(one.doc, { id: l.lead });
  const key = keyOf(one.doc, "remark");
  edits.binBlock(key);
  undo.stopCapturing();
  edits.setField(key, "text", "Changed");
  undo.undo();
  undo.undo();
  await one.until(() => one.save.kind === "saved");
  expect(one.textOf("remark")).toBe("A note.");
  await two.until(() => two.textOf("remark") === "A note.");
  one.close();
  await two.close();
});
