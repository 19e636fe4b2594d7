import type { RowOrigin, Table } from "@/cells";
import type { PickedRow } from "@/app/_page/contract";

function key(row: RowOrigin): string {
  return `${row.table}\u0000${String(row.row)}`;
}

/** Indices of the table's rows that are picked: a row counts as picked when any of the rows it was made from is. */
export function pickedIndices(table: Table | undefined, picked: readonly PickedRow[]): readonly number[] {
  if (table === undefined || picked.length === 0) return [];
  const keys = new Set(picked.map(key));
  const found: number[] = [];
  table.origins.forEach((origins, index) => {
    if (origins.some((origin) => keys.has(key(origin)))) found.push(index);
  });
  return found;
}

/** The origin rows behind rows of a table, each once, for picking them everywhere on the page. */
export function originsOf(table: Table, indices: Iterable<number>): PickedRow[] {
  const seen = new Map<string, PickedRow>();
  for (const index of indices) for (const origin of table.origins[index] ?? []) seen.set(key(origin), { table: origin.table, row: origin.row });
  return Array.from(seen.values());
}

/** What a row is called: its sample's name, else its row. */
export function rowLabel(table: Table | undefined, index: number): string {
  const sample = table?.samples[index] ?? "";
  if (sample !== "") return sample;
  const row = table?.rowIds[index];
  return typeof row === "number" ? `row ${row}` : `row ${index + 1}`;
}
