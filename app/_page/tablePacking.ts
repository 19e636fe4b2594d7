import type { QuantityColumn, RowId, RowOrigin, Table, TableColumn, TextColumn } from "@/cells";

/**
 * Tables on their way from the worker to the page. Texts travel as one string a column, and are parted only when somebody
 * looks at that column: cloning 400,000 small strings would hold the page still for a tenth of a second.
 */
export interface PackedTexts {
  readonly joined: string;
  readonly lengths: Uint32Array;
}

export interface PackedOrigins {
  readonly tables: readonly string[];
  /** How many origins each row has. */
  readonly counts: Uint16Array;
  /** Of each origin: index into `tables`, and row. */
  readonly table: Uint16Array;
  readonly rows: readonly RowId[];
}

type PackedTextColumn = Omit<TextColumn, "text"> & { readonly text: PackedTexts };
type PackedQuantityColumn = Omit<QuantityColumn, "raw" | "rawSigma"> & { readonly raw: PackedTexts; readonly rawSigma: PackedTexts };

export type PackedTable = Omit<Table, "samples" | "classes" | "origins" | "columns"> & {
  readonly samples: PackedTexts;
  readonly classes: PackedTexts;
  readonly origins: PackedOrigins;
  readonly columns: readonly (PackedTextColumn | PackedQuantityColumn)[];
};

export function packTexts(texts: readonly string[]): PackedTexts {
  return { joined: texts.join(""), lengths: Uint32Array.from(texts, (text) => text.length) };
}

export function unpackTexts({ joined, lengths }: PackedTexts): string[] {
  const texts = new Array<string>(lengths.length);
  let at = 0;
  for (let i = 0; i < lengths.length; i++) {
    const end = at + (lengths[i] ?? 0);
    texts[i] = joined.slice(at, end);
    at = end;
  }
  return texts;
}

function packOrigins(origins: readonly (readonly RowOrigin[])[]): PackedOrigins {
  const tables: string[] = [];
  const index = new Map<string, number>();
  const table: number[] = [];
  const rows: RowId[] = [];
  for (const ofRow of origins) {
    for (const origin of ofRow) {
      let at = index.get(origin.table);
      if (at === undefined) {
        at = tables.push(origin.table) - 1;
        index.set(origin.table, at);
      }
      table.push(at);
      rows.push(origin.row);
    }
  }
  return { tables, counts: Uint16Array.from(origins, (o) => o.length), table: Uint16Array.from(table), rows };
}

function unpackOrigins(packed: PackedOrigins): RowOrigin[][] {
  let at = 0;
  return Array.from(packed.counts, (count) => {
    const ofRow: RowOrigin[] = [];
    for (let i = 0; i < count; i++, at++) ofRow.push({ table: packed.tables[packed.table[at] ?? 0] ?? "", row: packed.rows[at] ?? 0 });
    return ofRow;
  });
}

/** A value made on first use, as a property that looks like any other. */
function lazily<T extends object, K extends string, V>(target: T, name: K, make: () => V): T & { readonly [P in K]: V } {
  let made: { value: V } | undefined;
  Object.defineProperty(target, name, { enumerable: true, get: () => (made ??= { value: make() }).value });
  return target as T & { readonly [P in K]: V };
}

export function packTable(table: Table): PackedTable {
  return {
    ...table,
    samples: packTexts(table.samples),
    classes: packTexts(table.classes),
    origins: packOrigins(table.origins),
    columns: table.columns.map((column) =>
      column.kind === "text" ? { ...column, text: packTexts(column.text) } : { ...column, raw: packTexts(column.raw), rawSigma: packTexts(column.rawSigma) },
    ),
  };
}

function unpackColumn(packed: PackedTextColumn | PackedQuantityColumn): TableColumn {
  if (packed.kind === "text") {
    const { text, ...rest } = packed;
    return lazily(rest, "text", () => unpackTexts(text));
  }
  const { raw, rawSigma, ...rest } = packed;
  return lazily(
    lazily(rest, "raw", () => unpackTexts(raw)),
    "rawSigma",
    () => unpackTexts(rawSigma),
  );
}

export function unpackTable(packed: PackedTable): Table {
  const { samples, classes, origins, columns, ...rest } = packed;
  const withColumns = { ...rest, columns: columns.map(unpackColumn) };
  return lazily(
    lazily(
      lazily(withColumns, "samples", () => unpackTexts(samples)),
      "classes",
      () => unpackTexts(classes),
    ),
    "origins",
    () => unpackOrigins(origins),
  );
}
