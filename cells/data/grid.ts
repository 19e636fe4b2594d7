import { CellError } from "../errors";
import type { Column, DataBlock, RowId, TypedRow } from "../page/schema";
import { proposeMapping, readTable, settleDecimal, type DecimalSign, type Proposal, type RawTable } from "../table";
import { counted, listed, type Problems } from "./problems";

/** Rows of text with their identities: a source, or a table typed by hand, before its columns are understood. */
export interface Grid {
  readonly rowIds: readonly RowId[];
  /** Headers of a source, names of the columns of a typed table. */
  readonly headers: readonly string[];
  readonly units?: readonly string[];
  readonly rows: readonly (readonly string[])[];
  readonly decimal: DecimalSign;
  readonly typed: boolean;
}

interface SourceRead {
  readonly raw: RawTable;
  proposal?: Proposal;
}

/** Sources never change, so what was read from their bytes once holds for as long as somebody keeps them. */
const sourcesRead = new WeakMap<Uint8Array, SourceRead>();

function readOnce(bytes: Uint8Array): SourceRead {
  const known = sourcesRead.get(bytes);
  if (known !== undefined) return known;
  const read: SourceRead = { raw: readTable(bytes) };
  sourcesRead.set(bytes, read);
  return read;
}

/**
 * The rows of a source and its columns: as the block gives them, else as the importer proposes them.
 *
 * @throws CellError `source-missing` naming the file, or why the file is no table
 */
export function sourceGrid(
  block: DataBlock,
  bytes: Uint8Array | undefined,
  problems: Problems,
): { readonly grid: Grid; readonly columns: readonly Column[]; readonly proposed: boolean } {
  const file = block.source?.file ?? "";
  if (bytes === undefined)
    throw new CellError("source-missing", `The file "${file}" is not there, so this table is empty. Upload it again, or correct its name.`, {
      field: "source.file",
    });
  const read = readOnce(bytes);
  const { raw } = read;
  problems.take(raw.problems);
  const grid: Grid = {
    rowIds: Array.from({ length: raw.rows.length }, (_, i) => i + 1),
    headers: raw.headers,
    ...(raw.units === undefined ? {} : { units: raw.units }),
    rows: raw.rows,
    decimal: raw.decimal,
    typed: false,
  };
  if (block.columns !== undefined) return { grid, columns: block.columns, proposed: false };
  read.proposal ??= proposeMapping(raw);
  const { columns } = read.proposal;
  const quantities = columns.filter((column) => column.role === "quantity").length;
  problems.note(
    "columns-proposed",
    `The page does not say what the columns of "${file}" are, so the importer's own proposal is used: ${counted(columns.length, "column")}, ${quantities} of them quantities. Look it over and keep it.`,
    { field: "columns" },
  );
  problems.take(read.proposal.problems);
  return { grid, columns, proposed: true };
}

/** The rows of a table typed by hand: each cell stands under its column's name. */
export function typedGrid(block: DataBlock, typed: readonly TypedRow[], problems: Problems): { readonly grid: Grid; readonly columns: readonly Column[] } {
  const columns = block.columns ?? [];
  const headers = columns.map((column) => column.name ?? column.header ?? "");
  const known = new Set(headers);
  const ids = new Set<string>();
  const unplaced = new Set<string>();
  for (const row of typed) {
    if (ids.has(row.id))
      throw new CellError("row-twice", `Two typed rows have the id "${row.id}", so nothing can be said of one of them alone. Give one of them another id.`, {
        row: row.id,
      });
    ids.add(row.id);
    for (const [name, text] of Object.entries(row.cells)) if (!known.has(name) && text.trim() !== "") unplaced.add(name);
  }
  if (unplaced.size > 0)
    problems.warning(
      "cells-without-column",
      `Cells are typed under ${listed([...unplaced])}, and no column has that name, so they are not read. Add the column, or rename one.`,
      { field: "typed" },
    );
  const rows = typed.map((row) => headers.map((name) => (Object.hasOwn(row.cells, name) ? (row.cells[name] ?? "") : "")));
  return { grid: { rowIds: typed.map((row) => row.id), headers, rows, decimal: settleDecimal(rows), typed: true }, columns };
}
