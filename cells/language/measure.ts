import type { ColumnVariable, CompiledValue, Variable } from "./compiled";
import type { Compiler } from "./compiler";
import { tooNearNode } from "./edges";
import { partialsOf, type Links } from "./derivatives";
import type { Column, Graph, Load } from "./graph";
import { MAX_DERIVED_NODES } from "./limits";
import { allPresent } from "./present";
import { lower } from "./program";
import { runRemembered } from "./remembered";
import { extentOf, type Over, type Split } from "./split";
import { uncertaintyNodes, type CommonPart } from "./uncertainty";

/** Numbers of one compiled expression over all rows, with what they depend on. */
export interface Measurement {
  readonly length: number;
  readonly value: Float64Array;
  readonly state: Uint8Array;
  readonly sigma: Float64Array;
  readonly sigmaPerSample: Float64Array;
  readonly sigmaCommon: Float64Array;
  readonly lowerBound: Uint8Array;
  readonly assumed: Uint8Array;
  readonly assumedCount: number;
  /** 1 where first-order propagation is not to be trusted: see edges.ts. */
  readonly nearEdge: Uint8Array;
  readonly nearEdgeCount: number;
  /** Inputs in order of first appearance. */
  readonly columns: readonly ColumnVariable[];
  readonly commons: readonly CommonPart[];
  /** Partial derivatives with respect to an input, row by row; made when first asked for. */
  partial(variable: ColumnVariable | CommonPart): Float64Array;
  /**
   * The same without what goes through other common variables: how the expression itself uses it. An aggregate leans on these,
   * as those others lean on the variable by links of their own.
   */
  directPartial(variable: CommonPart): Float64Array;
  /** The derivative as a node of `graph`, and the columns its loads stand for over these rows. */
  readonly graph: Graph;
  partialNode(variable: ColumnVariable | CommonPart): number;
  columnOf(place: number): Column;
  readonly model: Model;
}

/** The calculation itself, for those who draw its inputs anew instead of differentiating it. */
export interface Model {
  /** Node of the value in its display unit, and that of its state. */
  readonly node: number;
  readonly state: number;
  /** Every input of the whole compilation, by its node; what an aggregate leans on stands among the links. */
  readonly variables: ReadonlyMap<number, Variable>;
  readonly links: Links;
  /** Where there is one entry for each class. */
  readonly split: Split | null;
}

/**
 * Runs a compiled value over its rows. Where the state is not "present" every number is NaN.
 *
 * @param node the value to measure; `value.node` or that in another unit
 */
export function measure(compiler: Compiler, value: CompiledValue, node = value.node): Measurement {
  const { graph, variables } = compiler;
  graph.raiseLimit(MAX_DERIVED_NODES);
  const partials = partialsOf(graph, node, new Set(variables.keys()), compiler.links);
  const nodes = uncertaintyNodes(graph, partials, variables);
  const near = tooNearNode(graph, compiler.edges, variables, compiler.links);
  const length = extentOf(value.over);
  const columnOf = columnsOver(compiler, value.over);
  const state = graph.guard(value.state, node);
  const model: Model = { node, state, variables, links: compiler.links, split: value.over?.split ?? null };
  const made = calculate(
    compiler,
    {
      value: node,
      state,
      sigma: nodes.sigma,
      sigmaPerSample: nodes.sigmaPerSample,
      sigmaCommon: nodes.sigmaCommon,
      lowerBound: nodes.lowerBound,
      assumed: nodes.assumed,
      nearEdge: near,
    },
    length,
    columnOf,
  );
  blankAbsent(made, length);

  const columns: ColumnVariable[] = [];
  const commons: CommonPart[] = [];
  for (const leaf of partials.keys()) {
    const variable = variables.get(leaf);
    if (variable?.sort === "column") columns.push(variable);
    else if (variable !== undefined) commons.push(variable);
  }
  const partialNode = (variable: ColumnVariable | CommonPart): number => partials.get(variable.node) ?? graph.constant(0);
  const asCalculated = new Map<number, Float64Array>();
  const calculated = (derivative: number): Float64Array => {
    const known = asCalculated.get(derivative);
    if (known !== undefined) return known;
    const [found] = runRemembered(lower(graph, [derivative], columnOf), length, [8]) as readonly [Float64Array];
    asCalculated.set(derivative, found);
    return found;
  };
  const partial = (variable: ColumnVariable | CommonPart): Float64Array => calculated(partialNode(variable));
  let direct: ReadonlyMap<number, number> | undefined;
  const directPartial = (variable: CommonPart): Float64Array => {
    direct ??= compiler.links.size === 0 ? partials : partialsOf(graph, node, new Set(variables.keys()), new Map());
    return calculated(direct.get(variable.node) ?? graph.constant(0));
  };
  const assumedCount = graph.constantOf(nodes.assumed) === 0 ? 0 : countFlags(made.assumed);
  const nearEdgeCount = graph.constantOf(near) === 0 ? 0 : countFlags(made.nearEdge);
  return { length, ...made, assumedCount, nearEdgeCount, columns, commons, partial, directPartial, graph, partialNode, columnOf, model };
}

type Numbers = "value" | "sigma" | "sigmaPerSample" | "sigmaCommon";
type Bytes = "state" | "lowerBound" | "assumed" | "nearEdge";
const bytes: readonly string[] = ["state", "lowerBound", "assumed", "nearEdge"] satisfies Bytes[];

/** All nodes in one run: one asked for twice is calculated once, and zeros not at all. */
function calculate(
  compiler: Compiler,
  nodes: Readonly<Record<Numbers | Bytes, number>>,
  length: number,
  columnOf: (place: number) => Column,
): Record<Numbers, Float64Array> & Record<Bytes, Uint8Array> {
  const { graph } = compiler;
  const places = new Map<string, number>();
  const asked: number[] = [];
  const widths: (1 | 8)[] = [];
  for (const [name, node] of Object.entries(nodes)) {
    if (graph.constantOf(node) === 0) continue;
    const width = bytes.includes(name) ? 1 : 8;
    const known = asked.findIndex((other, i) => other === node && widths[i] === width);
    places.set(name, known < 0 ? asked.length : known);
    if (known >= 0) continue;
    asked.push(node);
    widths.push(width);
  }
  const results = asked.length === 0 ? [] : runRemembered(lower(graph, asked, columnOf), length, widths);
  const numbers = (name: Numbers): Float64Array => (results[places.get(name) ?? -1] as Float64Array | undefined) ?? new Float64Array(length);
  const flags = (name: Bytes): Uint8Array => (results[places.get(name) ?? -1] as Uint8Array | undefined) ?? new Uint8Array(length);
  return {
    value: numbers("value"),
    sigma: numbers("sigma"),
    sigmaPerSample: numbers("sigmaPerSample"),
    sigmaCommon: numbers("sigmaCommon"),
    state: flags("state"),
    lowerBound: flags("lowerBound"),
    assumed: flags("assumed"),
    nearEdge: flags("nearEdge"),
  };
}

function blankAbsent(
  made: Pick<Measurement, "value" | "state" | "sigma" | "sigmaPerSample" | "sigmaCommon" | "lowerBound" | "assumed" | "nearEdge">,
  length: number,
): void {
  const { value, state, sigma, sigmaPerSample, sigmaCommon, lowerBound, assumed, nearEdge } = made;
  if (allPresent(state)) return;
  for (let i = 0; i < length; i++) {
    if (state[i] === 0) continue;
    value[i] = Number.NaN;
    sigma[i] = Number.NaN;
    sigmaPerSample[i] = Number.NaN;
    sigmaCommon[i] = Number.NaN;
    lowerBound[i] = 0;
    assumed[i] = 0;
    nearEdge[i] = 0;
  }
}

function countFlags(flags: Uint8Array): number {
  let sum = 0;
  for (let i = 0; i < flags.length; i++) sum += flags[i] as number;
  return sum;
}

/** Loads as they run over `over`: a class's entry stands for every row of the class. */
function columnsOver(compiler: Compiler, over: Over | null): (place: number) => Column {
  return (place) => {
    const load = compiler.graph.loads[place];
    if (load === undefined) throw new RangeError(`expected a load from 0 to ${compiler.graph.loads.length - 1}, got ${place}`);
    return load.split === null || over?.split === load.split ? load.column : spread(load, load.split);
  };
}

const spreads = new WeakMap<Column, Column>();

function spread({ column }: Load, split: Split): Column {
  const known = spreads.get(column);
  if (known !== undefined) return known;
  const rows = split.classOf.length;
  const wide = column instanceof Float64Array ? new Float64Array(rows) : column instanceof Uint8Array ? new Uint8Array(rows) : new Uint16Array(rows);
  for (let row = 0; row < rows; row++) {
    const place = split.classOf[row] ?? -1;
    // A row without class has no class's value: 1 is the state "missing".
    wide[row] = place >= 0 ? (column[place] as number) : column instanceof Float64Array ? Number.NaN : 1;
  }
  spreads.set(column, wide);
  return wide;
}
