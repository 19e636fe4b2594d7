import { randomUUID } from "node:crypto";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import * as Y from "yjs";
import type { GroupRole } from "@/db/access";
import { encodeNewPage } from "@/realtime/document";
import { MemoryStorage } from "@/realtime/storage/memory";
import type { EditRow, PageStorage, StoredPage } from "@/realtime/storage/pageStorage";
import { PostgresStorage } from "@/realtime/storage/postgres";
import { stand, samplePage, type Stand } from "../support/live";

interface Subject {
  readonly storage: PageStorage;
  readonly editor: string;
  readonly other: string;
  newPage(): Promise<string>;
  setRole(userId: string, role: GroupRole): Promise<void>;
  recordOf(pageId: string): Promise<unknown[]>;
  end(): Promise<void>;
}

function inMemory(): Promise<Subject> {
  const storage = new MemoryStorage();
  const [editor, other] = [randomUUID(), randomUUID()];
  for (const id of [editor, other]) storage.setEditor("g", id, true);
  return Promise.resolve({
    storage,
    editor,
    other,
    newPage: () => {
      const id = randomUUID();
      storage.addPage(id, "g", encodeNewPage(samplePage));
      return Promise.resolve(id);
    },
    setRole: (userId, role) => Promise.resolve(storage.setEditor("g", userId, role !== "reader")),
    recordOf: (pageId) => Promise.resolve(storage.recordOf(pageId).map((line) => line.after)),
    end: () => storage.close(),
  });
}

async function inPostgres(): Promise<Subject> {
  const standing: Stand = await stand();
  const storage = new PostgresStorage(standing.database, standing.database.url);
  return {
    storage,
    editor: standing.lead,
    other: standing.analyst,
    newPage: standing.newPage,
    setRole: async (userId, role) => void (await standing.query("update memberships set role = $2 where user_id = $1", [userId, role])),
    recordOf: async (pageId) =>
      (await standing.query<{ after: unknown }>("select after from amendment_log where page_id = $1 order by id", [pageId])).map((row) => row.after),
    end: async () => {
      await storage.close();
      await standing.drop();
    },
  };
}

const subjects: readonly [string, () => Promise<Subject>][] = [
  ["in memory", inMemory],
  ["in PostgreSQL", inPostgres],
];

describe.each(subjects)("pages kept %s", (_, make) => {
  let s: Subject;
  beforeAll(async () => {
    s = await make();
  });
  afterAll(() => s.end());

  const row = (pageId: string, over: Partial<EditRow> = {}): EditRow => ({
    pageId,
    epoch: 1,
    userId: s.editor,
    update: titled("Next"),
    clients: [],
    record: [],
    heading: null,
    ...over,
  });
  const titled = (title: string): Uint8Array => {
    const doc = new Y.Doc();
    doc.getMap("page").set("title", title);
    return Y.encodeStateAsUpdate(doc);
  };
  const docOf = (stored: StoredPage | null): Y.Doc => {
    const doc = new Y.Doc();
    for (const update of [...(stored?.base ? [stored.base] : []), ...(stored?.updates ?? [])]) Y.applyUpdate(doc, update);
    return doc;
  };

  test("S5 a page is loaded as it was stored; one that does not exist is null", async () => {
    const pageId = await s.newPage();
    const stored = await s.storage.load(pageId);
    expect(stored).toMatchObject({ epoch: 1, archived: false, base: null, owners: new Map() });
    expect(docOf(stored).getMap("page").get("title")).toBe("Chondrites");
    expect(await s.storage.load(randomUUID())).toBeNull();
  });

  test("S1 a batch is stored in order, with numbers that rise, and fetched by them", async () => {
    const [pageId, second] = [await s.newPage(), await s.newPage()];
    const updates = ["a", "b", "c"].map(titled);
    const appended = await s.storage.append(updates.map((update, n) => row(n === 1 ? second : pageId, { update })));
    if (appended.is !== "stored") throw new Error("refused");
    expect(appended.seqs).toHaveLength(3);
    expect([...appended.seqs].sort((a, b) => (a < b ? -1 : 1))).toStrictEqual(appended.seqs);
    const [first = 0n, , third = 0n] = appended.seqs;
    expect((await s.storage.fetch(pageId, appended.seqs)).map((u) => Buffer.from(u).toString("hex"))).toStrictEqual(
      [updates[0], updates[2]].map((u) => Buffer.from(u ?? []).toString("hex")),
    );
    expect(await s.storage.fetch(pageId, [third, first])).toHaveLength(2);
    expect((await s.storage.load(pageId))?.updates).toHaveLength(3);
  });

  test("A2 if one of a batch may not edit, nothing of it is stored, and they are named", async () => {
    const pageId = await s.newPage();
    await s.setRole(s.other, "reader");
    const line = { blockKey: "k", list: "amendments" as const, entryKey: "e", before: null, after: { by: s.other } };
    expect(await s.storage.append([row(pageId), row(pageId, { userId: s.other, clients: [77], record: [line] }), row(pageId)])).toStrictEqual({
      is: "refused",
      rows: [1],
    });
    await s.setRole(s.other, "analyst");
    const stored = await s.storage.load(pageId);
    expect(stored?.updates).toHaveLength(1);
    expect(stored?.owners.size).toBe(0);
    expect(await s.recordOf(pageId)).toStrictEqual([]);
  });

  test("D5 edits of another epoch are not stored, and edits of somebody who is in no group neither", async () => {
    const pageId = await s.newPage();
    expect(await s.storage.append([row(pageId, { epoch: 2 })])).toStrictEqual({ is: "refused", rows: [0] });
    expect(await s.storage.append([row(pageId, { userId: randomUUID() })])).toStrictEqual({ is: "refused", rows: [0] });
    expect(await s.storage.append([row(randomUUID())])).toStrictEqual({ is: "refused", rows: [0] });
  });

  test("H2 client ids belong to whoever stored them first, and another's make the batch fail", async () => {
    const pageId = await s.newPage();
    await s.storage.append([row(pageId, { clients: [5, 2 ** 52] })]);
    expect((await s.storage.load(pageId))?.owners).toStrictEqual(
      new Map([
        [5, s.editor],
        [2 ** 52, s.editor],
      ]),
    );
    const again = await s.storage.append([row(pageId, { userId: s.other, clients: [5] })]).catch(() => ({ is: "refused" }));
    expect(again.is).toBe("refused");
    expect((await s.storage.load(pageId))?.updates).toHaveLength(2);
  });

  test("D6 the record is written with the edit, and says whether an entry was ever there", async () => {
    const pageId = await s.newPage();
    const entry = { row: 1, value: "2", by: s.editor, deep: { a: [1, "ü"] } };
    await s.storage.append([row(pageId, { record: [{ blockKey: "k", list: "amendments", entryKey: "1/Mg", before: null, after: entry }] })]);
    expect(await s.recordOf(pageId)).toStrictEqual([entry]);
    expect(await s.storage.isOnRecord(pageId, "amendments", { by: s.editor, deep: { a: [1, "ü"] }, value: "2", row: 1 })).toBe(true);
    expect(await s.storage.isOnRecord(pageId, "amendments", { ...entry, value: "3" })).toBe(false);
    expect(await s.storage.isOnRecord(pageId, "setAside", entry)).toBe(false);
  });

  test("S6 folding keeps the page, takes the rows it covers, and what comes later stays in the log", async () => {
    const pageId = await s.newPage();
    for (const title of ["a", "b", "c"]) await s.storage.append([row(pageId, { update: titled(title) })]);
    const before = docOf(await s.storage.load(pageId)).toJSON();
    expect(await s.storage.compact(pageId)).toBe(4);
    expect(await s.storage.compact(pageId)).toBe(0);
    const folded = await s.storage.load(pageId);
    expect(folded?.updates).toStrictEqual([]);
    expect(docOf(folded).toJSON()).toStrictEqual(before);
    await s.storage.append([row(pageId)]);
    expect((await s.storage.load(pageId))?.updates).toHaveLength(1);
    expect(await s.storage.compact(pageId)).toBe(1);
  });
});
