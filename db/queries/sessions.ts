import { and, eq, gt, lt } from "drizzle-orm";
import type { Database } from "../client";
import { sessions, users } from "../schema";
import { hashToken, newToken } from "../tokens";

/** Somebody signed in. */
export interface SignedIn {
  readonly id: string;
  readonly name: string;
  readonly email: string | null;
  readonly expires: Date;
}

/** Sessions last thirty days from signing in. */
export const SESSION_SECONDS = 30 * 24 * 3600;

/** The person whose session it is, or null where there is none, it was revoked, or it has expired. */
export async function userBySession(db: Database, sessionHash: string | null): Promise<SignedIn | null> {
  if (sessionHash === null) return null;
  const [row] = await db
    .select({ id: users.id, name: users.name, email: users.email, expires: sessions.expires })
    .from(sessions)
    .innerJoin(users, eq(users.id, sessions.userId))
    .where(and(eq(sessions.sessionToken, sessionHash), gt(sessions.expires, new Date())));
  return row ? { ...row, name: row.name ?? "unnamed" } : null;
}

/** Makes a session and gives its secret, which is stored nowhere. Sessions of that person which have run out go. */
export async function createSession(db: Database, userId: string): Promise<{ token: string; expires: Date }> {
  const token = newToken();
  const expires = new Date(Date.now() + SESSION_SECONDS * 1000);
  await db.delete(sessions).where(and(eq(sessions.userId, userId), lt(sessions.expires, new Date())));
  await db.insert(sessions).values({ sessionToken: hashToken(token), userId, expires });
  return { token, expires };
}

/** Ends one session. */
export async function endSession(db: Database, sessionHash: string): Promise<void> {
  await db.delete(sessions).where(eq(sessions.sessionToken, sessionHash));
}

/** Ends every session of a person, on every device; gives how many there were. */
export async function endAllSessions(db: Database, userId: string): Promise<number> {
  const gone = await db.delete(sessions).where(eq(sessions.userId, userId)).returning({ token: sessions.sessionToken });
  return gone.length;
}
