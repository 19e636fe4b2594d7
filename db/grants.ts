import type pg from "pg";

/** Tables whose rows the application adds and never changes. The triggers say the same to everybody, the owner included. */
export const frozenTables = ["snapshots", "snapshot_files", "contents", "amendment_log", "group_bodies"] as const;

/**
 * Gives the application's role its rights: to read and write rows, to add to frozen tables, and to change no table.
 *
 * @param client connected as the owner of the tables
 * @param role name of the application's role; must exist
 */
export async function grantRights(client: pg.ClientBase, role: string): Promise<void> {
  const name = quote(role);
  await client.query(`grant usage on schema public to ${name}`);
  await client.query(`grant select, insert, update, delete on all tables in schema public to ${name}`);
  await client.query(`grant usage, select on all sequences in schema public to ${name}`);
  await client.query(`revoke update, delete, truncate, references, trigger on ${frozenTables.join(", ")} from ${name}`);
}

/** An SQL identifier, quoted. */
export function quote(identifier: string): string {
  return `"${identifier.replaceAll('"', '""')}"`;
}
