import type pg from "pg";
import { fold } from "./fold";

/**
 * Folds the log of a page into its base (rule S6), from the database's rows and never from memory.
 *
 * In one transaction and under the page's lock: only who holds it takes rows out, so base and rows read in one statement
 * belong together, and rows that others commit meanwhile stay. Commit order is not sequence order: the exact numbers are
 * kept, and those rows go.
 *
 * @returns how many rows were folded; 0 where there was none, or where somebody else is at it
 */
export async function compactPage(client: pg.ClientBase, pageId: string): Promise<number> {
  await client.query("begin");
  try {
    const lock = await client.query<{ held: boolean }>("select pg_try_advisory_xact_lock(hashtextextended('compact ' || $1, 0)) as held", [pageId]);
    if (lock.rows[0]?.held !== true) {
      await client.query("rollback");
      return 0;
    }
    const read = await client.query<{ epoch: number; base: Buffer | null; seqs: string[] | null; updates: Buffer[] | null }>(
      `select p.epoch, s.state as base, u.seqs, u.updates
       from pages p
       left join page_states s on s.page_id = p.id and s.epoch = p.epoch
       left join lateral (select array_agg(seq::text order by seq) as seqs, array_agg("update" order by seq) as updates
                          from page_updates where page_id = p.id and epoch = p.epoch) u on true
       where p.id = $1`,
      [pageId],
    );
    const page = read.rows[0];
    if (page === undefined || page.seqs === null || page.updates === null) {
      await client.query("rollback");
      return 0;
    }
    const state = fold(page.base, page.updates);
    await client.query(
      `insert into page_states (page_id, epoch, state, folded, covered) values ($1, $2, $3, $4, $5)
       on conflict (page_id) do update set epoch = excluded.epoch, state = excluded.state, covered = excluded.covered, at = now(),
         folded = excluded.folded + case when page_states.epoch = excluded.epoch then page_states.folded else 0 end`,
      [pageId, page.epoch, Buffer.from(state), page.seqs.length, JSON.stringify(page.seqs)],
    );
    await client.query("delete from page_updates where page_id = $1 and seq = any($2::bigint[])", [pageId, page.seqs]);
    await client.query("commit");
    return page.seqs.length;
  } catch (error) {
    await client.query("rollback").catch(() => undefined);
    throw error;
  }
}
