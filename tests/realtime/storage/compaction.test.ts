import pg from "pg";
import { afterAll, beforeAll, expect, test } from "vitest";
import * as Y from "yjs";
import { toPageDocument } from "@/realtime/document";
import { compactPage } from "@/realtime/storage/compact";
import { fold } from "@/realtime/storage/fold";
import { PostgresStorage } from "@/realtime/storage/postgres";
import { stand, type Stand } from "../support/live";
import { changed, textOf } from "../support/rawSocket";

let s: Stand;
let storage: PostgresStorage;
beforeAll(async () => {
  s = await stand();
  storage = new PostgresStorage(s.database, s.database.url);
});
afterAll(async () => {
  await storage.close();
  await s.drop();
});

async function connected<T>(work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: s.database.url });
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}

async function docOf(pageId: string): Promise<Y.Doc> {
  const stored = await storage.load(pageId);
  const doc = new Y.Doc();
  for (const update of [...(stored?.base ? [stored.base] : []), ...(stored?.updates ?? [])]) Y.applyUpdate(doc, update);
  return doc;
}

const seqsOf = async (pageId: string) =>
  (await s.query<{ seq: string }>("select seq from page_updates where page_id = $1 order by seq", [pageId])).map((r) => r.seq);

test("S6 rows that another transaction commits while a page is folded stay, though their numbers are smaller", async () => {
  const pageId = await s.newPage();
  const doc = await docOf(pageId);
  await connected(async (late) => {
    await late.query("begin");
    const first = changed(doc, (d) => d.getMap("page").set("title", "Committed late"));
    const { rows } = await late.query<{ seq: string }>(`insert into page_updates (page_id, epoch, user_id, "update") values ($1, 1, $2, $3) returning seq`, [
      pageId,
      s.lead,
      Buffer.from(first),
    ]);
    // A later number, committed before.
    await s.query(`insert into page_updates (page_id, epoch, user_id, "update") values ($1, 1, $2, $3)`, [
      pageId,
      s.lead,
      Buffer.from(changed(doc, (d) => textOf(d, "remark").insert(0, "Earlier. "))),
    ]);
    expect(await storage.compact(pageId)).toBe(2);
    await late.query("commit");
    expect(await seqsOf(pageId)).toStrictEqual([rows[0]?.seq]);
  });
  expect(toPageDocument(await docOf(pageId))).toStrictEqual(toPageDocument(doc));
  const [state] = await s.query<{ covered: string[]; folded: string }>("select covered, folded from page_states where page_id = $1", [pageId]);
  expect(state).toMatchObject({ folded: "2" });
  expect(state?.covered).toHaveLength(2);
});

test("S6 two who fold a page at once do it once", async () => {
  const pageId = await s.newPage();
  await connected(async (other) => {
    await other.query("begin");
    await other.query("select pg_advisory_xact_lock(hashtextextended('compact ' || $1, 0))", [pageId]);
    expect(await storage.compact(pageId)).toBe(0);
    await other.query("commit");
  });
  expect(await Promise.all([connected((c) => compactPage(c, pageId)), storage.compact(pageId)]).then((n) => n.sort())).toStrictEqual([0, 1]);
  expect(await seqsOf(pageId)).toStrictEqual([]);
});

test("S6 a fold that cannot be finished leaves everything as it was", async () => {
  const pageId = await s.newPage();
  await s.query(`insert into page_updates (page_id, epoch, user_id, "update") values ($1, 1, $2, $3)`, [pageId, s.lead, Buffer.from([9, 9, 9, 9])]);
  const before = await seqsOf(pageId);
  await expect(storage.compact(pageId)).rejects.toThrow();
  expect(await seqsOf(pageId)).toStrictEqual(before);
  const whole = await s.newPage();
  expect(await storage.compact(whole)).toBe(1);
});

test("S6 opening a folded page with many edits behind it takes at most a quarter of replaying them", async () => {
  const pageId = await s.newPage();
  const doc = await docOf(pageId);
  const updates: Buffer[] = [];
  doc.on("update", (update: Uint8Array) => void updates.push(Buffer.from(update)));
  const text = textOf(doc, "remark");
  for (let n = 0; n < 20_000; n++) {
    if (n % 5 === 4) text.delete(text.length - 2, 1);
    else text.insert((n * 7919) % text.length, "abc"[n % 3] ?? "");
  }
  for (let from = 0; from < updates.length; from += 5000)
    await s.query(`insert into page_updates (page_id, epoch, user_id, "update") select $1, 1, $2, u from unnest($3::bytea[]) as u`, [
      pageId,
      s.lead,
      updates.slice(from, from + 5000),
    ]);
  const timed = async (): Promise<number> => {
    const at = performance.now();
    expect(toPageDocument(await docOf(pageId))).toStrictEqual(toPageDocument(doc));
    return performance.now() - at;
  };
  const replayed = await timed();
  expect(await storage.compact(pageId)).toBe(20_001);
  const opened = Math.min(await timed(), await timed(), await timed());
  console.log(`replaying ${replayed.toFixed(0)} ms, opening ${opened.toFixed(0)} ms`);
  expect(opened).toBeLessThan(0.25 * replayed);
});

test("S6 folding is applying: the same state, whatever the order of rows", () => {
  const doc = new Y.Doc();
  const updates: Uint8Array[] = [];
  doc.on("update", (update: Uint8Array) => void updates.push(update));
  const text = doc.getText("t");
  for (let n = 0; n < 50; n++) text.insert(n, String.fromCharCode(65 + (n % 26)));
  const folded = new Y.Doc();
  Y.applyUpdate(folded, fold(updates[0] ?? null, [...updates.slice(1)].reverse()));
  expect(folded.getText("t").toString()).toBe(text.toString());
});
