import { CellError } from "../errors";
import type { BlockContext } from "../page/context";
import type { DataResult } from "../page/results";
import type { DataBlock } from "../page/schema";
import { State } from "../quantity/state";
import type { Table } from "../table/table";
import { readAmendments } from "./amend";
import { declare } from "./declared";
import { sourceGrid, typedGrid } from "./grid";
import { joinTables } from "./join";
import { mapColumns } from "./mapColumns";
import { membersOf, type Member } from "./members";
import { Problems } from "./problems";
import { readGrid } from "./readGrid";
import { asMeasured, renormalise, renormalisedText, withMeasured } from "./renormalise";
import { mergeReplicates } from "./replicates";
import { screen } from "./screening/screen";
import { setAside } from "./setAside";
import { stackTables } from "./stack";
import { summarise } from "./summarise";

/** A table as it was made, and what was said while making it. */
interface Made {
  readonly table: Table;
  readonly proposed: boolean;
  readonly amended: number;
}

/**
 * Reads a data block: its source, typed rows, or the tables it is made of, with amendments, set-asides, assumed σ,
 * correlations and substitutions laid over it, renormalised where that is asked for, and replicates merged. Values are in canonical units, σ are 1σ and NaN where
 * unknown. Whatever is wrong is a problem with its place; a block that cannot be read at all has no table.
 *
 * @param source bytes of the block's source; undefined where they are not there, or the block has none
 */
export function evaluateData(block: DataBlock, context: BlockContext, source: Uint8Array | undefined): DataResult {
  const problems = new Problems(block.id);
  try {
    const { table: whole, proposed, amended } = make(block, context, source, problems);
    const { table, measured } = merged(block, whole, problems);
    const { flags: screening, totals } = screen(block, measured, problems, (handle) => totalsOf(context, handle));
    const aside = sum(table.setAside);
    return {
      kind: "data",
      samples: table.rows - aside,
      setAside: aside,
      valuesSetAside: valuesSetAside(whole),
      amended,
      columns: summarise(table),
      screening,
      ...(totals === undefined ? {} : { totals }),
      proposed,
      problems: problems.list(),
      bodiesUsed: {},
      table,
    };
  } catch (error) {
    if (!(error instanceof CellError)) throw error;
    return {
      kind: "data",
      samples: 0,
      setAside: 0,
      valuesSetAside: 0,
      amended: 0,
      columns: [],
      screening: [],
      proposed: block.source !== undefined && block.columns === undefined,
      problems: [error.toProblem(block.id), ...problems.list()],
      bodiesUsed: {},
    };
  }
}

/** Replicates made one row a sample, where the block asks for it, and the same of what was measured. */
function merged(block: DataBlock, whole: Table, problems: Problems): { readonly table: Table; readonly measured: Table } {
  const { replicates } = block;
  const measured = asMeasured(whole);
  if (replicates === undefined || block.join !== undefined) return { table: whole, measured };
  const table = mergeReplicates(whole, replicates, problems);
  if (table === whole || measured === whole) return { table, measured: measured === whole ? table : measured };
  const mergedMeasured = mergeReplicates(measured, replicates, new Problems(block.id));
  return { table: withMeasured(table, mergedMeasured), measured: mergedMeasured };
}

/** The range of totals that a table's own block sets. */
function totalsOf(context: BlockContext, handle: string): DataBlock["totals"] {
  const other = context.block(handle);
  return other?.kind === "data" ? other.totals : undefined;
}

function make(block: DataBlock, context: BlockContext, source: Uint8Array | undefined, problems: Problems): Made {
  if (block.stack !== undefined || block.join !== undefined) return makeOfTables(block, context, problems);
  const { grid, columns, proposed } =
    block.typed === undefined ? sourceGrid(block, source, problems) : { ...typedGrid(block, block.typed, problems), proposed: false };
  const mapping = mapColumns(grid, columns, problems);
  const { amended, count } = readAmendments(block, grid, mapping.tied, problems);
  const table = readGrid(block, grid, mapping.columns, amended, problems);
  const sampleAt = mapping.tied.find((mapped) => mapped.column.role === "sample")?.at;
  const sourceSamples = sampleAt === undefined ? [] : grid.rows.map((row) => row[sampleAt] ?? "");
  setAside(block, table, sourceSamples, problems);
  return { table: renormalise(block, declare(block, table, problems), problems), proposed, amended: count };
}

function makeOfTables(block: DataBlock, context: BlockContext, problems: Problems): Made {
  if (block.columns !== undefined && block.columns.length > 0)
    problems.error(
      "columns-of-tables",
      `${block.id} is made of other tables and has their columns; those stated here are not used. Change the columns where they are read, in the tables themselves.`,
      { field: "columns" },
    );
  if ((block.amendments ?? []).length > 0)
    problems.error(
      "amendments-of-tables",
      `${block.id} is made of other tables, so its values are amended where they are read; the amendments here are not applied. Amend them in the tables themselves.`,
      { field: "amendments" },
    );
  const members = block.stack === undefined ? membersOf(block.join ?? [], "join", context, problems) : membersOf(block.stack, "stack", context, problems);
  const made = madeOf(block, members, problems);
  const measured = members.every(({ table }) => asMeasured(table) === table)
    ? undefined
    : madeOf(
        block,
        members.map(({ handle, table }) => ({ handle, table: asMeasured(table) })),
        new Problems(block.id),
      );
  const table = renormalise(block, measured === undefined ? made : withMeasured(made, measured), problems);
  return { table, proposed: false, amended: amendedCells(table) };
}

/** Tables put together, with what the block lays over them. */
function madeOf(block: DataBlock, members: readonly Member[], problems: Problems): Table {
  const made = block.stack === undefined ? joined(block, members, problems) : stackTables(block.id, members, problems);
  setAside(block, made, [], problems);
  const renormalised = renormalisedText(members.map(({ table }) => table));
  return declare(block, renormalised === undefined ? made : { ...made, renormalised }, problems);
}

/** Replicates of a join are merged in each of its tables, before the samples are matched. */
function joined(block: DataBlock, members: readonly Member[], problems: Problems): Table {
  const { replicates } = block;
  return joinTables(
    block.id,
    replicates === undefined ? members : members.map((member) => ({ ...member, table: mergeReplicates(member.table, replicates, problems) })),
    problems,
  );
}

function sum(flags: Uint8Array): number {
  let count = 0;
  for (const flag of flags) count += flag;
  return count;
}

function amendedCells(table: Table): number {
  let count = 0;
  for (const column of table.columns) if (column.kind === "quantity") count += sum(column.amended);
  return count;
}

/** Single values set aside, of samples in use. */
function valuesSetAside(table: Table): number {
  let count = 0;
  for (const column of table.columns)
    if (column.kind === "quantity") for (let row = 0; row < table.rows; row++) if (column.state[row] === State.setAside && table.setAside[row] !== 1) count++;
  return count;
}
