import { columnOrigins } from "../data/members";
import { renormalisedOf } from "../data/renormalise";
import { replicateWeights } from "../data/replicateWeights";
import { unmergedOf } from "../data/replicates";
import type { BlockContext } from "../page/context";
import type { TraceNode } from "../page/results";
import type { DataBlock } from "../page/schema";
import { State } from "../quantity/state";
import { sigmaFromCanonical, units } from "../quantity/unit";
import { underRenormalisation } from "../species";
import type { QuantityColumn, RowOrigin, Table } from "../table/table";
import { byShare, inUnit, short } from "./node";

/**
 * One value of a table down to the cells of the sources it came from: one, or, where analyses were merged, each of them with
 * its weight and its part of the share.
 */
export function cellNodes(context: BlockContext, table: Table, column: QuantityColumn, row: number, share: number | null): TraceNode[] {
  const merging = unmergedOf(table);
  const before = merging?.table.columns.find((each): each is QuantityColumn => each.kind === "quantity" && each.name === column.name);
  const group = merging?.groups[row];
  if (merging !== undefined && before !== undefined && group !== undefined) {
    const [only] = group;
    if (group.length === 1 && only !== undefined) return cellNodes(context, merging.table, before, only, share);
    return [mergedNode(context, { ...merging, column: before, group }, { table, column, row }, share)];
  }
  const scaledFrom = beforeRenormalising(table, column, row);
  if (scaledFrom !== undefined) return [renormalisedNode(context, scaledFrom, { table, column, row }, share)];
  const origins = (table.origins[row] ?? []).filter((origin) => origin.table !== table.handle);
  const members = origins.length === 0 ? [] : membersOf(context, table, column, row);
  const [first] = members;
  if (first === undefined) return [cellNode(context, table, column, row, share)];
  if (first.rows.length === 1) return cellNodes(context, first.table, first.column, first.rows[0] ?? 0, share);
  // A join merges the analyses of a sample in each of its tables first.
  const block = context.block(table.handle);
  const rule = block?.kind === "data" ? block.replicates : undefined;
  if (rule === undefined) return [cellNode(context, table, column, row, share)];
  return [mergedNode(context, { table: first.table, column: first.column, group: first.rows, rule }, { table, column, row }, share)];
}

/** The value that a renormalised one was made from; undefined where this one is as measured. */
function beforeRenormalising(table: Table, column: QuantityColumn, row: number): (Place & { readonly factor: number }) | undefined {
  const renormalised = renormalisedOf(table);
  const factor = renormalised?.factors[row] ?? Number.NaN;
  if (renormalised === undefined || Number.isNaN(factor) || underRenormalisation(column) !== "scaled") return undefined;
  const from = renormalised.table.columns.find((each): each is QuantityColumn => each.kind === "quantity" && each.name === column.name);
  return from === undefined ? undefined : { table: renormalised.table, column: from, row, factor };
}

/** The step from what was measured to its share in the volatile-free rock. */
function renormalisedNode(context: BlockContext, from: Place & { readonly factor: number }, { column, row }: Place, share: number | null): TraceNode {
  const sum = sigmaFromCanonical(1 / from.factor, units["wt%"]);
  return {
    kind: "conversion",
    label: `${column.name} × ${short(from.factor, 6)}`,
    ...inUnit(column.value[row] ?? Number.NaN, column.sigma[row] ?? Number.NaN, column.unit),
    share,
    notes: [
      `Renormalised volatile-free: the oxides of this sample sum to ${short(sum, 6)} wt% without volatiles, and 100 over that is the factor. The error of the sum is not counted.`,
    ],
    from: cellNodes(context, from.table, from.column, from.row, share),
  };
}

/** Analyses of one sample, as they were before they became one. */
interface Merged {
  readonly table: Table;
  readonly column: QuantityColumn;
  readonly group: readonly number[];
  readonly rule: NonNullable<DataBlock["replicates"]>;
}

interface Place {
  readonly table: Table;
  readonly column: QuantityColumn;
  readonly row: number;
}

function mergedNode(context: BlockContext, { table, column, group, rule }: Merged, to: Place, share: number | null): TraceNode {
  const weights = replicateWeights(column, group, rule, to.column, to.row);
  const from = weights.flatMap(({ row, weight, part }) => {
    const nodes = cellNodes(context, table, column, row, share === null || part === null ? null : share * part);
    return nodes.map((node): TraceNode => ({ ...node, notes: [weightNote(weight), ...node.notes] }));
  });
  const counting = weights.filter(({ weight }) => weight > 0).length;
  const { cell: _, ...merged } = cellNode(context, to.table, to.column, to.row, share);
  return {
    ...merged,
    kind: "aggregate",
    label: `${to.column.name} of ${group.length} analyses`,
    notes: [...merged.notes.filter((note) => !note.startsWith("Amended")), mergedNote(rule, counting > 1)],
    from: byShare(from),
  };
}

function weightNote(weight: number): string {
  if (weight === 1) return "This analysis is the one that counts.";
  return weight > 0 ? `Counts with weight ${short(weight, 4)} in the mean.` : "Does not count here.";
}

/** The rows of a table among those that a made table is made of, that one value of it came from. */
function membersOf(
  context: BlockContext,
  made: Table,
  column: QuantityColumn,
  row: number,
): { readonly table: Table; readonly column: QuantityColumn; readonly rows: number[] }[] {
  const block = context.block(made.handle);
  const handles = block?.kind === "data" ? (block.stack ?? block.join ?? []) : [];
  const origins = new Set((made.origins[row] ?? []).map(originKey));
  return handles.flatMap((handle) => {
    const result = context.result(handle);
    const table = result?.kind === "data" ? result.table : undefined;
    const own = table === undefined ? undefined : columnIn(table, column);
    if (table === undefined || own === undefined) return [];
    const at = rowsByOrigin(table);
    const rows = [...new Set([...origins].flatMap((origin) => at.get(origin) ?? []))].filter((each) =>
      (table.origins[each] ?? []).every((origin) => origins.has(originKey(origin))),
    );
    return rows.length === 0 ? [] : [{ table, column: own, rows: rows.sort((a, b) => a - b) }];
  });
}

/** The column of a member that a column of a made table has its values from. */
function columnIn(table: Table, column: QuantityColumn): QuantityColumn | undefined {
  const quantities = table.columns.filter((each): each is QuantityColumn => each.kind === "quantity");
  if (column.sources !== undefined) {
    const names = new Set(column.sources.map((source) => JSON.stringify([source.table, source.column])));
    return quantities.find((each) => columnOrigins(table.handle, each).some((source) => names.has(JSON.stringify([source.table, source.column]))));
  }
  const alike = (each: QuantityColumn): boolean => each.species === column.species && each.unit.dimension === column.unit.dimension;
  return (
    quantities.find((each) => each.name === column.name && alike(each)) ??
    (column.species === undefined ? undefined : quantities.find((each) => alike(each))) ??
    quantities.find((each) => column.header !== undefined && each.header === column.header)
  );
}

const originKey = ({ table, row }: RowOrigin): string => JSON.stringify([table, row]);

const placesByOrigin = new WeakMap<Table, ReadonlyMap<string, readonly number[]>>();

/** Rows of a table by where they came from; made once for a table, since a mean over many samples asks for each of them. */
function rowsByOrigin(table: Table): ReadonlyMap<string, readonly number[]> {
  const known = placesByOrigin.get(table);
  if (known !== undefined) return known;
  const made = new Map<string, number[]>();
  table.origins.forEach((origins, row) => {
    for (const origin of origins) {
      const key = originKey(origin);
      const rows = made.get(key);
      if (rows === undefined) made.set(key, [row]);
      else rows.push(row);
    }
  });
  placesByOrigin.set(table, made);
  return made;
}

function mergedNote(rule: Merged["rule"], isMean: boolean): string {
  if (typeof rule !== "string") return `Of the analyses of one sample, that of ${rule.prefer.join(", else ")} is taken.`;
  if (!isMean) return "One analysis of the sample has a value that counts.";
  return rule === "weighted"
    ? "Mean of the analyses of one sample, weighted by 1/σ²; σ is 1/√Σ(1/σ²)."
    : "Plain mean of the analyses of one sample; σ is that of their spread, s/√n, and each one's share is by its distance from the mean.";
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
      sample: table.samples[row] ?? "",
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
