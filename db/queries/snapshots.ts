import { and, asc, desc, eq, inArray, lt, sql } from "drizzle-orm";
import type { Database } from "../client";
import { contents, pages, snapshotFiles, snapshots } from "../schema";

export type Snapshot = typeof snapshots.$inferSelect;

export interface FrozenFile {
  readonly path: string;
  readonly sha256: string;
  readonly bytes: Uint8Array;
}

export interface NewSnapshot {
  readonly pageId: string;
  readonly groupId: string;
  readonly title: string;
  readonly hash: string;
  readonly format: string;
  readonly engine: string;
  readonly frozenBy: string;
  readonly note: string | null;
  readonly about: Record<string, unknown>;
  readonly files: readonly FrozenFile[];
}

/**
 * Adds a snapshot with all its files, or nothing. It gets the page's next number and the hash of the one before.
 *
 * The page's row is locked for the number, so that two people who freeze at once get two numbers.
 */
export async function addSnapshot(db: Database, snapshot: NewSnapshot): Promise<{ id: string; number: number; previousHash: string | null }> {
  const { files, ...row } = snapshot;
  return db.transaction(async (tx) => {
    await tx.select({ id: pages.id }).from(pages).where(eq(pages.id, snapshot.pageId)).for("update");
    const [last] = await tx
      .select({ number: snapshots.number, hash: snapshots.hash })
      .from(snapshots)
      .where(eq(snapshots.pageId, snapshot.pageId))
      .orderBy(desc(snapshots.number))
      .limit(1);
    const number = (last?.number ?? 0) + 1;
    const previousHash = last?.hash ?? null;
    const [added] = await tx
      .insert(snapshots)
      .values({ ...row, number, previousHash })
      .returning({ id: snapshots.id });
    if (!added) throw new Error("the snapshot was not made");
    const present = new Set(
      (
        await tx
          .select({ sha256: contents.sha256 })
          .from(contents)
          .where(
            inArray(
              contents.sha256,
              files.map((f) => f.sha256),
            ),
          )
      ).map((c) => c.sha256),
    );
    for (const file of files) {
      if (present.has(file.sha256)) continue;
      present.add(file.sha256);
      await tx.insert(contents).values({ sha256: file.sha256, size: file.bytes.length, bytes: file.bytes }).onConflictDoNothing();
    }
    await tx.insert(snapshotFiles).values(files.map((file) => ({ snapshotId: added.id, path: file.path, sha256: file.sha256, size: file.bytes.length })));
    return { id: added.id, number, previousHash };
  });
}

export async function findSnapshot(db: Database, id: string): Promise<Snapshot | null> {
  const [row] = await db.select().from(snapshots).where(eq(snapshots.id, id));
  return row ?? null;
}

/** Snapshots of a group, newest first, with how many reading links of each are open. */
export async function snapshotsOf(db: Database, groupId: string) {
  return db
    .select({
      id: snapshots.id,
      pageId: snapshots.pageId,
      number: snapshots.number,
      title: snapshots.title,
      hash: snapshots.hash,
      frozenAt: snapshots.frozenAt,
      note: snapshots.note,
      openLinks: sql<number>`(select count(*)::int from reading_links l where l.snapshot_id = "snapshots"."id" and l.withdrawn_at is null and l.expires_at > now())`,
      lastLinkEnds: sql<
        string | null
      >`(select max(l.expires_at)::text from reading_links l where l.snapshot_id = "snapshots"."id" and l.withdrawn_at is null and l.expires_at > now())`,
      endedLinks: sql<number>`(select count(*)::int from reading_links l where l.snapshot_id = "snapshots"."id" and (l.withdrawn_at is not null or l.expires_at <= now()))`,
    })
    .from(snapshots)
    .where(eq(snapshots.groupId, groupId))
    .orderBy(desc(snapshots.frozenAt));
}

/** Paths, hashes and sizes of a snapshot's files, in path order. */
export async function filesOf(db: Database, snapshotId: string): Promise<{ path: string; sha256: string; size: number }[]> {
  return db
    .select({ path: snapshotFiles.path, sha256: snapshotFiles.sha256, size: snapshotFiles.size })
    .from(snapshotFiles)
    .where(eq(snapshotFiles.snapshotId, snapshotId))
    .orderBy(asc(sql`${snapshotFiles.path} collate "C"`));
}

/** Bytes of one file of a snapshot; null where it has none of that path. */
export async function fileOf(db: Database, snapshotId: string, path: string): Promise<FrozenFile | null> {
  const [row] = await db
    .select({ path: snapshotFiles.path, sha256: snapshotFiles.sha256, bytes: contents.bytes })
    .from(snapshotFiles)
    .innerJoin(contents, eq(contents.sha256, snapshotFiles.sha256))
    .where(and(eq(snapshotFiles.snapshotId, snapshotId), eq(snapshotFiles.path, path)));
  return row ?? null;
}

/** The last snapshot of a page before `number`, or its last of all; null where there is none. */
export async function lastSnapshotOf(db: Database, pageId: string, before?: number): Promise<Snapshot | null> {
  const [row] = await db
    .select()
    .from(snapshots)
    .where(before === undefined ? eq(snapshots.pageId, pageId) : and(eq(snapshots.pageId, pageId), lt(snapshots.number, before)))
    .orderBy(desc(snapshots.number))
    .limit(1);
  return row ?? null;
}
