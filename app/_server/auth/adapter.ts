import "server-only";
import { DrizzleAdapter } from "@auth/drizzle-adapter";
import type { Adapter } from "next-auth/adapters";
import type { Database } from "@/db/client";
import { accounts, sessions, users, verificationTokens } from "@/db/schema";
import { hashToken } from "@/db/tokens";

/** next-auth's adapter over our tables, in which a session's secret is stored as its hash only. */
export function hashingAdapter(db: Database): Adapter {
  const inner = plainAdapter(db);
  const { createSession, getSessionAndUser, updateSession, deleteSession } = inner;
  if (!createSession || !getSessionAndUser || !updateSession || !deleteSession) throw new Error("the adapter has no sessions");
  return {
    ...inner,
    createSession: async (session) => ({
      ...(await createSession({ ...session, sessionToken: hashToken(session.sessionToken) })),
      sessionToken: session.sessionToken,
    }),
    getSessionAndUser: async (token) => {
      const found = await getSessionAndUser(hashToken(token));
      return found && { ...found, session: { ...found.session, sessionToken: token } };
    },
    updateSession: async (session) => {
      const updated = await updateSession({ ...session, sessionToken: hashToken(session.sessionToken) });
      return updated && { ...updated, sessionToken: session.sessionToken };
    },
    deleteSession: async (token) => {
      await deleteSession(hashToken(token));
    },
  };
}

/**
 * The adapter as its package gives it. Its types describe tables with no columns but its own, and the next major version's
 * interface; the calls that version 4 makes are the same, so it is taken as version 4's here, at this one place.
 */
function plainAdapter(db: Database): Adapter {
  type Tables = NonNullable<Parameters<typeof DrizzleAdapter<Database>>[1]>;
  const tables: unknown = { usersTable: users, accountsTable: accounts, sessionsTable: sessions, verificationTokensTable: verificationTokens };
  const adapter: unknown = DrizzleAdapter(db, tables as Tables);
  return adapter as Adapter;
}
