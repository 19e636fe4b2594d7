import { drizzle, type NodePgDatabase } from "drizzle-orm/node-postgres";
import pg from "pg";
import * as schema from "./schema";

export type Database = NodePgDatabase<typeof schema>;

/** A pool and the typed database over it. `end()` closes the pool. */
export interface Connection {
  readonly db: Database;
  readonly pool: pg.Pool;
  end(): Promise<void>;
}

/**
 * Connects to PostgreSQL.
 *
 * Statements have a timeout, so that a lock that never comes free is an error with a sentence and not a page that hangs.
 *
 * @param url `postgres://…`
 * @param max size of the pool
 */
export function connect(url: string, max = 10): Connection {
  const pool = new pg.Pool({ connectionString: url, max, statement_timeout: 30_000, idle_in_transaction_session_timeout: 60_000 });
  // A connection lost while idle is replaced by the pool; without a listener it would end the process.
  pool.on("error", () => undefined);
  return { db: drizzle(pool, { schema }), pool, end: () => pool.end() };
}
