import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { filesOf, fileOf, findSnapshot, lastSnapshotOf, snapshotsOf } from "@/db/queries/snapshots";
import { testDatabase, type TestDatabase } from "../support/database";
import { sha, someGroup, someSnapshot } from "./world";

let db: TestDatabase;
beforeAll(async () => void (db = await testDatabase()));
afterAll(() => db.drop());

describe("snapshots of a page", () => {
  it("count up from 1 on each page and chain by hash", async () => {
    const [one, other] = [await someGroup(db.db), await someGroup(db.db)];
    const first = await someSnapshot(db.db, one);
    const second = await someSnapshot(db.db, one);
    expect([first.number, second.number, (await someSnapshot(db.db, other)).number]).toEqual([1, 2, 1]);
    expect(first.previousHash).toBeNull();
    expect(second.previousHash).toBe((await findSnapshot(db.db, first.id))?.hash);
    expect((await lastSnapshotOf(db.db, one.pageId))?.id).toBe(second.id);
    expect((await lastSnapshotOf(db.db, one.pageId, 2))?.id).toBe(first.id);
    expect((await snapshotsOf(db.db, one.groupId)).map((s) => s.number)).toEqual([2, 1]);
  });

  it("get different numbers when several people freeze at once", async () => {
    const page = await someGroup(db.db);
    const made = await Promise.all(Array.from({ length: 6 }, () => someSnapshot(db.db, page)));
    expect(made.map((s) => s.number).sort()).toEqual([1, 2, 3, 4, 5, 6]);
  });

  it("leave nothing behind when one file is wrong", async () => {
    const page = await someGroup(db.db);
    const bad = { path: "b", sha256: sha("not these bytes"), bytes: new Uint8Array([1]) };
    await expect(someSnapshot(db.db, page, { files: [{ path: "a", sha256: sha("a"), bytes: new TextEncoder().encode("a") }, bad] })).rejects.toThrow();
    expect(await snapshotsOf(db.db, page.groupId)).toEqual([]);
    expect((await db.pool.query("select 1 from contents where sha256 = $1", [sha("a")])).rowCount).toBe(0);
  });

  it("give back their files, in path order, byte for byte", async () => {
    const page = await someGroup(db.db);
    const { id } = await someSnapshot(db.db, page);
    expect((await filesOf(db.db, id)).map((f) => f.path)).toEqual(["manifest.json", "page.json"]);
    expect(new TextDecoder().decode((await fileOf(db.db, id, "page.json"))?.bytes)).toBe("[]");
    expect(await fileOf(db.db, id, "../page.json")).toBeNull();
  });
});
