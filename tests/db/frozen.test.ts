import pg from "pg";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { testDatabase, type TestDatabase } from "../support/database";
import { sha, someGroup, someSnapshot } from "./world";

let db: TestDatabase;
let owner: pg.Client;
let page: Awaited<ReturnType<typeof someGroup>>;
let snapshotId: string;

beforeAll(async () => {
  db = await testDatabase();
  owner = new pg.Client({ connectionString: db.ownerUrl });
  await owner.connect();
  page = await someGroup(db.db);
  snapshotId = (await someSnapshot(db.db, page)).id;
  await db.pool.query(
    "insert into amendment_log (page_id, block_key, list, entry_key, reason, user_id) values ($1, 'b', 'amendments', 'e', 'digits swapped', $2)",
    [page.pageId, page.lead],
  );
});
afterAll(async () => {
  await owner.end();
  await db.drop();
});

const changes = {
  snapshots: ["update snapshots set title = 'another'", "delete from snapshots", "truncate snapshots cascade"],
  snapshot_files: ["update snapshot_files set path = 'another'", "delete from snapshot_files", "truncate snapshot_files"],
  contents: ["update contents set bytes = '\\x00'", "delete from contents", "truncate contents cascade"],
  amendment_log: ["update amendment_log set reason = 'another'", "delete from amendment_log", "truncate amendment_log"],
} as const;

describe("what is frozen", () => {
  for (const [table, statements] of Object.entries(changes)) {
    for (const statement of statements) {
      it(`refuses the application: ${statement}`, async () => {
        await expect(db.pool.query(statement)).rejects.toThrow(/permission denied/);
        expect((await owner.query(`select 1 from ${table}`)).rowCount).toBeGreaterThan(0);
      });
      it(`refuses even the owner, in a sentence: ${statement}`, async () => {
        await expect(owner.query(statement)).rejects.toThrow(/is refused: .* (never changed or deleted|only ever added to)/);
        expect((await owner.query(`select 1 from ${table}`)).rowCount).toBeGreaterThan(0);
      });
    }
  }

  it("takes no more files once it is frozen", async () => {
    await db.pool.query("insert into contents (sha256, size, bytes) values ($1, 4, 'late')", [sha("late")]);
    await expect(db.pool.query("insert into snapshot_files values ($1, 'late.txt', $2, 4)", [snapshotId, sha("late")])).rejects.toThrow(/no more files/);
  });

  it("keeps bytes only under their own hash and size", async () => {
    await expect(db.pool.query("insert into contents (sha256, size, bytes) values ($1, 5, 'other')", [sha("something")])).rejects.toThrow(/contents_addressed/);
    await expect(db.pool.query("insert into contents (sha256, size, bytes) values ($1, 9, 'other')", [sha("other")])).rejects.toThrow(/contents_size/);
  });

  it("does not let the page of a snapshot, or its group, be deleted", async () => {
    await expect(owner.query("delete from pages where id = $1", [page.pageId])).rejects.toThrow();
    await expect(owner.query("delete from groups where id = $1", [page.groupId])).rejects.toThrow();
  });
});

describe("a reading link", () => {
  const link = (snapshot: string | null, live: string | null) =>
    db.pool.query("insert into reading_links (group_id, token_hash, snapshot_id, page_id, expires_at) values ($1, $2, $3, $4, now())", [
      page.groupId,
      sha(String(Math.random())),
      snapshot,
      live,
    ]);
  it("has exactly one target", async () => {
    await expect(link(null, null)).rejects.toThrow(/one_target/);
    await expect(link(snapshotId, page.pageId)).rejects.toThrow(/one_target/);
    await expect(link(snapshotId, null)).resolves.toBeTruthy();
  });
});

describe("the application's role", () => {
  it("can make and drop no table", async () => {
    await expect(db.pool.query("create table mine (a int)")).rejects.toThrow(/permission denied/);
    await expect(db.pool.query("drop table snapshots")).rejects.toThrow(/must be owner/);
    await expect(db.pool.query("alter table snapshots disable trigger all")).rejects.toThrow(/must be owner/);
  });
});
