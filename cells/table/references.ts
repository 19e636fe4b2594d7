import type { Table, TextColumn } from "./table";

const none: readonly string[] = [];

/** Reference of each row; empty where the table has no column of references. */
export function referencesOf(table: Table): readonly string[] {
  return table.columns.find((column): column is TextColumn => column.kind === "text" && column.role === "reference")?.text ?? none;
}
