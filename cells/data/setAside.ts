import type { DataBlock } from "../page/schema";
import { State } from "../quantity/state";
import type { Table } from "../table/table";
import { columnsNamed, isSample, quoted, rowPlaces } from "./amend";
import type { Problems } from "./problems";

/**
 * Sets samples and single values aside, in place: they stay in the table and out of every calculation. Row, sample and column
 * must be what the entry says; a mismatch is an error, and nothing is set aside by it.
 */
export function setAside(block: DataBlock, table: Table, sourceSamples: readonly string[], problems: Problems): void {
  const entries = block.setAside ?? [];
  if (entries.length === 0) return;
  const places = rowPlaces(table.rowIds);
  entries.forEach((entry, index) => {
    const where = `Row ${entry.row}${entry.sample === undefined ? "" : ` (${entry.sample})`}${entry.column === undefined ? "" : `, column ${entry.column}`}`;
    const place = { row: entry.row, ...(entry.column === undefined ? {} : { column: entry.column }), field: `setAside[${index}]` };
    const refuse = (code: string, why: string): void => problems.error(code, `${where}: ${why} Nothing is set aside by this entry.`, place);
    const row = places.get(entry.row);
    if (row === undefined) return refuse("no-such-row", `there is no row ${entry.row}; the table has ${table.rows}. Choose the sample again.`);
    const names = [table.samples[row] ?? "", sourceSamples[row] ?? ""];
    const { sample } = entry;
    if (sample !== undefined && !names.some((name) => isSample(sample, name, entry.row)))
      return refuse("sample-mismatch", `this row is ${quoted(names[0] ?? "")}, not ${quoted(sample)}. Choose the sample again.`);
    if (entry.column === undefined) {
      table.setAside[row] = 1;
      return;
    }
    const named = columnsNamed(table.columns, entry.column);
    const [column] = named;
    if (column === undefined) return refuse("no-such-column", "no column has that name or header. Choose the value again.");
    if (named.length > 1) return refuse("ambiguous-column", `${named.length} columns are called so. Say by its name which one is meant.`);
    if (column.kind !== "quantity")
      return refuse("not-a-quantity", `${column.name} holds words, and only values can be set aside. Set the sample aside instead.`);
    column.state[row] = State.setAside;
    column.value[row] = Number.NaN;
    column.sigma[row] = Number.NaN;
    column.limit[row] = Number.NaN;
    column.assumed[row] = 0;
  });
}
