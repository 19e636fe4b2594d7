import { and, desc, eq, gt, isNull } from "drizzle-orm";
import type { GroupRole } from "../access";
import type { Database } from "../client";
import { groups, invitations, memberships, users } from "../schema";
import { hashToken, newToken } from "../tokens";

export const INVITATION_DAYS = 14;

export interface OpenInvitation {
  readonly id: string;
  readonly email: string;
  readonly role: GroupRole;
  readonly createdAt: Date;
  readonly expiresAt: Date;
}

/** Invitations of a group that can still be accepted, newest first. */
export async function openInvitations(db: Database, groupId: string): Promise<OpenInvitation[]> {
  return db
    .select({ id: invitations.id, email: invitations.email, role: invitations.role, createdAt: invitations.createdAt, expiresAt: invitations.expiresAt })
    .from(invitations)
    .where(and(eq(invitations.groupId, groupId), isNull(invitations.acceptedAt), isNull(invitations.withdrawnAt), gt(invitations.expiresAt, new Date())))
    .orderBy(desc(invitations.createdAt));
}

/** Invites an address; an earlier open invitation of the same address is replaced. Gives the secret for the mail. */
export async function addInvitation(
  db: Database,
  invitation: { groupId: string; email: string; role: GroupRole; invitedBy: string },
): Promise<{ id: string; token: string }> {
  const token = newToken();
  const email = invitation.email.toLowerCase();
  return db.transaction(async (tx) => {
    await tx
      .update(invitations)
      .set({ withdrawnAt: new Date() })
      .where(and(eq(invitations.groupId, invitation.groupId), eq(invitations.email, email), isNull(invitations.acceptedAt), isNull(invitations.withdrawnAt)));
    const expiresAt = new Date(Date.now() + INVITATION_DAYS * 86_400_000);
    const [row] = await tx
      .insert(invitations)
      .values({ ...invitation, email, tokenHash: hashToken(token), expiresAt })
      .returning({ id: invitations.id });
    if (!row) throw new Error("the invitation was not made");
    return { id: row.id, token };
  });
}

/** Withdraws an open invitation; false when there was none. */
export async function withdrawInvitation(db: Database, groupId: string, id: string): Promise<boolean> {
  const rows = await db
    .update(invitations)
    .set({ withdrawnAt: new Date() })
    .where(and(eq(invitations.id, id), eq(invitations.groupId, groupId), isNull(invitations.acceptedAt), isNull(invitations.withdrawnAt)))
    .returning({ id: invitations.id });
  return rows.length > 0;
}

export type InvitationState = "open" | "accepted" | "withdrawn" | "expired";

export interface FoundInvitation {
  readonly id: string;
  readonly groupId: string;
  readonly group: string;
  readonly email: string;
  readonly role: GroupRole;
  readonly invitedBy: string | null;
  readonly state: InvitationState;
}

/** The invitation behind a mailed secret, whatever became of it; null for a secret nobody sent. */
export async function findInvitation(db: Database, token: string): Promise<FoundInvitation | null> {
  const [row] = await db
    .select({ invitation: invitations, group: groups.name, by: users.name })
    .from(invitations)
    .innerJoin(groups, eq(groups.id, invitations.groupId))
    .leftJoin(users, eq(users.id, invitations.invitedBy))
    .where(eq(invitations.tokenHash, hashToken(token)));
  if (!row) return null;
  const { id, groupId, email, role, acceptedAt, withdrawnAt, expiresAt } = row.invitation;
  const state = acceptedAt ? "accepted" : withdrawnAt ? "withdrawn" : expiresAt < new Date() ? "expired" : "open";
  return { id, groupId, group: row.group, email, role, invitedBy: row.by, state };
}

/**
 * Makes the person a member, once. Somebody already in the group keeps the role they have.
 *
 * @returns false when the invitation was used, withdrawn or ran out in the meantime
 */
export async function acceptInvitation(db: Database, id: string, userId: string): Promise<boolean> {
  return db.transaction(async (tx) => {
    const [row] = await tx
      .update(invitations)
      .set({ acceptedAt: new Date() })
      .where(and(eq(invitations.id, id), isNull(invitations.acceptedAt), isNull(invitations.withdrawnAt), gt(invitations.expiresAt, new Date())))
      .returning({ groupId: invitations.groupId, role: invitations.role });
    if (!row) return false;
    await tx.insert(memberships).values({ groupId: row.groupId, userId, role: row.role }).onConflictDoNothing();
    return true;
  });
}
