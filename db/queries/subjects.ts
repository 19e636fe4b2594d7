import { and, eq, gt, inArray, isNull } from "drizzle-orm";
import type { GroupRole, ObjectKind, ObjectOf, Subject } from "../access";
import type { Database } from "../client";
import { groups, memberships, pages, readingLinks, readingSessions, snapshots } from "../schema";

/** Who asks: a person signed in, a browser that opened reading links, both, or neither. */
export interface Who {
  readonly userId: string | null;
  readonly readingHashes: readonly string[];
}

/** Somebody's standing towards something that exists. */
export interface Standing<K extends ObjectKind> {
  readonly subject: Subject;
  readonly object: ObjectOf<K>;
}

const uuid = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i;

/** Whether a text from an address can be an id at all; PostgreSQL refuses others with an error instead of an empty answer. */
export function isId(text: string): boolean {
  return uuid.test(text);
}

/** Where somebody stands towards a group; null when there is no such group. */
export async function standingOnGroup(db: Database, who: Who, groupId: string): Promise<Standing<"group"> | null> {
  if (!isId(groupId)) return null;
  const [group] = await db.select({ id: groups.id }).from(groups).where(eq(groups.id, groupId));
  if (!group) return null;
  return { subject: await member(db, who, group.id), object: { kind: "group", id: group.id } };
}

/** Where somebody stands towards a page: as a member of its group, else as a guest by a link to this page. */
export async function standingOnPage(db: Database, who: Who, pageId: string): Promise<Standing<"page"> | null> {
  if (!isId(pageId)) return null;
  const [page] = await db.select({ id: pages.id, groupId: pages.groupId, archivedAt: pages.archivedAt }).from(pages).where(eq(pages.id, pageId));
  if (!page) return null;
  const object = { kind: "page", id: page.id, groupId: page.groupId, archived: page.archivedAt !== null } as const;
  const subject = await member(db, who, page.groupId);
  return { subject: subject.role === "nobody" ? await guest(db, who, "page", page.id) : subject, object };
}

/** Where somebody stands towards a snapshot: as a member of its group, else as a guest by a link to this snapshot. */
export async function standingOnSnapshot(db: Database, who: Who, snapshotId: string): Promise<Standing<"snapshot"> | null> {
  if (!isId(snapshotId)) return null;
  const [row] = await db.select({ id: snapshots.id, pageId: snapshots.pageId, groupId: snapshots.groupId }).from(snapshots).where(eq(snapshots.id, snapshotId));
  if (!row) return null;
  const subject = await member(db, who, row.groupId);
  return { subject: subject.role === "nobody" ? await guest(db, who, "snapshot", row.id) : subject, object: { kind: "snapshot", ...row } };
}

async function member(db: Database, who: Who, groupId: string): Promise<Subject> {
  if (who.userId === null) return { role: "nobody" };
  const [row] = await db
    .select({ role: memberships.role })
    .from(memberships)
    .where(and(eq(memberships.groupId, groupId), eq(memberships.userId, who.userId)));
  return row ? { role: row.role satisfies GroupRole, userId: who.userId, groupId } : { role: "nobody" };
}

/** A guest's standing lasts until the link or the browser's own right runs out, whichever is first. */
async function guest(db: Database, who: Who, kind: "page" | "snapshot", id: string): Promise<Subject> {
  if (who.readingHashes.length === 0) return { role: "nobody" };
  const now = new Date();
  const [row] = await db
    .select({ linkId: readingLinks.id, link: readingLinks.expiresAt, session: readingSessions.expires })
    .from(readingSessions)
    .innerJoin(readingLinks, eq(readingLinks.id, readingSessions.linkId))
    .where(
      and(
        inArray(readingSessions.tokenHash, [...who.readingHashes]),
        gt(readingSessions.expires, now),
        gt(readingLinks.expiresAt, now),
        isNull(readingLinks.withdrawnAt),
        eq(kind === "page" ? readingLinks.pageId : readingLinks.snapshotId, id),
      ),
    );
  if (!row) return { role: "nobody" };
  return { role: "guest", linkId: row.linkId, opens: { kind, id }, until: row.link < row.session ? row.link : row.session };
}
