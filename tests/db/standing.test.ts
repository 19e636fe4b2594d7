import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { hashToken } from "@/db/tokens";
import { addLink, exchangeLink, findLink, linksOf, withdrawLink, type LinkTarget } from "@/db/queries/links";
import { removeMember } from "@/db/queries/groups";
import { standingOnGroup, standingOnPage, standingOnSnapshot } from "@/db/queries/subjects";
import { testDatabase, type TestDatabase } from "../support/database";
import { somebody, someGroup, someSnapshot } from "./world";

let db: TestDatabase;
let world: Awaited<ReturnType<typeof someGroup>>;
let snapshotId: string;
beforeAll(async () => {
  db = await testDatabase();
  world = await someGroup(db.db);
  snapshotId = (await someSnapshot(db.db, world)).id;
});
afterAll(() => db.drop());

const person = (userId: string | null, ...readingHashes: string[]) => ({ userId, readingHashes });
const link = (target: LinkTarget, days = 1) => addLink(db.db, { groupId: world.groupId, target, days, label: "", by: world.lead });
const opened = async (id: string) => hashToken((await exchangeLink(db.db, id))?.token ?? "none");

describe("where somebody stands", () => {
  it("is their role in the group, on the group, its pages and its snapshots", async () => {
    for (const role of ["lead", "analyst", "reader"] as const) {
      const who = person(world[role]);
      expect((await standingOnGroup(db.db, who, world.groupId))?.subject.role).toBe(role);
      expect((await standingOnPage(db.db, who, world.pageId))?.subject.role).toBe(role);
      expect((await standingOnSnapshot(db.db, who, snapshotId))?.subject.role).toBe(role);
    }
  });

  it("is nobody for a stranger, for whoever is not signed in, and for somebody just removed", async () => {
    expect((await standingOnPage(db.db, person(await somebody(db.db)), world.pageId))?.subject.role).toBe("nobody");
    expect((await standingOnPage(db.db, person(null), world.pageId))?.subject.role).toBe("nobody");
    const other = await someGroup(db.db);
    await removeMember(db.db, other.groupId, other.reader);
    expect((await standingOnPage(db.db, person(other.reader), other.pageId))?.subject.role).toBe("nobody");
  });

  it("is nowhere where there is no such thing, or no such address", async () => {
    for (const id of ["00000000-0000-4000-8000-000000000000", "1", "", "'; drop table pages"]) {
      expect(await standingOnPage(db.db, person(world.lead), id)).toBeNull();
      expect(await standingOnGroup(db.db, person(world.lead), id)).toBeNull();
      expect(await standingOnSnapshot(db.db, person(world.lead), id)).toBeNull();
    }
  });
});

describe("a reading link", () => {
  it("opens its snapshot, not the page, and stores neither secret", async () => {
    const { id, token } = await link({ kind: "snapshot", snapshotId });
    const exchanged = await exchangeLink(db.db, id);
    const hash = hashToken(exchanged?.token ?? "");
    expect((await standingOnSnapshot(db.db, person(null, hash), snapshotId))?.subject).toMatchObject({ role: "guest", linkId: id });
    expect((await standingOnPage(db.db, person(null, hash), world.pageId))?.subject.role).toBe("nobody");
    const stored = await db.pool.query(
      "select (select string_agg(l::text, '') from reading_links l) || (select string_agg(s::text, '') from reading_sessions s) as everything",
    );
    expect(stored.rows[0].everything).not.toContain(token);
    expect(stored.rows[0].everything).not.toContain(exchanged?.token);
  });

  it("opens its live page and none of its snapshots", async () => {
    const hash = await opened((await link({ kind: "page", pageId: world.pageId })).id);
    expect((await standingOnPage(db.db, person(null, hash), world.pageId))?.subject.role).toBe("guest");
    expect((await standingOnSnapshot(db.db, person(null, hash), snapshotId))?.subject.role).toBe("nobody");
  });

  it("leaves a member a member", async () => {
    const hash = await opened((await link({ kind: "page", pageId: world.pageId })).id);
    expect((await standingOnPage(db.db, person(world.analyst, hash), world.pageId))?.subject.role).toBe("analyst");
  });

  it("ends when it is withdrawn, for those who are reading too", async () => {
    const { id, token } = await link({ kind: "page", pageId: world.pageId });
    const hash = await opened(id);
    expect(await withdrawLink(db.db, world.groupId, id)).toBe(true);
    expect(await withdrawLink(db.db, world.groupId, id)).toBe(false);
    expect((await standingOnPage(db.db, person(null, hash), world.pageId))?.subject.role).toBe("nobody");
    expect((await findLink(db.db, token))?.state).toBe("withdrawn");
    expect(await exchangeLink(db.db, id)).toBeNull();
  });

  it("ends when it runs out, for those who are reading too", async () => {
    const { id, token } = await link({ kind: "snapshot", snapshotId });
    const hash = await opened(id);
    await db.pool.query("update reading_links set expires_at = now() - interval '1 second' where id = $1", [id]);
    expect((await standingOnSnapshot(db.db, person(null, hash), snapshotId))?.subject.role).toBe("nobody");
    expect((await findLink(db.db, token))?.state).toBe("expired");
    expect(await exchangeLink(db.db, id)).toBeNull();
  });

  it("is no key by its own secret: only what it was exchanged for opens anything", async () => {
    const { token } = await link({ kind: "page", pageId: world.pageId });
    expect((await standingOnPage(db.db, person(null, hashToken(token)), world.pageId))?.subject.role).toBe("nobody");
  });

  it("is withdrawn by its own group alone, and listed on its page alone", async () => {
    const other = await someGroup(db.db);
    const { id } = await link({ kind: "snapshot", snapshotId });
    expect(await withdrawLink(db.db, other.groupId, id)).toBe(false);
    expect((await linksOf(db.db, world.pageId)).map((l) => l.id)).toContain(id);
    expect(await linksOf(db.db, other.pageId)).toEqual([]);
  });
});
