import type { Amendment, DataBlock, RowId } from "../page/schema";
import type { Grid } from "./grid";
import type { MappedColumn } from "./mapColumns";
import type { Problems } from "./problems";

/** Texts that replace those of a source, by place in the grid: column, then row. */
export type Amended = ReadonlyMap<number, ReadonlyMap<number, string>>;

/** Place of every row by its identity. */
export function rowPlaces(rowIds: readonly RowId[]): ReadonlyMap<RowId, number> {
  return new Map(rowIds.map((id, index) => [id, index]));
}

/** Whether a name given with a row is that of its sample; a row without a name may be called by its number. */
export function isSample(given: string, actual: string, row: RowId): boolean {
  const [a, b] = [given.trim().normalize("NFC"), actual.trim().normalize("NFC")];
  return a === b || (b === "" && a === `row ${row}`);
}

/** `"TH-07"`, or that there is none. */
export function quoted(sample: string): string {
  return sample === "" ? "without a sample name" : `"${sample}"`;
}

/**
 * Reads a block's amendments against its source. Row, sample and the source's own text must all be what the amendment says:
 * a mismatch is an error that names them, and the amendment is not applied.
 */
export function readAmendments(block: DataBlock, grid: Grid, tied: readonly MappedColumn[], problems: Problems): { amended: Amended; count: number } {
  const amended = new Map<number, Map<number, string>>();
  const entries = block.amendments ?? [];
  if (entries.length === 0) return { amended, count: 0 };
  const places = rowPlaces(grid.rowIds);
  const sampleAt = tied.find((mapped) => mapped.column.role === "sample")?.at;
  const seen = new Map<string, number>();
  let count = 0;
  entries.forEach((entry, index) => {
    const at = placeOf(entry, index, grid, tied, places, sampleAt, problems);
    if (at === undefined) return;
    const key = `${at.row}|${at.column}`;
    const before = seen.get(key);
    seen.set(key, index);
    const column = amended.get(at.column) ?? new Map<number, string>();
    amended.set(at.column, column);
    if (before !== undefined) {
      if (column.delete(at.row)) count--;
      problems.error(
        "amended-twice",
        `Row ${entry.row} (${entry.sample}), column ${entry.column}: two amendments stand for one value, so neither is applied. Take one of them back.`,
        { row: entry.row, column: entry.column, field: `amendments[${index}]` },
      );
      return;
    }
    column.set(at.row, entry.value);
    count++;
  });
  return { amended, count };
}

function placeOf(
  entry: Amendment,
  index: number,
  grid: Grid,
  tied: readonly MappedColumn[],
  places: ReadonlyMap<RowId, number>,
  sampleAt: number | undefined,
  problems: Problems,
): { readonly row: number; readonly column: number } | undefined {
  const where = `Row ${entry.row} (${entry.sample === "" ? "no sample name" : entry.sample}), column ${entry.column}`;
  const place = { row: entry.row, column: entry.column, field: `amendments[${index}]` };
  const refuse = (code: string, why: string): undefined => {
    problems.error(code, `${where}: ${why} The amendment is not applied.`, place);
    return undefined;
  };
  const row = places.get(entry.row);
  if (row === undefined) return refuse("no-such-row", `there is no row ${entry.row}; the table has ${grid.rows.length}. Choose the value again.`);
  const sample = sampleAt === undefined ? "" : (grid.rows[row]?.[sampleAt] ?? "").trim();
  if (!isSample(entry.sample, sample, entry.row))
    return refuse("sample-mismatch", `this row is ${quoted(sample)} in the source, not ${quoted(entry.sample)}. Choose the value again.`);
  const named = columnsNamed(tied, entry.column);
  const [column] = named;
  if (column === undefined) return refuse("no-such-column", `no column has that name or header. Choose the value again.`);
  if (named.length > 1) return refuse("ambiguous-column", `${named.length} columns are called so. Rename one of them, and amend by its name.`);
  const text = grid.rows[row]?.[column.at] ?? "";
  if (text.trim() !== entry.was.trim())
    return refuse(
      "was-mismatch",
      `the source has ${cited(text)} here, and the amendment was made over ${cited(entry.was)}. Look at the value and amend it again.`,
    );
  return { row, column: column.at };
}

function cited(text: string): string {
  return text.trim() === "" ? "nothing" : `"${text.trim()}"`;
}

/** The columns a name stands for: that of the name, else those of the header. */
export function columnsNamed<Named extends { readonly name: string; readonly header?: string }>(columns: readonly Named[], name: string): readonly Named[] {
  const wanted = name.normalize("NFC");
  const byName = columns.filter((column) => column.name === wanted);
  return byName.length > 0 ? byName : columns.filter((column) => column.header?.normalize("NFC") === wanted);
}
