import type { DataBlock } from "../page/schema";
import type { Table, TableColumn, TextColumn } from "../table/table";
import type { Amended } from "./amend";
import type { Grid } from "./grid";
import { isQuantity, type MappedColumn, type MappedQuantity } from "./mapColumns";
import type { Problems } from "./problems";
import { readQuantity } from "./readQuantity";

/** The table of a grid whose columns are understood and whose amendments are read; nothing is set aside yet. */
export function readGrid(block: DataBlock, grid: Grid, columns: readonly (MappedColumn | MappedQuantity)[], amended: Amended, problems: Problems): Table {
  const made = columns.map((mapped): TableColumn => (isQuantity(mapped) ? readQuantity(grid, mapped, amended, problems) : readText(grid, mapped, amended)));
  const blank = new Array<string>(grid.rows.length).fill("");
  return {
    handle: block.id,
    rows: grid.rows.length,
    rowIds: grid.rowIds,
    samples: textOf(made, "sample") ?? blank,
    classes: textOf(made, "class") ?? blank,
    origins: grid.rowIds.map((row) => [{ table: block.id, row }]),
    setAside: new Uint8Array(grid.rows.length),
    columns: made,
    correlations: [],
  };
}

/** The words of the column with that role; undefined where the table has none. */
export function textOf(columns: readonly TableColumn[], role: TextColumn["role"]): readonly string[] | undefined {
  return columns.find((column): column is TextColumn => column.kind === "text" && column.role === role)?.text;
}

function readText(grid: Grid, mapped: MappedColumn, amended: Amended): TextColumn {
  const { name, header, at, column } = mapped;
  const changed = amended.get(at);
  const text = grid.rows.map((row, index) => (changed?.get(index) ?? row[at] ?? "").trim());
  const role = column.role === "sample" || column.role === "class" || column.role === "reference" ? column.role : "text";
  return { kind: "text", name, ...(header === undefined ? {} : { header }), role, text };
}
