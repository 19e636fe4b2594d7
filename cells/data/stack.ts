import { parseSpecies } from "../species";
import { State } from "../quantity/state";
import type { ColumnCorrelation, QuantityColumn, Table, TableColumn, TextColumn } from "../table/table";
import { copyCell, draftColumn, type DraftColumn } from "./draft";
import { columnOrigins, freeName, rowIdsOf, sayRenamed, substitutionOf, type Member } from "./members";
import { counted, listed, type Problems } from "./problems";

/** Name of the column that says which table a row came from. */
const TABLE_COLUMN = "table";

interface Target<Column> {
  readonly name: string;
  readonly first: Column;
  /** The column that fills it, by member. */
  readonly from: (Column | undefined)[];
}

/**
 * Puts tables under each other. Columns of one species and one kind of unit become one, whatever their names; those without a
 * species go by name. Values, σ, limits, states, marks and texts are carried cell by cell, so a row reads as it did before,
 * and each row keeps the origins it had. Samples set aside stay so.
 */
export function stackTables(handle: string, members: readonly Member[], problems: Problems): Table {
  const used = new Set<string>([TABLE_COLUMN]);
  const words = alignWords(members, used, problems);
  const quantities = alignQuantities(members, used, problems);
  const starts: number[] = [];
  let rows = 0;
  for (const { table } of members) {
    starts.push(rows);
    rows += table.rows;
  }
  const origins = members.flatMap(({ table }) => table.origins);
  const setAside = new Uint8Array(rows);
  members.forEach(({ table }, i) => setAside.set(table.setAside, starts[i] ?? 0));
  const stacked = quantities.map((target) => stackQuantity(target, members, starts, rows));
  const columns: TableColumn[] = [
    ...words.map((target): TextColumn => ({ ...target.first, name: target.name, text: members.flatMap(({ table }, i) => wordsOf(target.from[i], table)) })),
    { kind: "text", name: TABLE_COLUMN, role: "text", text: members.flatMap(tableWords) },
    ...stacked,
  ];
  warnOfIron(members, quantities, problems);
  warnOfRowsTwice(origins, problems);
  const substitution = substitutionOf(members);
  return {
    handle,
    rows,
    rowIds: rowIdsOf(origins),
    samples: members.flatMap(({ table }) => table.samples),
    classes: members.flatMap(({ table }) => table.classes),
    origins,
    setAside,
    columns,
    correlations: stackCorrelations(members, quantities, starts, rows),
    ...(substitution === undefined ? {} : { substitution }),
  };
}

function wordsOf(column: TextColumn | undefined, table: Table): readonly string[] {
  return column?.text ?? new Array<string>(table.rows).fill("");
}

/** The member's own column of tables, where it is a stack itself, else its handle in every row. */
function tableWords({ handle, table }: Member): readonly string[] {
  const inner = table.columns.find((column): column is TextColumn => column.name === TABLE_COLUMN && isTableColumn(column, table));
  return inner?.text ?? new Array<string>(table.rows).fill(handle);
}

/** Whether a column is one that stacking made, rather than a source's own that happens to have its name. */
function isTableColumn(column: TableColumn, table: Table): boolean {
  return column.kind === "text" && column.name === TABLE_COLUMN && table.origins.some((all) => all.some((origin) => origin.table !== table.handle));
}

/** Sample names under sample names, classes under classes, other words by their name. */
function alignWords(members: readonly Member[], used: Set<string>, problems: Problems): readonly Target<TextColumn>[] {
  const targets: Target<TextColumn>[] = [];
  members.forEach(({ handle, table }, member) => {
    for (const column of table.columns) {
      if (column.kind !== "text" || isTableColumn(column, table)) continue;
      const single = column.role === "sample" || column.role === "class";
      let target = targets.find(({ first, from }) => from[member] === undefined && (single ? first.role === column.role : first.name === column.name));
      if (target === undefined || (!single && (target.first.role === "sample" || target.first.role === "class"))) {
        const name = freeName(column.name, handle, used);
        if (name !== column.name) sayRenamed(column.name, name, handle, "another column has that name", problems);
        target = { name, first: column, from: [] };
        targets.push(target);
      }
      target.from[member] = column;
    }
  });
  return targets;
}

function alignQuantities(members: readonly Member[], used: Set<string>, problems: Problems): readonly Target<QuantityColumn>[] {
  const targets: Target<QuantityColumn>[] = [];
  members.forEach(({ handle, table }, member) => {
    const columns = table.columns.filter((column): column is QuantityColumn => column.kind === "quantity");
    const free = (target: Target<QuantityColumn>): boolean => target.from[member] === undefined;
    const rest = columns.filter((column) => {
      const target = targets.find((each) => free(each) && each.first.name === column.name && isAlike(each.first, column));
      if (target !== undefined) target.from[member] = column;
      return target === undefined;
    });
    for (const column of rest) {
      const target = column.species === undefined ? undefined : targets.find((each) => free(each) && isAlike(each.first, column));
      if (target !== undefined) {
        target.from[member] = column;
        continue;
      }
      const name = freeName(column.name, handle, used);
      if (name !== column.name) sayRenamed(column.name, name, handle, whyApart(column, targets), problems);
      const made: Target<QuantityColumn> = { name, first: column, from: [] };
      made.from[member] = column;
      targets.push(made);
    }
  });
  return targets;
}

/** Whether two columns hold the same thing, so that one may stand under the other. */
function isAlike(a: QuantityColumn, b: QuantityColumn): boolean {
  return a.species === b.species && a.unit.dimension === b.unit.dimension && a.basis === b.basis;
}

function whyApart(column: QuantityColumn, targets: readonly Target<QuantityColumn>[]): string {
  const other = targets.find(({ name }) => name === column.name)?.first;
  if (other === undefined) return "another column has that name";
  if (other.unit.dimension !== column.unit.dimension) return `${other.unit.symbol} and ${column.unit.symbol} cannot be brought to one unit`;
  if (other.species !== column.species) return `it measures ${column.species ?? "no species"}, and the other ${other.species ?? "no species"}`;
  if (other.basis !== column.basis) return `one is by ${other.basis ?? "no basis that anybody stated"}, the other by ${column.basis ?? "none"}`;
  return "its table has two columns of it";
}

function stackQuantity(target: Target<QuantityColumn>, members: readonly Member[], starts: readonly number[], rows: number): DraftColumn {
  const sources = members.flatMap(({ handle }, member) => {
    const from = target.from[member];
    return from === undefined ? [] : columnOrigins(handle, from);
  });
  const made = draftColumn({ ...target.first, name: target.name, sources }, rows);
  members.forEach(({ table }, member) => {
    const from = target.from[member];
    const start = starts[member] ?? 0;
    if (from === undefined) return;
    for (let row = 0; row < table.rows; row++) copyCell(from, row, made, start + row);
  });
  return made;
}

function stackCorrelations(
  members: readonly Member[],
  targets: readonly Target<QuantityColumn>[],
  starts: readonly number[],
  rows: number,
): readonly ColumnCorrelation[] {
  const found = new Map<string, ColumnCorrelation>();
  members.forEach(({ table }, member) => {
    const nameOf = (name: string): string | undefined => targets.find((target) => target.from[member]?.name === name)?.name;
    for (const { of, value } of table.correlations) {
      const [a, b] = [nameOf(of[0]), nameOf(of[1])];
      if (a === undefined || b === undefined) continue;
      const pair: readonly [string, string] = a < b ? [a, b] : [b, a];
      const key = JSON.stringify(pair);
      const made = found.get(key) ?? { of: pair, value: new Float64Array(rows) };
      found.set(key, made);
      made.value.set(value, starts[member] ?? 0);
    }
  });
  return [...found.values()];
}

/** A row that comes in by two ways would count twice in every mean and every fit. */
function warnOfRowsTwice(origins: Table["origins"], problems: Problems): void {
  const seen = new Set<string>();
  const twice = new Map<string, number>();
  for (const { table, row } of origins.flat()) {
    const key = JSON.stringify([table, row]);
    if (seen.has(key)) twice.set(table, (twice.get(table) ?? 0) + 1);
    seen.add(key);
  }
  if (twice.size > 0)
    problems.warning(
      "rows-twice",
      `${listed([...twice].map(([table, count]) => `${counted(count, "row")} of ${table}`))} come in by more than one of the tables stacked here, and count more than once. Stack each table by one way only.`,
      { field: "stack" },
    );
}

/**
 * A bare FeO that its own table leaves open stands, in the stack, beside columns that make it look like ferrous iron. Whoever
 * reads on must know that nobody said so.
 */
function warnOfIron(members: readonly Member[], targets: readonly Target<QuantityColumn>[], problems: Problems): void {
  const iron = (column: QuantityColumn): boolean => column.species !== undefined && parseSpecies(column.species)?.element === "Fe";
  const kinds = new Set(targets.filter(({ first }) => iron(first)).map(({ first }) => first.species));
  if (kinds.size < 2) return;
  for (const { handle, table } of members) {
    const own = table.columns.filter((column): column is QuantityColumn => column.kind === "quantity" && iron(column) && column.state.includes(State.present));
    const [only] = own;
    if (own.length === 1 && only?.species !== undefined && parseSpecies(only.species)?.iron === "untold")
      problems.warning(
        "iron-untold",
        `${handle} gives its iron in ${only.name} alone and does not say whether that is all of it; stacked beside ${[...kinds].filter((kind) => kind !== only.species).join(", ")} it is read as a part. Set its species in ${handle} to ${only.species}t or Fe_total where it is the total.`,
        { column: only.name },
      );
  }
}
