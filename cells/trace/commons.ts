import { aggregateOf, evaluateExpression, type CommonVariable } from "../language";
import type { BlockContext } from "../page/context";
import type { TraceNode, TraceRequest } from "../page/results";
import { State } from "../quantity/state";
import { units } from "../quantity/unit";
import { isFromMemory, resolveSpecies, type Candidate } from "../species";
import type { QuantityColumn } from "../table/table";
import { cellNodes } from "./cells";
import type { Aggregate } from "./leaves";
import { listSamples } from "./listSamples";
import { inUnit, orNull, scaled } from "./node";
import { sampleCells, type Pull } from "./sampleCells";

/** What a trace may ask of the page beside the tables: another number's own trace. */
export interface Tracing {
  readonly context: BlockContext;
  /** Where another number of the page comes from; null where that is not to be followed further. */
  ask(request: TraceRequest): TraceNode | null;
}

/** A number that is common to all samples: a body's value, a fit's parameter, a solved amount, a mean, a typed amount. */
export function commonNode(tracing: Tracing, variable: CommonVariable, share: number | null, aggregates: readonly Aggregate[] = []): TraceNode {
  const [sort, first, ...rest] = variable.key.split(":");
  const notes = [...(variable.notes ?? []), ...(Number.isNaN(variable.sigma) ? ["Its σ is unknown."] : [])];
  const own: TraceNode = {
    kind: "constant",
    label: variable.label,
    ...inUnit(variable.value, variable.sigma, variable.unit ?? units["1"]),
    ...(variable.basis === undefined ? {} : { basis: variable.basis }),
    share: Number.isNaN(variable.sigma) ? null : share,
    notes,
    from: [],
  };
  if (sort === "body" && first !== undefined) return bodyNode(tracing, own, first, rest.join(":"));
  if (sort === "trend" && first !== undefined) return fitNode(tracing, own, first, rest[0] ?? "");
  if (sort === "budget" && first !== undefined && rest[0] === "solved")
    return { ...own, kind: "amount", ...followed(tracing, { block: first, name: "solved" }, own) };
  if (sort === "cell" && first !== undefined) return { ...own, kind: "amount", ...cellOfKey(tracing.context, first, variable.key, own) };
  if (sort === "mean" && first !== undefined) return { ...own, kind: "aggregate", from: samplesOfClass(tracing, own, first, rest) };
  if (sort === "typed" || sort === "composition") return { ...own, kind: "amount", notes: ["Typed in the budget.", ...notes] };
  const aggregate = aggregates.find(({ name, of }) => variable.label.startsWith(`${name}(${shortened(of)})`));
  if (aggregate !== undefined) return { ...own, kind: "aggregate", from: samplesOf(tracing, aggregate, variable, own.share) };
  return own;
}

/** What a compilation gives, as its source has it, by whom, and whether anyone looked. */
function bodyNode({ context }: Tracing, own: TraceNode, id: string, species: string): TraceNode {
  const body = context.bodies(id);
  const value = body?.values.find((each) => each.species === species);
  if (body === undefined || value === undefined) return { ...own, kind: "body" };
  const notes = [
    `${body.what}: ${value.source}`,
    isFromMemory(value.checked) ? `Written down ${value.checked}; not checked against the source.` : `Checked: ${value.checked}.`,
  ];
  if (value.note !== "") notes.push(value.note);
  if (value.sigma === null) notes.push("The source gives no σ, so it is unknown.");
  const { basis: _, ...node } = own;
  return { ...node, kind: "body", value: orNull(value.value), sigma: value.sigma, unit: value.unit, notes };
}

function fitNode(tracing: Tracing, own: TraceNode, handle: string, which: string): TraceNode {
  const name = which.startsWith("crossing_") ? which.replace("_", ".") : which;
  return { ...own, kind: "fit", ...followed(tracing, { block: handle, name }, own) };
}

/** The trace of another number, its shares brought down to what it has in the asked one. */
function followed(tracing: Tracing, request: TraceRequest, own: TraceNode): Pick<TraceNode, "from" | "notes"> {
  const node = tracing.ask(request);
  if (node === null) return { from: [], notes: own.notes };
  return { from: scaled(node.from, own.share), notes: [...own.notes, ...node.notes.filter((note) => !own.notes.includes(note))] };
}

function cellOfKey(context: BlockContext, handle: string, key: string, own: TraceNode): Pick<TraceNode, "from"> {
  const result = context.result(handle);
  const table = result?.kind === "data" ? result.table : undefined;
  if (table === undefined) return { from: [] };
  for (const [row, id] of table.rowIds.entries()) {
    const start = `cell:${handle}:${id}:`;
    if (!key.startsWith(start)) continue;
    const column = table.columns.find((each): each is QuantityColumn => each.kind === "quantity" && start + each.name === key);
    if (column !== undefined) return { from: cellNodes(context, table, column, row, own.share) };
  }
  return { from: [] };
}

/** As labels of aggregates shorten what they are of. */
function shortened(text: string): string {
  const spaced = text.replace(/\s+/gu, " ");
  return spaced.length > 60 ? `${spaced.slice(0, 57)}…` : spaced;
}

/**
 * The samples that an aggregate is taken over, with the value of each and its part in the variance: of a weighted mean by its own
 * error, of least and most that of the one sample, of the others, whose σ comes from the spread, by its distance from the mean.
 */
function samplesOf({ context }: Tracing, { of, scope }: Aggregate, variable: CommonVariable, share: number | null): TraceNode[] {
  const taken = aggregateOf(variable);
  const evaluated = evaluateExpression(scope, of, { block: "" });
  const { table } = evaluated;
  if (taken === undefined || table === null || evaluated.byClass !== undefined) return [];
  const { rows, influence } = taken;
  const isByErrors = taken.name === "wmean" || taken.name === "least" || taken.name === "most";
  const inputs = evaluated.inputs;
  const weights =
    taken.name === "count"
      ? undefined
      : isByErrors
        ? Float64Array.from(rows, (row, i) => square((influence[i] ?? 0) * (evaluated.sigmaPerSample[row] ?? 0)))
        : spreadOf(Float64Array.from(rows, (row) => evaluated.value[row] ?? Number.NaN));
  return listSamples(rows.length, weights, share, (i, own) => {
    const row = rows[i] ?? 0;
    const pulls = inputs.map((input): Pull => ({ variable: input.variable, partial: input.partial[row] ?? 0 }));
    const total = isByErrors ? square(evaluated.sigmaPerSample[row] ?? Number.NaN) : null;
    return {
      kind: "result",
      label: nameOfRow(table.samples[row], table.rowIds[row]),
      value: orNull(evaluated.value[row]),
      sigma: orNull(evaluated.sigma[row]),
      unit: evaluated.unit.symbol,
      basis: evaluated.basis,
      share: own,
      notes: [],
      from: sampleCells(context, pulls, row, own, total),
    };
  });
}

/** The samples of the mean of a class that a budget starts from or adds: its σ comes from their spread. */
function samplesOfClass({ context }: Tracing, own: TraceNode, data: string, [name = "", element = ""]: readonly string[]): TraceNode[] {
  const { table } = context.scope(data);
  const resolution = table === null ? undefined : resolveSpecies(table, element);
  if (table === null || resolution?.ok !== true) return [];
  const n = Number(/ of (?<n>\d+) samples$/u.exec(own.notes.find((note) => note.startsWith("Standard error of")) ?? "")?.groups?.["n"]);
  const rows = table.classes.flatMap((of, row) => (of === name && table.setAside[row] !== 1 && resolution.state[row] === State.present ? [row] : []));
  const termsOf = (row: number): Candidate["terms"] => resolution.candidates[resolution.choice[row] ?? 0]?.terms ?? [];
  const values = Float64Array.from(rows, (row) => termsOf(row).reduce((sum, { column, factor }) => sum + factor * (column.value[row] ?? Number.NaN), 0));
  // A mean of complete cases leaves out samples that lack another element; which, its budget alone knows.
  const weights = rows.length === n ? spreadOf(values) : undefined;
  return listSamples(rows.length, weights, own.share, (i, share) => {
    const row = rows[i] ?? 0;
    return {
      kind: "result",
      label: nameOfRow(table.samples[row], table.rowIds[row]),
      ...inUnit(values[i] ?? Number.NaN, Number.NaN, resolution.unit),
      share,
      notes: [],
      from: termsOf(row).flatMap(({ column }) => cellNodes(context, table, column, row, null)),
    };
  });
}

function spreadOf(values: Float64Array): Float64Array {
  let sum = 0;
  for (const value of values) sum += value;
  const mean = sum / values.length;
  return values.map((value) => square(value - mean));
}

function square(x: number): number {
  return x * x;
}

export function nameOfRow(sample: string | undefined, row: number | string | undefined): string {
  return sample === undefined || sample === "" ? `row ${row ?? ""}` : sample;
}
