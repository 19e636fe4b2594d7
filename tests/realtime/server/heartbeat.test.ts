import { afterAll, beforeAll, expect, test } from "vitest";
import * as Y from "yjs";
import { PAGES_CHANNEL } from "@/realtime/pageNotices";
import { live, type Live } from "../support/live";
import { changed, pause, RawSocket } from "../support/rawSocket";

let l: Live;
let lead: string;
beforeAll(async () => {
  l = await live({ heartbeatMs: 100, lingerMs: 100 });
  lead = await l.cookieOf(l.lead);
});
afterAll(() => l.stop());

test("H4 the server says every beat that it is alive", async () => {
  const one = await RawSocket.synced({ port: l.port, pageId: l.pageId, cookie: lead });
  await one.until(() => one.heard.filter((h) => h.is === "alive").length >= 3);
  await one.close();
});

test("H4 a browser that is silent for two beats, its pongs included, is let go", async () => {
  const one = await RawSocket.synced({ port: l.port, pageId: l.pageId, cookie: lead });
  one.pause();
  const connections = async () => ((await (await fetch(`http://127.0.0.1:${l.port.toString()}/health`)).json()) as { connections: number }).connections;
  await pause(500);
  expect(await connections()).toBe(0);
  one.drop();
});

test("S5 a page nobody is on leaves memory and is the same when it comes back", async () => {
  const pageId = await l.newPage();
  const one = await RawSocket.synced({ port: l.port, pageId, cookie: lead });
  await one.stored(one.type("remark", " Kept."));
  await one.close();
  const pages = async () => ((await (await fetch(`http://127.0.0.1:${l.port.toString()}/health`)).json()) as { pages: number }).pages;
  for (let n = 0; n < 100 && (await pages()) > 0; n++) await pause(50);
  expect(await pages()).toBe(0);
  const two = await RawSocket.synced({ port: l.port, pageId, cookie: lead });
  expect(two.textOf("remark")).toBe("A note. Kept.");
  await two.close();
});

test("A7 what happens beside the document is announced to everybody on the page, guests and readers too", async () => {
  const [one, two] = [
    await RawSocket.synced({ port: l.port, pageId: l.pageId, cookie: lead }),
    await RawSocket.synced({ port: l.port, pageId: l.pageId, cookie: await l.cookieOf(l.reader) }),
  ];
  await l.query("select pg_notify($1, $2)", [PAGES_CHANNEL, JSON.stringify({ pageId: l.pageId, kind: "remarks" })]);
  for (const socket of [one, two]) await socket.until(() => socket.heard.some((h) => h.is === "announcement" && h.announcement?.kind === "remarks"));
  // What is no notice at all is passed over.
  for (const payload of ["", "null", "[]", "{}", '{"pageId":1,"kind":"edits"}', "not json"])
    await l.query("select pg_notify($1, $2)", [PAGES_CHANNEL, payload]);
  await one.stored(one.type("remark", "."));
  await Promise.all([one.close(), two.close()]);
});

test("edits that the web process committed reach whoever is on the page", async () => {
  const pageId = await l.newPage();
  const one = await RawSocket.synced({ port: l.port, pageId, cookie: lead });
  const copy = new Y.Doc();
  Y.applyUpdate(copy, Y.encodeStateAsUpdate(one.doc));
  const title = () => one.doc.getMap("page").get("title");
  const commit = async (said: string): Promise<string | undefined> => {
    const bytes = changed(copy, (doc) => doc.getMap("page").set("title", said));
    const [row] = await l.query<{ seq: string }>(`insert into page_updates (page_id, epoch, user_id, "update") values ($1, 1, $2, $3) returning seq`, [
      pageId,
      l.lead,
      Buffer.from(bytes),
    ]);
    return row?.seq;
  };
  const tell = (seqs: unknown[]) => l.query("select pg_notify($1, $2)", [PAGES_CHANNEL, JSON.stringify({ pageId, kind: "edits", seqs })]);
  await tell([await commit("From the web")]);
  await one.until(() => title() === "From the web");
  // A row that is in the base by now is found there.
  const seq = await commit("Folded before it was told");
  await l.query("delete from page_updates where seq = $1", [seq]);
  await l.query("insert into page_states (page_id, epoch, state, folded, covered) values ($1, 1, $2, 1, '[]')", [
    pageId,
    Buffer.from(Y.encodeStateAsUpdate(copy)),
  ]);
  await tell([seq]);
  await one.until(() => title() === "Folded before it was told");
  await one.close();
});

test("D5 a page set back to an earlier moment ends every connection with a sentence", async () => {
  const pageId = await l.newPage();
  const one = await RawSocket.synced({ port: l.port, pageId, cookie: lead });
  await l.query("update pages set epoch = 2 where id = $1", [pageId]);
  await l.query("select pg_notify($1, $2)", [PAGES_CHANNEL, JSON.stringify({ pageId, kind: "epoch" })]);
  expect(await one.closed).toMatchObject({ code: 4409, reason: expect.stringMatching(/earlier moment/) as string });
});
