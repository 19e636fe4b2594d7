import { afterAll, beforeAll, expect, test } from "vitest";
import { notifyAccess } from "@/db/queries/accessEvents";
import { addLink, exchangeLink, withdrawLink } from "@/db/queries/links";
import { setArchived } from "@/db/queries/pages";
import { endSession } from "@/db/queries/sessions";
import { hashToken } from "@/db/tokens";
import { toPageDocument } from "@/realtime/document";
import { encodeAwareness, type AwarenessEntry } from "@/realtime/protocol";
import { join, somebody } from "../../db/world";
import { live, ORIGIN, samplePage, type Live } from "../support/live";
import { pause, RawSocket, type Ask } from "../support/rawSocket";

let l: Live;
let lead: string;
let reader: string;
beforeAll(async () => {
  l = await live({ recheckMs: 1500 });
  [lead, reader] = await Promise.all([l.cookieOf(l.lead), l.cookieOf(l.reader)]);
});
afterAll(() => l.stop());

const ask = (over: Partial<Ask>): Ask => ({ port: l.port, pageId: l.pageId, cookie: lead, ...over });

/** Somebody who joined the group for one test. */
async function member(role: "lead" | "analyst" | "reader") {
  const id = await somebody(l.database.db);
  await join(l.database.db, l.groupId, id, role);
  return { id, cookie: await l.cookieOf(id) };
}

async function guest(days = 1) {
  const link = await addLink(l.database.db, { groupId: l.groupId, target: { kind: "page", pageId: l.pageId }, days, label: "Referee", by: l.lead });
  const opened = await exchangeLink(l.database.db, link.id);
  if (opened === null) throw new Error("the link was not exchanged");
  return { linkId: link.id, cookie: `cotectic-reading=${opened.token}` };
}

const refusedAt: readonly [string, () => Promise<Partial<Ask>> | Partial<Ask>, number][] = [
  ["without any cookie", () => ({ cookie: undefined }), 4401],
  ["with a session that does not exist", () => ({ cookie: "cotectic-session=AAAAAAAAAAAAAAAAAAAAAAAAAAAA" }), 4401],
  ["from another site", () => ({ origin: "https://elsewhere.example" }), 4403],
  ["from a program that names no origin", () => ({ origin: null }), 4403],
  ["with an origin that only begins like ours", () => ({ origin: `${ORIGIN}.elsewhere.example` }), 4403],
  ["with a version that is too old", () => ({ version: 0 }), 4426],
  ["with another epoch", () => ({ epoch: 2 }), 4409],
  ["to a page that does not exist", () => ({ pageId: "00000000-0000-4000-8000-000000000000" }), 4404],
  ["to an address that is no page", () => ({ path: "/pages/../etc" }), 4404],
  ["by somebody of another group", async () => ({ cookie: await l.cookieOf(await somebody(l.database.db)) }), 4403],
  ["with the secret in the address instead of a cookie", () => ({ cookie: undefined, path: `/pages/${l.pageId}?${lead.replace("cotectic-", "")}&` }), 4401],
  ["to edit, by somebody who may only read (A6)", () => ({ cookie: reader, edit: true }), 4405],
];
test.each(refusedAt)("A1 nobody gets in %s", async (_, over, code) => {
  const socket = new RawSocket(ask(await over()));
  const closed = await socket.closed;
  expect(closed.code).toBe(code);
  expect(closed.reason).toMatch(/[a-z].*\.$/);
  expect(socket.heard).toStrictEqual([]);
});

test("A1 a session that was ended while the page was closed lets nobody in", async () => {
  const { id, cookie } = await member("analyst");
  await endSession(l.database.db, hashToken(cookie.split("=")[1] ?? ""));
  expect((await new RawSocket(ask({ cookie })).closed).code).toBe(4401);
  const again = await RawSocket.synced(ask({ cookie: await l.cookieOf(id) }));
  await again.close();
});

test.each(["reader", "guest"] as const)("A2 a %s's raw edit over the socket changes nothing", async (who) => {
  const cookie = who === "reader" ? reader : (await guest()).cookie;
  const [one, two] = [await RawSocket.synced(ask({ cookie })), await RawSocket.synced(ask({}))];
  const before = await l.query("select seq from page_updates where page_id = $1", [l.pageId]);
  const number = one.type("ratios", " + 1");
  await one.until(() => one.refusals.length > 0);
  expect(one.refusals[0]).toMatchObject({ number, code: 4403 });
  // Not even read: what is no update at all is refused in the same way.
  one.update(Uint8Array.of(255, 255, 255));
  await one.until(() => one.refusals.length > 1);
  expect(one.storedUpTo).toBe(0);
  expect(toPageDocument(two.doc)).toStrictEqual(samplePage);
  expect(await l.query("select seq from page_updates where page_id = $1", [l.pageId])).toStrictEqual(before);
  await Promise.all([one.close(), two.close()]);
});

test("A3 a member who is removed is shown out within a second, and what they send then is not stored", async () => {
  const { id, cookie } = await member("analyst");
  const [one, two] = [await RawSocket.synced(ask({ cookie })), await RawSocket.synced(ask({}))];
  await l.query("delete from memberships where user_id = $1", [id]);
  const at = performance.now();
  await notifyAccess(l.database.db, { groupId: l.groupId, userId: id });
  expect(await one.closed).toMatchObject({ code: 4403 });
  expect(performance.now() - at).toBeLessThan(1000);
  expect(two.isClosed).toBe(false);
  await two.close();
});

test("A2 the flush itself asks once more: an edit by somebody removed a moment ago is not stored, whatever the socket knows", async () => {
  const pageId = await l.newPage();
  const { id, cookie } = await member("analyst");
  const [one, two] = [await RawSocket.synced(ask({ cookie, pageId })), await RawSocket.synced(ask({ pageId }))];
  await l.query("delete from memberships where user_id = $1", [id]);
  one.type("ratios", " + 1");
  expect(await one.closed).toMatchObject({ code: 4403 });
  expect((await two.closed).code).toBe(4503);
  const again = await RawSocket.synced(ask({ pageId }));
  expect(toPageDocument(again.doc)).toStrictEqual(samplePage);
  expect(two.textOf("ratios")).toBe("mg_si = Mg / Si");
  await again.close();
});

test("A3 a role that changes ends the connection with a sentence", async () => {
  const { id, cookie } = await member("analyst");
  const one = await RawSocket.synced(ask({ cookie }));
  await l.query("update memberships set role = 'reader' where user_id = $1", [id]);
  await notifyAccess(l.database.db, { groupId: l.groupId, userId: id });
  expect(await one.closed).toMatchObject({ code: 4405 });
});

test("A3 signing out ends the connections of that session and of no other", async () => {
  const { id, cookie } = await member("analyst");
  const other = await l.cookieOf(id);
  const [one, two] = [await RawSocket.synced(ask({ cookie })), await RawSocket.synced(ask({ cookie: other }))];
  await endSession(l.database.db, hashToken(cookie.split("=")[1] ?? ""));
  await notifyAccess(l.database.db, { userId: id });
  expect(await one.closed).toMatchObject({ code: 4401 });
  await pause(200);
  expect(two.isClosed).toBe(false);
  await two.close();
});

test("A3 withdrawing a link shows its guests out, and one that runs out does so by itself", async () => {
  const withdrawn = await guest();
  const one = await RawSocket.synced(ask({ cookie: withdrawn.cookie }));
  expect(await withdrawLink(l.database.db, l.groupId, withdrawn.linkId)).toBe(true);
  await notifyAccess(l.database.db, { linkId: withdrawn.linkId });
  expect((await one.closed).code).toBe(4403);
  const short = await guest();
  await l.query("update reading_links set expires_at = now() + interval '700 milliseconds' where id = $1", [short.linkId]);
  const at = performance.now();
  const two = await RawSocket.synced(ask({ cookie: short.cookie }));
  expect((await two.closed).code).toBe(4403);
  expect(performance.now() - at).toBeLessThan(1400);
});

test("A3 a change of which no notice came is found by looking again", async () => {
  const { id, cookie } = await member("reader");
  const one = await RawSocket.synced(ask({ cookie }));
  await l.query("delete from memberships where user_id = $1", [id]);
  expect((await one.closed).code).toBe(4403);
});

test("A3 a page that is archived takes no edits any more", async () => {
  const pageId = await l.newPage();
  const one = await RawSocket.synced(ask({ pageId, edit: true }));
  await setArchived(l.database.db, pageId, true);
  await notifyAccess(l.database.db, { pageId });
  expect((await one.closed).code).toBe(4405);
  const two = await RawSocket.synced(ask({ pageId }));
  two.type("ratios", "!");
  await two.until(() => two.refusals.length === 1);
  await two.close();
});

const saysOf = (socket: RawSocket): AwarenessEntry[] => socket.heard.flatMap((h) => (h.is === "awareness" ? h.entries : []));

test("A4 the server stamps name and colour, and nobody speaks for others; guests neither see nor are seen", async () => {
  const outside = await guest();
  const [one, two, three] = [
    await RawSocket.synced(ask({})),
    await RawSocket.synced(ask({ cookie: reader })),
    await RawSocket.synced(ask({ cookie: outside.cookie })),
  ];
  one.send(encodeAwareness([{ clientId: 71, clock: 1, state: { block: "b1", user: { id: l.reader, name: "The director", color: "red" } } }]));
  await two.until(() => saysOf(two).length > 0);
  expect(saysOf(two)[0]?.state).toMatchObject({ block: "b1", user: { id: l.lead, name: "Lead" } });
  expect(JSON.stringify(saysOf(two)[0]?.state)).not.toMatch(/red|director/);
  // Somebody else's mark, and a state beside one's own.
  two.send(encodeAwareness([{ clientId: 71, clock: 9, state: { block: "forged" } }]));
  three.send(encodeAwareness([{ clientId: 72, clock: 1, state: { block: "guest" } }]));
  two.send(encodeAwareness([{ clientId: 73, clock: 1, state: { block: "b2" } }]));
  await one.until(() => saysOf(one).length > 0);
  expect(saysOf(one).map((e) => e.state?.block)).toStrictEqual(["b2"]);
  expect(saysOf(three)).toStrictEqual([]);
  await two.close();
  await one.until(() => saysOf(one).some((e) => e.clientId === 73 && e.state === null));
  await Promise.all([one.close(), three.close()]);
});

test("A4 the newest connection of a tab wins over a half-open one, and its end does not take the state away", async () => {
  const [watcher, old] = [await RawSocket.synced(ask({ cookie: reader })), await RawSocket.synced(ask({}))];
  old.send(encodeAwareness([{ clientId: 81, clock: 5, state: { block: "old" } }]));
  await watcher.until(() => saysOf(watcher).some((e) => e.state?.block === "old"));
  const fresh = await RawSocket.synced(ask({}));
  fresh.send(encodeAwareness([{ clientId: 81, clock: 6, state: { block: "new" } }]));
  await watcher.until(() => saysOf(watcher).some((e) => e.state?.block === "new"));
  old.drop();
  await pause(150);
  expect(saysOf(watcher).at(-1)?.state?.block).toBe("new");
  await Promise.all([watcher.close(), fresh.close()]);
});

test("A4 states that change too quickly are told at the pace allowed, the latest always", async () => {
  const [one, two] = [await RawSocket.synced(ask({})), await RawSocket.synced(ask({ cookie: reader }))];
  for (let clock = 1; clock <= 100; clock++) one.send(encodeAwareness([{ clientId: 91, clock, state: { n: clock } }]));
  await two.until(() => saysOf(two).some((e) => e.state?.n === 100));
  expect(saysOf(two).length).toBeLessThan(15);
  await Promise.all([one.close(), two.close()]);
});
