import { CellError, type Span } from "../errors";
import type { Table, TextColumn } from "../table/table";

/** The rows of a table sorted into classes by one of its text columns. */
export interface Split {
  readonly table: Table;
  readonly column: string;
  /** In order of first appearance; rows without a class belong to none. */
  readonly classes: readonly string[];
  /** Place of each row's class in `classes`; −1 where it has none. */
  readonly classOf: Int32Array;
}

const MAX_CLASSES = 65_535;
const splits = new WeakMap<TextColumn, Split>();

/** The classes of a table by one text column. One object a column, so that two uses of it are known to be one split. */
export function splitBy(table: Table, column: TextColumn, at: Span): Split {
  const known = splits.get(column);
  if (known !== undefined) return known;
  const places = new Map<string, number>();
  const classOf = new Int32Array(table.rows).fill(-1);
  for (let row = 0; row < table.rows; row++) {
    const name = column.text[row] ?? "";
    if (name === "") continue;
    const place = places.get(name) ?? places.size;
    places.set(name, place);
    classOf[row] = place;
  }
  if (places.size > MAX_CLASSES)
    throw new CellError("too-many-classes", `${column.name} has ${places.size} different entries; at most ${MAX_CLASSES} classes are kept apart.`, {
      span: at,
    });
  const split: Split = { table, column: column.name, classes: [...places.keys()], classOf };
  splits.set(column, split);
  return split;
}

/** What a value runs over: the rows of a table, the classes of a split of it, or nothing (one value, null). */
export interface Over {
  readonly table: Table;
  readonly split: Split | null;
}

/** How many values there are. */
export function extentOf(over: Over | null): number {
  return over === null ? 1 : (over.split?.classes.length ?? over.table.rows);
}

/**
 * What two values put together run over. One value goes with everything, a class's value with every row of the class.
 *
 * @throws CellError `table-mismatch` where they are rows of different tables
 */
export function joinOver(a: Over | null, b: Over | null, at: Span): Over | null {
  if (a === null || a === b) return b;
  if (b === null) return a;
  if (a.table !== b.table) {
    const text = `One side has a value for each sample of ${a.table.handle}, the other for each of ${b.table.handle}; their rows do not belong together. Join the two tables on the sample, or use one value of one of them, such as a mean.`;
    throw new CellError("table-mismatch", text, { span: at });
  }
  if (a.split === b.split) return a;
  if (a.split === null || b.split === null) return { table: a.table, split: null };
  throw new CellError(
    "class-mismatch",
    `One side has a value for each ${a.split.column}, the other for each ${b.split.column}. Use one of the two columns for both.`,
    { span: at },
  );
}
