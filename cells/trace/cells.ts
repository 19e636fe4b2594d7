import type { BlockContext } from "../page/context";
import type { TraceNode } from "../page/results";
import type { DataBlock, RowId } from "../page/schema";
import { State } from "../quantity/state";
import { sigmaFromCanonical } from "../quantity/unit";
import type { QuantityColumn, Table } from "../table/table";
import { inUnit, short } from "./node";

/** One value of a table down to the cells of the sources it came from: one, or several where rows were merged. */
export function cellNodes(context: BlockContext, table: Table, column: QuantityColumn, row: number, share: number | null): TraceNode[] {
  const own = cellNode(context, table, column, row, share);
  const origins = (table.origins[row] ?? []).filter((origin) => origin.table !== table.handle);
  const found = origins.flatMap(({ table: handle, row: id }): TraceNode[] => {
    const origin = originOf(context, handle, id, column);
    return origin === undefined ? [] : [cellNode(context, origin.table, origin.column, origin.row, origins.length === 1 ? share : null)];
  });
  const [only] = found;
  if (found.length === 0 || only === undefined) return [own];
  if (found.length === 1) return [only];
  const { cell: _, ...merged } = own;
  return [
    {
      ...merged,
      kind: "aggregate",
      label: `${column.name} of ${found.length} analyses`,
      notes: [...own.notes, mergedNote(context, table.handle)],
      from: found,
    },
  ];
}

/** The row and column of a source that a row of a stacked or joined table came from. */
function originOf(context: BlockContext, handle: string, id: RowId, column: QuantityColumn): { table: Table; column: QuantityColumn; row: number } | undefined {
  const result = context.result(handle);
  const table = result?.kind === "data" ? result.table : undefined;
  if (table === undefined) return undefined;
  const row = table.rowIds.indexOf(id);
  const quantities = table.columns.filter((each): each is QuantityColumn => each.kind === "quantity");
  if (column.sources !== undefined) {
    const name = column.sources.find((source) => source.table === handle)?.column;
    const named = quantities.find((each) => each.name === name);
    return row < 0 || named === undefined ? undefined : { table, column: named, row };
  }
  const alike = (each: QuantityColumn): boolean => each.species === column.species && each.unit.dimension === column.unit.dimension;
  const found =
    quantities.find((each) => each.name === column.name && alike(each)) ??
    (column.species === undefined ? undefined : quantities.find((each) => alike(each))) ??
    quantities.find((each) => column.header !== undefined && each.header === column.header);
  return row < 0 || found === undefined ? undefined : { table, column: found, row };
}

function mergedNote(context: BlockContext, handle: string): string {
  const block = context.block(handle);
  const how = block?.kind === "data" ? block.replicates : undefined;
  if (how === "weighted") return "Weighted mean of the analyses of one sample.";
  if (how === "mean") return "Mean of the analyses of one sample.";
  if (how !== undefined) return `Of the analyses of one sample, that of ${how.prefer.join(", else ")} is taken.`;
  return "Put together from several rows.";
}

function cellNode(context: BlockContext, table: Table, column: QuantityColumn, row: number, share: number | null): TraceNode {
  const rowId = table.rowIds[row] ?? row + 1;
  return {
    kind: "cell",
    label: column.name,
    ...inUnit(column.value[row] ?? Number.NaN, column.sigma[row] ?? Number.NaN, column.unit),
    ...(column.basis === undefined ? {} : { basis: column.basis }),
    share,
    notes: cellNotes(context, table, column, row),
    cell: {
      block: table.handle,
      row: rowId,
      column: column.name,
      raw: column.raw[row] ?? "",
      rawSigma: column.rawSigma[row] ?? "",
      ...(column.sigmaHeader === undefined ? {} : { sigmaHeader: column.sigmaHeader }),
    },
    from: [],
  };
}

/** What happened to a cell between its source and the calculation, in words. */
export function cellNotes(context: BlockContext, table: Table, column: QuantityColumn, row: number): string[] {
  const block = context.block(table.handle);
  const data = block?.kind === "data" ? block : undefined;
  const rowId = table.rowIds[row];
  const isColumn = (name: string): boolean => name === column.name || name === column.header;
  const notes: string[] = [];
  if (column.amended[row] === 1) {
    const amendment = data?.amendments?.findLast((entry) => entry.row === rowId && isColumn(entry.column));
    notes.push(
      amendment === undefined
        ? "Amended."
        : `Amended from ${quoted(amendment.was)} to ${quoted(amendment.value)}: ${amendment.reason}${signed(amendment.by, amendment.at)}`,
    );
  }
  notes.push(...asideNotes(data, table, column, row, isColumn));
  const state = column.state[row] ?? State.missing;
  const limit = column.limit[row] ?? Number.NaN;
  const limitText = Number.isFinite(limit) ? ` (limit ${short(sigmaFromCanonical(limit, column.unit))} ${column.unit.symbol})` : "";
  if (state === State.missing) notes.push("There is no number in this cell.");
  if (state === State.belowDetection) notes.push(`Below detection${limitText}: it counts as no number, never as 0.`);
  if (state === State.present && Number.isFinite(limit) && table.substitution !== undefined)
    notes.push(`Below detection${limitText}; counted as ${short(table.substitution.fraction)} of the limit: ${table.substitution.reason}`);
  if (column.assumed[row] === 1) {
    const assumed = data?.assumed?.find((entry) => isColumn(entry.column));
    if (assumed === undefined) notes.push("Its σ is assumed.");
    else {
      const size =
        assumed.relative === undefined ? `${short(assumed.absolute ?? Number.NaN)} ${column.unit.symbol}` : `${short(assumed.relative * 100)} % of the value`;
      notes.push(`Its σ is assumed, ${size}: ${assumed.reason}${signed(assumed.by, assumed.at)}`);
    }
  } else if (state === State.present && !Number.isFinite(column.sigma[row])) notes.push("Its σ is unknown: the source gives none.");
  return notes;
}

function asideNotes(data: DataBlock | undefined, table: Table, column: QuantityColumn, row: number, isColumn: (name: string) => boolean): string[] {
  const rowId = table.rowIds[row];
  const isWhole = table.setAside[row] === 1;
  if (!isWhole && column.state[row] !== State.setAside) return [];
  const entry = data?.setAside?.find(
    (each) => each.row === rowId && (isWhole ? each.column === undefined : each.column !== undefined && isColumn(each.column)),
  );
  const what = isWhole ? "The sample is set aside" : "This value is set aside";
  return [entry === undefined ? `${what}.` : `${what}: ${entry.reason}${signed(entry.by, entry.at)}`];
}

function quoted(text: string): string {
  return text === "" ? "an empty cell" : `“${text}”`;
}

function signed(by: string | undefined, at: string | undefined): string {
  const who = [by, at].filter((part) => part !== undefined && part !== "").join(", ");
  return who === "" ? "" : ` (${who})`;
}
