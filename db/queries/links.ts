import { and, desc, eq, gt, isNull } from "drizzle-orm";
import type { Database } from "../client";
import { groups, pages, readingLinks, readingSessions, snapshots } from "../schema";
import { hashToken, newToken } from "../tokens";

export type LinkTarget = { readonly kind: "page"; readonly pageId: string } | { readonly kind: "snapshot"; readonly snapshotId: string };

export interface NewLink {
  readonly groupId: string;
  readonly target: LinkTarget;
  readonly days: number;
  readonly label: string;
  readonly by: string;
}

/** Makes a reading link. Its secret is given once and stored nowhere. */
export async function addLink(db: Database, link: NewLink): Promise<{ id: string; token: string; expiresAt: Date }> {
  const token = newToken();
  const expiresAt = new Date(Date.now() + link.days * 86_400_000);
  const [row] = await db
    .insert(readingLinks)
    .values({
      groupId: link.groupId,
      tokenHash: hashToken(token),
      ...(link.target.kind === "page" ? { pageId: link.target.pageId } : { snapshotId: link.target.snapshotId }),
      label: link.label,
      createdBy: link.by,
      expiresAt,
    })
    .returning({ id: readingLinks.id });
  if (!row) throw new Error("the link was not made");
  return { id: row.id, token, expiresAt };
}

export type LinkState = "open" | "expired" | "withdrawn";

export interface LinkOfPage {
  readonly id: string;
  readonly kind: "page" | "snapshot";
  readonly snapshotId: string | null;
  /** Number of the snapshot it opens. */
  readonly number: number | null;
  readonly label: string;
  readonly state: LinkState;
  readonly createdAt: Date;
  readonly expiresAt: Date;
  readonly lastUsedAt: Date | null;
}

/** Links to a page or to any snapshot of it, newest first. */
export async function linksOf(db: Database, pageId: string): Promise<LinkOfPage[]> {
  const rows = await db
    .select({ link: readingLinks, number: snapshots.number, snapshotOf: snapshots.pageId })
    .from(readingLinks)
    .leftJoin(snapshots, eq(snapshots.id, readingLinks.snapshotId))
    .innerJoin(pages, eq(pages.groupId, readingLinks.groupId))
    .where(eq(pages.id, pageId))
    .orderBy(desc(readingLinks.createdAt));
  return rows
    .filter((row) => row.link.pageId === pageId || row.snapshotOf === pageId)
    .map(({ link, number }) => ({
      id: link.id,
      kind: link.pageId ? "page" : "snapshot",
      snapshotId: link.snapshotId,
      number,
      label: link.label,
      state: linkState(link),
      createdAt: link.createdAt,
      expiresAt: link.expiresAt,
      lastUsedAt: link.lastUsedAt,
    }));
}

function linkState(link: { withdrawnAt: Date | null; expiresAt: Date }): LinkState {
  return link.withdrawnAt ? "withdrawn" : link.expiresAt <= new Date() ? "expired" : "open";
}

/** Withdraws a link of a group; false when it was not open. Whoever came by it is shut out with it. */
export async function withdrawLink(db: Database, groupId: string, id: string): Promise<boolean> {
  return db.transaction(async (tx) => {
    const rows = await tx
      .update(readingLinks)
      .set({ withdrawnAt: new Date() })
      .where(and(eq(readingLinks.id, id), eq(readingLinks.groupId, groupId), isNull(readingLinks.withdrawnAt)))
      .returning({ id: readingLinks.id });
    if (rows.length > 0) await tx.delete(readingSessions).where(eq(readingSessions.linkId, id));
    return rows.length > 0;
  });
}

export interface FoundLink {
  readonly id: string;
  readonly groupId: string;
  readonly group: string;
  readonly pageId: string | null;
  readonly snapshotId: string | null;
  readonly title: string;
  readonly number: number | null;
  readonly state: LinkState;
  readonly expiresAt: Date;
}

/** The link behind a secret, whatever became of it; null for a secret nobody made. */
export async function findLink(db: Database, token: string): Promise<FoundLink | null> {
  const [row] = await db
    .select({ link: readingLinks, group: groups.name, page: pages.title, snapshot: snapshots.title, number: snapshots.number })
    .from(readingLinks)
    .innerJoin(groups, eq(groups.id, readingLinks.groupId))
    .leftJoin(pages, eq(pages.id, readingLinks.pageId))
    .leftJoin(snapshots, eq(snapshots.id, readingLinks.snapshotId))
    .where(eq(readingLinks.tokenHash, hashToken(token)));
  if (!row) return null;
  const { id, groupId, pageId, snapshotId, expiresAt } = row.link;
  return {
    id,
    groupId,
    group: row.group,
    pageId,
    snapshotId,
    title: row.snapshot ?? row.page ?? "",
    number: row.number,
    state: linkState(row.link),
    expiresAt,
  };
}

/** Gives a browser its own secret in exchange for an open link's; null when the link is not open any more. */
export async function exchangeLink(db: Database, linkId: string): Promise<{ token: string; expires: Date } | null> {
  return db.transaction(async (tx) => {
    const now = new Date();
    const [link] = await tx
      .update(readingLinks)
      .set({ lastUsedAt: now })
      .where(and(eq(readingLinks.id, linkId), isNull(readingLinks.withdrawnAt), gt(readingLinks.expiresAt, now)))
      .returning({ expiresAt: readingLinks.expiresAt });
    if (!link) return null;
    const token = newToken();
    await tx.insert(readingSessions).values({ tokenHash: hashToken(token), linkId, expires: link.expiresAt });
    return { token, expires: link.expiresAt };
  });
}
