import { impossibleCorrelations } from "./impossibleCorrelations";
import type { DataBlock } from "../page/schema";
import { State } from "../quantity/state";
import { sigmaToCanonical } from "../quantity/unit";
import type { ColumnCorrelation, QuantityColumn, Table } from "../table/table";
import { columnsNamed } from "./amend";
import { isSubstituted } from "./draft";
import { counted, type Problems } from "./problems";

/**
 * What people declare over a whole table: a substitution for values below detection, σ where the source gives none, and error
 * correlations. The columns' arrays are changed in place, so they must be this table's own.
 */
export function declare(block: DataBlock, table: Table, problems: Problems): Table {
  const substitution = substitute(block, table, problems);
  assume(block, table, problems);
  const correlations = correlate(block, table, problems);
  return { ...table, correlations: [...table.correlations, ...correlations], ...(substitution === undefined ? {} : { substitution }) };
}

/** Puts the declared fraction of its limit for each value below detection; the limit stays, and marks it. */
function substitute(block: DataBlock, table: Table, problems: Problems): Table["substitution"] {
  const declared = block.substitute;
  if (declared === undefined) return undefined;
  if (declared.fraction === 0) {
    problems.error(
      "substitute-zero",
      "Values below detection would become 0, which is a number nobody measured. They stay below detection; declare a fraction of the limit above 0.",
      { field: "substitute" },
    );
    return undefined;
  }
  let substituted = 0;
  let without = 0;
  for (const column of quantities(table))
    for (let row = 0; row < table.rows; row++) {
      if (column.state[row] !== State.belowDetection) continue;
      const limit = column.limit[row] ?? Number.NaN;
      if (!Number.isFinite(limit)) {
        without++;
        continue;
      }
      column.value[row] = declared.fraction * limit;
      column.state[row] = State.present;
      substituted++;
    }
  const rest = without === 0 ? "" : ` ${counted(without, "value")} without a limit ${without === 1 ? "stays" : "stay"} below detection.`;
  problems.note(
    "substitution",
    `${counted(substituted, "value")} below detection ${substituted === 1 ? "counts" : "count"} as ${declared.fraction} of the limit, with unknown σ: ${declared.reason}.${rest}`,
    { field: "substitute" },
  );
  const before = table.substitution;
  const also = before === undefined ? "" : `; in the tables this is made of they count as ${before.fraction} of it: ${before.reason}`;
  return { fraction: declared.fraction, reason: `${declared.reason}${also}` };
}

function quantities(table: Table): readonly QuantityColumn[] {
  return table.columns.filter((column): column is QuantityColumn => column.kind === "quantity");
}

/** Assumes σ where none is given, counts and marks them. A σ that is given is never replaced. */
function assume(block: DataBlock, table: Table, problems: Problems): void {
  const seen = new Map<QuantityColumn, number>();
  const entries = block.assumed ?? [];
  const found = entries.map((entry, index) => {
    const place = { column: entry.column, field: `assumed[${index}]` };
    const named = columnsNamed(table.columns, entry.column);
    const [column] = named;
    if (column === undefined || named.length > 1 || column.kind !== "quantity") {
      const why = column === undefined ? "no column has that name" : named.length > 1 ? `${named.length} columns have that name` : "it holds words";
      problems.error("assumed-column", `A σ is assumed for "${entry.column}", but ${why}. Nothing is assumed; choose a column of a quantity.`, place);
      return undefined;
    }
    seen.set(column, (seen.get(column) ?? 0) + 1);
    return { column, entry, place };
  });
  const said = new Set<QuantityColumn>();
  for (const each of found) {
    if (each === undefined) continue;
    const { column, entry, place } = each;
    if ((seen.get(column) ?? 0) > 1) {
      if (!said.has(column))
        problems.error("assumed-twice", `Two σ are assumed for ${column.name}, and nothing says which counts. None is; take one of them back.`, place);
      said.add(column);
      continue;
    }
    const absolute = entry.absolute === undefined ? undefined : sigmaToCanonical(entry.absolute, column.unit);
    let zeros = 0;
    for (let row = 0; row < table.rows; row++) {
      if (column.state[row] !== State.present || !Number.isNaN(column.sigma[row] ?? 0) || isSubstituted(column, row)) continue;
      const sigma = absolute ?? (entry.relative ?? Number.NaN) * Math.abs((column.value[row] ?? Number.NaN) - column.unit.offset);
      if (sigma === 0) {
        zeros++;
        continue;
      }
      column.sigma[row] = sigma;
      column.assumed[row] = 1;
    }
    if (zeros > 0)
      problems.warning(
        "assumed-of-zero",
        `A relative σ says nothing of a value of 0; ${counted(zeros, "value")} of ${column.name} ${zeros === 1 ? "keeps" : "keep"} an unknown σ. Assume an absolute one.`,
        place,
      );
  }
}

function correlate(block: DataBlock, table: Table, problems: Problems): readonly ColumnCorrelation[] {
  const found = readCorrelations(block, table, problems);
  sayImpossible([...table.correlations, ...found], table, problems);
  return found;
}

function readCorrelations(block: DataBlock, table: Table, problems: Problems): readonly ColumnCorrelation[] {
  const found: ColumnCorrelation[] = [];
  (block.correlations ?? []).forEach((entry, index) => {
    const [a, b] = entry.of;
    const place = { field: `correlations[${index}]` };
    const refuse = (why: string): void =>
      problems.error("correlation", `The correlation of "${a}" and "${b}" cannot be used: ${why}. It counts as 0 until this is mended.`, place);
    const [x, y] = [columnsNamed(table.columns, a), columnsNamed(table.columns, b)];
    const [first, second] = [x[0], y[0]];
    if (first === undefined || second === undefined) return refuse(`no column has the name "${first === undefined ? a : b}"`);
    if (x.length > 1 || y.length > 1) return refuse("a name stands for several columns");
    if (first.kind !== "quantity" || second.kind !== "quantity") return refuse("both must be columns of quantities");
    if (first === second) return refuse("it is one and the same column");
    const known = [...table.correlations, ...found].some(({ of }) => of.includes(first.name) && of.includes(second.name));
    if (known) return refuse("it is declared already");
    if (typeof entry.value === "number") {
      found.push({ of: [first.name, second.name], value: new Float64Array(table.rows).fill(entry.value) });
      return;
    }
    const named = columnsNamed(table.columns, entry.value);
    const [column] = named;
    if (column === undefined || named.length > 1) return refuse(`${named.length === 0 ? "no column has" : "several columns have"} the name "${entry.value}"`);
    if (column.kind !== "quantity" || column.unit.dimension !== "dimensionless") return refuse(`"${entry.value}" must be a column of plain numbers (unit 1)`);
    found.push({ of: [first.name, second.name], value: correlationsOf(column, first, second, table, problems) });
  });
  return found;
}

/** Errors of three columns and more cannot correlate in every way: ρ of 0.9, 0.9 and −0.9 would give some sum a variance below 0. */
function sayImpossible(correlations: readonly ColumnCorrelation[], table: Table, problems: Problems): void {
  const { columns, rows } = impossibleCorrelations(correlations, table.rows);
  const [first] = rows;
  if (first === undefined) return;
  const all = rows.length === table.rows ? "in every row" : `in ${counted(rows.length, "row")}, first in row ${table.rowIds[first] ?? first + 1}`;
  problems.error(
    "correlations-impossible",
    `The correlations declared between ${columns.join(", ")} cannot all hold together (${all}): their matrix is not positive definite, so some sums and ratios would have a variance below 0, which counts as 0. Check signs and sizes, or declare fewer of them.`,
    { field: "correlations" },
  );
}

/** Row by row out of a column; rows of which it says nothing count as uncorrelated, and are counted. */
function correlationsOf(column: QuantityColumn, a: QuantityColumn, b: QuantityColumn, table: Table, problems: Problems): Float64Array {
  let unknown = 0;
  const value = Float64Array.from({ length: table.rows }, (_, row) => {
    const rho = column.state[row] === State.present ? (column.value[row] ?? Number.NaN) : Number.NaN;
    if (Number.isNaN(rho)) {
      if (a.state[row] === State.present && b.state[row] === State.present) unknown++;
      return 0;
    }
    if (Math.abs(rho) <= 1) return rho;
    const id = table.rowIds[row] ?? row + 1;
    problems.oneOfMany(
      "error",
      "correlation-range",
      `Row ${id}, ${column.name}: ${rho} is no correlation, which lies between −1 and 1. The row counts as uncorrelated; amend it.`,
      { row: id, column: column.name },
      `more rows of ${column.name} are no correlations`,
    );
    return 0;
  });
  if (unknown > 0)
    problems.warning(
      "correlation-unknown",
      `${counted(unknown, "row")} give ${a.name} and ${b.name} but no correlation in ${column.name}; they count as uncorrelated.`,
      { column: column.name },
    );
  return value;
}
