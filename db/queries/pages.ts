import { and, asc, desc, eq, gt, isNotNull, isNull, max, sql } from "drizzle-orm";
import type { Database } from "../client";
import { pageClients, pages, pageStates, pageUpdates, snapshots, users, type OutlineBlock } from "../schema";

export interface PageOfGroup {
  readonly id: string;
  readonly title: string;
  readonly outline: readonly OutlineBlock[];
  readonly changedAt: Date;
  readonly changedBy: string | null;
  readonly archivedAt: Date | null;
  /** Number of the last snapshot; null where the page was never frozen. */
  readonly frozenAs: number | null;
}

/** Pages of a group, in the order they were made; archived ones apart. */
export async function pagesOf(db: Database, groupId: string, archived = false): Promise<PageOfGroup[]> {
  const frozen = db
    .select({ pageId: snapshots.pageId, number: max(snapshots.number).as("number") })
    .from(snapshots)
    .groupBy(snapshots.pageId)
    .as("frozen");
  return db
    .select({
      id: pages.id,
      title: pages.title,
      outline: pages.outline,
      changedAt: pages.changedAt,
      changedBy: users.name,
      archivedAt: pages.archivedAt,
      frozenAs: frozen.number,
    })
    .from(pages)
    .leftJoin(users, eq(users.id, pages.changedBy))
    .leftJoin(frozen, eq(frozen.pageId, pages.id))
    .where(and(eq(pages.groupId, groupId), archived ? isNotNull(pages.archivedAt) : isNull(pages.archivedAt)))
    .orderBy(archived ? desc(pages.archivedAt) : asc(pages.createdAt));
}

export async function findPage(db: Database, id: string): Promise<typeof pages.$inferSelect | null> {
  const [page] = await db.select().from(pages).where(eq(pages.id, id));
  return page ?? null;
}

/** Adds a page whose document is `update`, the first row of its log. */
export async function addPage(
  db: Database,
  page: { id?: string; groupId: string; title: string; outline: OutlineBlock[]; by: string; update: Uint8Array },
): Promise<string> {
  return db.transaction(async (tx) => {
    const [row] = await tx
      .insert(pages)
      .values({ ...(page.id ? { id: page.id } : {}), groupId: page.groupId, title: page.title, outline: page.outline, createdBy: page.by, changedBy: page.by })
      .returning({ id: pages.id, epoch: pages.epoch });
    if (!row) throw new Error("the page was not made");
    await tx.insert(pageUpdates).values({ pageId: row.id, epoch: row.epoch, userId: page.by, update: page.update });
    return row.id;
  });
}

/**
 * Adds an edit made on the server to a page's log, under a Yjs client id that is this person's from now on.
 *
 * @returns its sequence number, which the realtime server is told; null where the page is archived or of another epoch by now
 */
export async function addEdit(
  db: Database,
  edit: {
    readonly pageId: string;
    readonly epoch: number;
    readonly by: string;
    readonly title: string;
    readonly clientId: number;
    readonly update: Uint8Array;
  },
): Promise<bigint | null> {
  return db.transaction(async (tx) => {
    const [page] = await tx
      .update(pages)
      .set({ title: edit.title, changedBy: edit.by, changedAt: new Date() })
      .where(and(eq(pages.id, edit.pageId), eq(pages.epoch, edit.epoch), isNull(pages.archivedAt)))
      .returning({ id: pages.id });
    if (!page) return null;
    await tx.insert(pageClients).values({ pageId: edit.pageId, clientId: BigInt(edit.clientId), userId: edit.by });
    const [row] = await tx
      .insert(pageUpdates)
      .values({ pageId: edit.pageId, epoch: edit.epoch, userId: edit.by, update: edit.update })
      .returning({ seq: pageUpdates.seq });
    return row?.seq ?? null;
  });
}

/** Puts a page into the archive or takes it out. */
export async function setArchived(db: Database, id: string, archived: boolean): Promise<void> {
  await db
    .update(pages)
    .set({ archivedAt: archived ? new Date() : null })
    .where(eq(pages.id, id));
}

/** What the database holds of a page's document: the compacted base and the log rows since, as Yjs updates. */
export interface CommittedPage {
  readonly title: string;
  readonly groupId: string;
  readonly epoch: number;
  readonly updates: readonly Uint8Array[];
}

/** Reads a page's committed document in one REPEATABLE READ transaction, so that base and log belong together. */
export async function committedPage(db: Database, id: string): Promise<CommittedPage | null> {
  return db.transaction(
    async (tx) => {
      const [page] = await tx.select({ title: pages.title, groupId: pages.groupId, epoch: pages.epoch }).from(pages).where(eq(pages.id, id));
      if (!page) return null;
      const [state] = await tx.select({ state: pageStates.state }).from(pageStates).where(eq(pageStates.pageId, id));
      const log = await tx.select({ update: pageUpdates.update }).from(pageUpdates).where(eq(pageUpdates.pageId, id)).orderBy(asc(pageUpdates.seq));
      return { ...page, updates: [...(state ? [state.state] : []), ...log.map((row) => row.update)] };
    },
    { isolationLevel: "repeatable read", accessMode: "read only" },
  );
}

/** People who have edited a page since a moment, for saying what changed. */
export async function editorsSince(db: Database, pageId: string, since: Date): Promise<string[]> {
  const rows = await db
    .selectDistinct({ userId: pageUpdates.userId })
    .from(pageUpdates)
    .where(and(eq(pageUpdates.pageId, pageId), gt(pageUpdates.at, since), sql`${pageUpdates.userId} is not null`));
  return rows.flatMap((row) => row.userId ?? []);
}
