import { CellError } from "../errors";
import { State } from "../quantity/state";
import type { ColumnCorrelation, QuantityColumn, Table, TableColumn, TextColumn } from "../table/table";
import { copyCell, draftColumn } from "./draft";
import { columnOrigins, freeName, rowIdsOf, sayRenamed, substitutionOf, type Member } from "./members";
import { counted, listed, type Problems } from "./problems";

/** A row of the joined table: the row that each member has for its sample. */
interface Joined {
  readonly sample: string;
  readonly rows: (number | undefined)[];
}

/**
 * Puts tables beside each other, on the sample's name: every sample of any table has one row, with what the others lack
 * missing. A sample set aside in one table has its values there set aside; one set aside in all of them is so here.
 *
 * @throws CellError `join-ambiguous` where a table has a sample twice, `join-nameless` where a row has no name
 */
export function joinTables(handle: string, members: readonly Member[], problems: Problems): Table {
  const joined = matchSamples(members);
  const rows = joined.length;
  const origins = joined.map(({ rows: own }) => own.flatMap((row, member) => (row === undefined ? [] : (members[member]?.table.origins[row] ?? []))));
  const setAside = Uint8Array.from(joined, ({ rows: own }) => (own.every((row, m) => row === undefined || members[m]?.table.setAside[row] === 1) ? 1 : 0));
  const used = new Set<string>();
  const columns: TableColumn[] = [];
  const names: Map<string, string>[] = [];
  members.forEach(({ handle: from, table }, member) => {
    const renamed = new Map<string, string>();
    names.push(renamed);
    for (const column of table.columns) {
      if (column.kind === "text" && (column.role === "sample" || column.role === "class")) {
        const first = columns.find((other): other is TextColumn => other.kind === "text" && other.role === column.role);
        if (first !== undefined) continue;
      }
      const name = freeName(column.name, from, used);
      renamed.set(column.name, name);
      if (name !== column.name) sayRenamed(column.name, name, from, "another table has a column of that name", problems);
      columns.push(
        column.kind === "text" ? joinWords(column, name, member, members, joined, problems) : joinQuantity(column, name, member, table, joined, setAside),
      );
    }
  });
  sayUnmatched(members, joined, problems);
  const classes = columns.find((column): column is TextColumn => column.kind === "text" && column.role === "class")?.text;
  const substitution = substitutionOf(members);
  return {
    handle,
    rows,
    rowIds: rowIdsOf(origins),
    samples: joined.map(({ sample }) => sample),
    classes: classes ?? new Array<string>(rows).fill(""),
    origins,
    setAside,
    columns,
    correlations: members.flatMap(({ table }, member) => joinCorrelations(table, names[member] ?? new Map<string, string>(), member, joined)),
    ...(substitution === undefined ? {} : { substitution }),
  };
}

function matchSamples(members: readonly Member[]): readonly Joined[] {
  const bySample = new Map<string, Joined>();
  members.forEach(({ handle, table }, member) => {
    const inUse = new Set<string>();
    // Rows in use first: an analysis set aside does not make its sample ambiguous.
    for (const aside of [false, true])
      for (let row = 0; row < table.rows; row++) {
        if ((table.setAside[row] === 1) !== aside) continue;
        const sample = (table.samples[row] ?? "").trim().normalize("NFC");
        const id = table.rowIds[row] ?? row + 1;
        if (sample === "" && aside) continue;
        if (sample === "")
          throw new CellError("join-nameless", `Row ${id} of ${handle} has no sample name, so nothing can be joined to it. Name it, or set it aside.`, {
            row: id,
          });
        const known = bySample.get(sample) ?? { sample, rows: [] };
        bySample.set(sample, known);
        const before = known.rows[member];
        if (before !== undefined && !aside && inUse.has(sample))
          throw new CellError(
            "join-ambiguous",
            `${handle} has the sample "${sample}" twice, in rows ${table.rowIds[before] ?? before + 1} and ${id}, so joining would have to choose between them. Merge its replicates first, or set one row aside.`,
            { row: id },
          );
        if (before !== undefined) continue;
        known.rows[member] = row;
        if (!aside) inUse.add(sample);
      }
  });
  const joined = [...bySample.values()];
  for (const each of joined) each.rows.length = members.length;
  return joined.map(({ sample, rows }) => ({ sample, rows: Array.from(rows) }));
}

function joinWords(column: TextColumn, name: string, member: number, members: readonly Member[], joined: readonly Joined[], problems: Problems): TextColumn {
  const { role } = column;
  if (role === "sample") return { ...column, name, text: joined.map(({ sample }) => sample) };
  if (role !== "class") return { ...column, name, text: joined.map(({ rows }) => (rows[member] === undefined ? "" : (column.text[rows[member]] ?? ""))) };
  const differing: string[] = [];
  const text = joined.map(({ sample, rows }) => {
    const said = new Set(rows.flatMap((row, m) => (row === undefined ? [] : [members[m]?.table.classes[row] ?? ""])).filter((word) => word !== ""));
    if (said.size > 1) differing.push(`${sample} (${[...said].join(" or ")})`);
    return [...said][0] ?? "";
  });
  if (differing.length > 0)
    problems.warning("class-differs", `The tables give different classes to ${listed(differing, 4)}; that of the first table is used.`, { column: name });
  return { ...column, name, text };
}

function joinQuantity(column: QuantityColumn, name: string, member: number, table: Table, joined: readonly Joined[], setAside: Uint8Array): QuantityColumn {
  const made = draftColumn({ ...column, name, sources: columnOrigins(table.handle, column) }, joined.length);
  joined.forEach(({ rows }, at) => {
    const row = rows[member];
    if (row === undefined) return;
    copyCell(column, row, made, at);
    if (table.setAside[row] !== 1 || setAside[at] === 1) return;
    made.state[at] = State.setAside;
    made.value[at] = Number.NaN;
    made.sigma[at] = Number.NaN;
    made.limit[at] = Number.NaN;
    made.assumed[at] = 0;
  });
  return made;
}

function joinCorrelations(table: Table, names: ReadonlyMap<string, string>, member: number, joined: readonly Joined[]): readonly ColumnCorrelation[] {
  return table.correlations.flatMap(({ of, value }): ColumnCorrelation[] => {
    const [a, b] = [names.get(of[0]), names.get(of[1])];
    if (a === undefined || b === undefined) return [];
    return [{ of: [a, b], value: Float64Array.from(joined, ({ rows }) => (rows[member] === undefined ? 0 : (value[rows[member]] ?? 0))) }];
  });
}

function sayUnmatched(members: readonly Member[], joined: readonly Joined[], problems: Problems): void {
  members.forEach(({ handle }, member) => {
    const without = joined.filter(({ rows }) => rows[member] === undefined).map(({ sample }) => sample);
    if (without.length > 0)
      problems.note(
        "join-unmatched",
        `${handle} does not have ${counted(without.length, "sample")} that others have (${listed(without, 4)}); its values are missing there.`,
      );
  });
}
