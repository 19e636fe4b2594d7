import type { Connection } from "@/db/client";
import type { EditRow, Appended, PageStorage, StoredPage } from "./pageStorage";
import { APPEND_SQL } from "./appendSql";
import { Compactor } from "./compactor";
import { editingRoles } from "../access/roles";

/** How often `changed_at` of a page is written while one person types; each write makes a new version of the row. */
const TOUCH_MS = 5000;

/** Pages in PostgreSQL. */
export class PostgresStorage implements PageStorage {
  private readonly compactor: Compactor;
  private readonly touched = new Map<string, { readonly userId: string; readonly at: number }>();

  constructor(
    private readonly connection: Connection,
    databaseUrl: string,
  ) {
    this.compactor = new Compactor(databaseUrl);
  }

  async load(pageId: string): Promise<StoredPage | null> {
    const client = await this.connection.pool.connect();
    let broken = true;
    try {
      await client.query("begin isolation level repeatable read read only");
      const page = await client.query<{ group_id: string; epoch: number; archived: boolean; state: Buffer | null }>(
        `select p.group_id, p.epoch, p.archived_at is not null as archived, s.state
         from pages p left join page_states s on s.page_id = p.id and s.epoch = p.epoch where p.id = $1`,
        [pageId],
      );
      const found = page.rows[0];
      const log = await client.query<{ update: Buffer }>(`select "update" from page_updates where page_id = $1 and epoch = $2 order by seq`, [
        pageId,
        found?.epoch ?? 0,
      ]);
      const owners = await client.query<{ client_id: string; user_id: string | null }>("select client_id, user_id from page_clients where page_id = $1", [
        pageId,
      ]);
      await client.query("commit");
      broken = false;
      if (found === undefined) return null;
      return {
        groupId: found.group_id,
        epoch: found.epoch,
        archived: found.archived,
        base: found.state,
        updates: log.rows.map((row) => row.update),
        owners: new Map(owners.rows.map((row) => [Number(row.client_id), row.user_id])),
      };
    } finally {
      client.release(broken);
    }
  }

  async append(rows: readonly EditRow[]): Promise<Appended> {
    const record = rows.flatMap(({ pageId, userId, record: lines }) =>
      lines.map((line) => ({
        page_id: pageId,
        block_key: line.blockKey,
        list: line.list,
        entry_key: line.entryKey,
        before: line.before,
        after: line.after,
        user_id: userId,
      })),
    );
    const owned = rows.flatMap(({ pageId, userId, clients }) => clients.map((client) => ({ pageId, userId, client })));
    const now = Date.now();
    const touches = this.touchesOf(rows, now);
    const result = await this.connection.pool.query<{ allowed: number[] | null; seqs: string[] | null }>({
      name: "append",
      text: APPEND_SQL,
      values: [
        rows.map((row) => row.pageId),
        rows.map((row) => row.epoch),
        rows.map((row) => row.userId),
        rows.map((row) => Buffer.from(row.update.buffer, row.update.byteOffset, row.update.byteLength)),
        editingRoles,
        owned.map((o) => o.pageId),
        owned.map((o) => o.client),
        owned.map((o) => o.userId),
        JSON.stringify(record),
        JSON.stringify(touches),
      ],
    });
    const answer = result.rows[0];
    const allowed = new Set(answer?.allowed ?? []);
    const refused = rows.flatMap((_, n) => (allowed.has(n + 1) ? [] : [n]));
    if (refused.length > 0) return { is: "refused", rows: refused };
    for (const touch of touches) this.touched.set(touch.page_id, { userId: touch.user_id, at: now });
    return { is: "stored", seqs: (answer?.seqs ?? []).map(BigInt) };
  }

  /** One line a page whose row in `pages` is to be written: what it is called changed, somebody else edits, or it was a while ago. */
  private touchesOf(rows: readonly EditRow[], now: number) {
    const touches = new Map<string, { page_id: string; title: string | null; outline: unknown; user_id: string }>();
    for (const { pageId, userId, heading } of rows) {
      const last = this.touched.get(pageId);
      const before = touches.get(pageId);
      if (heading === null && before === undefined && last?.userId === userId && now - last.at < TOUCH_MS) continue;
      touches.set(pageId, {
        page_id: pageId,
        title: heading?.title ?? before?.title ?? null,
        outline: heading?.outline ?? before?.outline ?? null,
        user_id: userId,
      });
    }
    return [...touches.values()];
  }

  async fetch(pageId: string, seqs: readonly bigint[]): Promise<readonly Uint8Array[]> {
    const result = await this.connection.pool.query<{ update: Buffer }>(
      `select "update" from page_updates where page_id = $1 and seq = any($2::bigint[]) order by seq`,
      [pageId, seqs.map(String)],
    );
    return result.rows.map((row) => row.update);
  }

  async isOnRecord(pageId: string, list: string, entry: Readonly<Record<string, unknown>>): Promise<boolean> {
    const result = await this.connection.pool.query(
      "select 1 from amendment_log where page_id = $1 and list = $2 and (before = $3::jsonb or after = $3::jsonb) limit 1",
      [pageId, list, JSON.stringify(entry)],
    );
    return (result.rowCount ?? 0) > 0;
  }

  compact(pageId: string): Promise<number> {
    return this.compactor.run(pageId);
  }

  async close(): Promise<void> {
    await this.compactor.close();
  }
}
