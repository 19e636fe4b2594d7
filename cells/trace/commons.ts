import { evaluateExpression, type CommonVariable } from "../language";
import type { BlockContext } from "../page/context";
import type { TraceNode, TraceRequest } from "../page/results";
import { State } from "../quantity/state";
import { units } from "../quantity/unit";
import { isFromMemory } from "../species";
import type { QuantityColumn } from "../table/table";
import { cellNodes } from "./cells";
import type { Aggregate } from "./leaves";
import { inUnit, orNull, scaled } from "./node";

/** What a trace may ask of the page beside the tables: another number's own trace. */
export interface Tracing {
  readonly context: BlockContext;
  /** Where another number of the page comes from; null where that is not to be followed further. */
  ask(request: TraceRequest): TraceNode | null;
}

/** Samples of an aggregate that are listed one by one. */
const MOST_SAMPLES = 200;

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
  if (sort === "mean") return { ...own, kind: "aggregate" };
  if (sort === "typed" || sort === "composition") return { ...own, kind: "amount", notes: ["Typed in the budget.", ...notes] };
  const aggregate = aggregates.find(({ name, of }) => variable.label.startsWith(`${name}(${shortened(of)})`));
  if (aggregate !== undefined) return { ...own, kind: "aggregate", from: samplesOf(tracing, aggregate, variable.label) };
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

/** The samples that an aggregate is taken over, with the value of each. Its σ comes from their spread, so they have no shares. */
function samplesOf({ context }: Tracing, { of, scope }: Aggregate, label: string): TraceNode[] {
  const evaluated = evaluateExpression(scope, of, { block: "" });
  const { table } = evaluated;
  if (table === null || evaluated.byClass !== undefined) return [];
  const wanted = / of (?<name>.+)$/u.exec(label.slice(label.lastIndexOf(")")))?.groups?.["name"];
  const inClass = (row: number): boolean =>
    wanted === undefined || table.classes[row] === wanted || table.columns.some((column) => column.kind === "text" && column.text[row] === wanted);
  const nodes: TraceNode[] = [];
  let more = 0;
  for (let row = 0; row < table.rows; row++) {
    if (evaluated.state[row] !== State.present || table.setAside[row] === 1 || !inClass(row)) continue;
    if (nodes.length >= MOST_SAMPLES) more++;
    else
      nodes.push({
        kind: "result",
        label: nameOfRow(table.samples[row], table.rowIds[row]),
        value: orNull(evaluated.value[row]),
        sigma: orNull(evaluated.sigma[row]),
        unit: evaluated.unit.symbol,
        basis: evaluated.basis,
        share: null,
        notes: [],
        from: evaluated.inputs.flatMap(({ variable, partial }) =>
          partial[row] === 0 || !Number.isFinite(partial[row]) ? [] : cellNodes(context, variable.table, variable.column, row, null),
        ),
      });
  }
  if (more > 0) nodes.push({ kind: "aggregate", label: `${more} more samples`, value: null, sigma: null, unit: "", share: null, notes: [], from: [] });
  return nodes;
}

export function nameOfRow(sample: string | undefined, row: number | string | undefined): string {
  return sample === undefined || sample === "" ? `row ${row ?? ""}` : sample;
}
