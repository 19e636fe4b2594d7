import { and, asc, count, eq, sql } from "drizzle-orm";
import type { GroupRole } from "../access";
import type { Database } from "../client";
import { groups, memberships, users } from "../schema";

export interface GroupOfMine {
  readonly id: string;
  readonly name: string;
  readonly role: GroupRole;
  readonly demo: boolean;
}

/** Groups a person is in, the one they were last in first. */
export async function groupsOf(db: Database, userId: string): Promise<GroupOfMine[]> {
  return db
    .select({ id: groups.id, name: groups.name, role: memberships.role, demo: groups.demo })
    .from(memberships)
    .innerJoin(groups, eq(groups.id, memberships.groupId))
    .where(eq(memberships.userId, userId))
    .orderBy(sql`${memberships.lastSeenAt} desc nulls last`, asc(memberships.joinedAt));
}

export async function findGroup(db: Database, id: string): Promise<typeof groups.$inferSelect | null> {
  const [group] = await db.select().from(groups).where(eq(groups.id, id));
  return group ?? null;
}

/** Makes a group with one person as its lead. */
export async function addGroup(db: Database, name: string, leadId: string, demo = false): Promise<string> {
  return db.transaction(async (tx) => {
    const [group] = await tx.insert(groups).values({ name, demo }).returning({ id: groups.id });
    if (!group) throw new Error("the group was not made");
    await tx.insert(memberships).values({ groupId: group.id, userId: leadId, role: "lead" });
    return group.id;
  });
}

export async function renameGroup(db: Database, id: string, name: string): Promise<void> {
  await db.update(groups).set({ name }).where(eq(groups.id, id));
}

export interface Member {
  readonly userId: string;
  readonly name: string;
  readonly email: string | null;
  readonly role: GroupRole;
  readonly joinedAt: Date;
  readonly lastSeenAt: Date | null;
}

/** People of a group: leads first, then analysts, then readers, each in the order they joined. */
export async function membersOf(db: Database, groupId: string): Promise<Member[]> {
  const rows = await db
    .select({
      userId: users.id,
      name: users.name,
      email: users.email,
      role: memberships.role,
      joinedAt: memberships.joinedAt,
      lastSeenAt: memberships.lastSeenAt,
    })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.groupId, groupId))
    .orderBy(asc(memberships.role), asc(memberships.joinedAt));
  return rows.map((row) => ({ ...row, name: row.name ?? "unnamed" }));
}

/** Notes that somebody is here now; at most once a minute is written. */
export async function noteSeen(db: Database, groupId: string, userId: string): Promise<void> {
  await db
    .update(memberships)
    .set({ lastSeenAt: new Date() })
    .where(
      and(eq(memberships.groupId, groupId), eq(memberships.userId, userId), sql`coalesce(${memberships.lastSeenAt}, 'epoch') < now() - interval '1 minute'`),
    );
}

export type MemberChange = "changed" | "last lead" | "not in the group";

/** Gives somebody another role. A group always keeps one lead. */
export async function changeRole(db: Database, groupId: string, userId: string, role: GroupRole): Promise<MemberChange> {
  return changeMember(db, groupId, userId, role !== "lead", (tx, row) => tx.update(memberships).set({ role }).where(row));
}

/** Takes somebody out of a group. A group always keeps one lead. */
export async function removeMember(db: Database, groupId: string, userId: string): Promise<MemberChange> {
  return changeMember(db, groupId, userId, true, (tx, row) => tx.delete(memberships).where(row));
}

type Transaction = Parameters<Parameters<Database["transaction"]>[0]>[0];

async function changeMember(
  db: Database,
  groupId: string,
  userId: string,
  losesLead: boolean,
  change: (tx: Transaction, row: ReturnType<typeof and>) => PromiseLike<unknown>,
): Promise<MemberChange> {
  return db.transaction(async (tx) => {
    // Two leads who demote each other at once must not both succeed: the group's row is the lock.
    await tx.select({ id: groups.id }).from(groups).where(eq(groups.id, groupId)).for("update");
    const row = and(eq(memberships.groupId, groupId), eq(memberships.userId, userId));
    const [present] = await tx.select({ role: memberships.role }).from(memberships).where(row);
    if (!present) return "not in the group";
    if (losesLead && present.role === "lead") {
      const [leads] = await tx
        .select({ n: count() })
        .from(memberships)
        .where(and(eq(memberships.groupId, groupId), eq(memberships.role, "lead")));
      if ((leads?.n ?? 0) < 2) return "last lead";
    }
    await change(tx, row);
    return "changed";
  });
}
