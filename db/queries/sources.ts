import { and, desc, eq, sum } from "drizzle-orm";
import type { Database } from "../client";
import { contents, groups, sources } from "../schema";

export interface SourceOfGroup {
  readonly sha256: string;
  readonly name: string;
  readonly size: number;
  readonly rows: number | null;
  readonly uploadedAt: Date;
}

/** Sources of a group, newest first. */
export async function sourcesOf(db: Database, groupId: string): Promise<SourceOfGroup[]> {
  return db
    .select({ sha256: sources.sha256, name: sources.name, size: sources.size, rows: sources.rows, uploadedAt: sources.uploadedAt })
    .from(sources)
    .where(eq(sources.groupId, groupId))
    .orderBy(desc(sources.uploadedAt));
}

export interface SourceBytes {
  readonly name: string;
  readonly mediaType: string;
  readonly bytes: Uint8Array;
}

/** A source of a group with its bytes; null where the group has none of that hash. */
export async function sourceBytes(db: Database, groupId: string, sha256: string): Promise<SourceBytes | null> {
  const [row] = await db
    .select({ name: sources.name, mediaType: sources.mediaType, bytes: contents.bytes })
    .from(sources)
    .innerJoin(contents, eq(contents.sha256, sources.sha256))
    .where(and(eq(sources.groupId, groupId), eq(sources.sha256, sha256)));
  return row ?? null;
}

/** How many bytes the sources of a group take. */
export async function bytesOfGroup(db: Database, groupId: string): Promise<number> {
  const [row] = await db
    .select({ total: sum(sources.size) })
    .from(sources)
    .where(eq(sources.groupId, groupId));
  return Number(row?.total ?? 0);
}

export interface NewSource {
  readonly groupId: string;
  readonly sha256: string;
  readonly name: string;
  readonly mediaType: string;
  readonly bytes: Uint8Array;
  readonly rows: number | null;
  readonly by: string | null;
}

/**
 * Keeps a source. The same bytes again are the same source, under the name they first came with.
 *
 * @param quota bytes a group may hold
 * @returns the bytes the group would hold, when that is over the quota and nothing was kept; null otherwise
 */
export async function addSource(db: Database, source: NewSource, quota: number): Promise<number | null> {
  return db.transaction(async (tx) => {
    // Two uploads at once must not both squeeze under the quota: the group's row is the lock.
    await tx.select({ id: groups.id }).from(groups).where(eq(groups.id, source.groupId)).for("update");
    const [there] = await tx
      .select({ size: sources.size })
      .from(sources)
      .where(and(eq(sources.groupId, source.groupId), eq(sources.sha256, source.sha256)));
    if (there) return null;
    const [held] = await tx
      .select({ total: sum(sources.size) })
      .from(sources)
      .where(eq(sources.groupId, source.groupId));
    const total = Number(held?.total ?? 0) + source.bytes.length;
    if (total > quota) return total;
    await tx.insert(contents).values({ sha256: source.sha256, size: source.bytes.length, bytes: source.bytes }).onConflictDoNothing();
    await tx.insert(sources).values({
      groupId: source.groupId,
      sha256: source.sha256,
      name: source.name,
      mediaType: source.mediaType,
      size: source.bytes.length,
      rows: source.rows,
      uploadedBy: source.by,
    });
    return null;
  });
}
