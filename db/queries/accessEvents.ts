import { sql } from "drizzle-orm";
import type { Database } from "../client";

/** Channel on which a change of somebody's access is told to every process that holds sockets. */
export const ACCESS_CHANNEL = "access";

/** What changed: a person in a group, a person everywhere, a page, or a reading link. Whoever listens looks up the rest. */
export interface AccessEvent {
  readonly groupId?: string;
  readonly pageId?: string;
  readonly userId?: string;
  readonly linkId?: string;
}

/** Tells every listening process to look again. Called after the change has been committed, in a transaction of its own. */
export async function notifyAccess(db: Database, event: AccessEvent): Promise<void> {
  await db.execute(sql`select pg_notify(${ACCESS_CHANNEL}, ${JSON.stringify(event)})`);
}
