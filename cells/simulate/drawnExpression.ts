import type { ClassVariable, ColumnVariable, CommonVariable, Evaluated, Measurement, OneVariable, Variable } from "../language";
import { run } from "../language/execute";
import { Graph, nodesUnder, type Column } from "../language/graph";
import { MAX_DERIVED_NODES } from "../language/limits";
import { lower, type Program } from "../language/program";
import { State } from "../quantity/state";
import { byKey, commonNoise } from "./commonNoise";
import { columnNoise } from "./columnNoise";
import type { SimulationWish } from "./simulated";

/** Draws of the common inputs of so many classes are kept at once. */
const CLASSES_KEPT = 64;

/**
 * One expression with its inputs drawn: the graph it was calculated with, run over draws in the place of rows. Inputs are
 * normal; measured values keep their declared correlations, and what is common to all samples is drawn once a draw for all.
 */
export class DrawnExpression {
  readonly #measured: Measurement;
  readonly #columns: readonly ColumnVariable[];
  readonly #ones: readonly OneVariable[];
  readonly #classes: readonly ClassVariable[];
  /** What the program reads: for each input, and each column of states and choices, one buffer of draws. */
  readonly #buffers = new Map<number, Float64Array>();
  readonly #steady: { readonly column: Column; readonly buffer: Float64Array }[] = [];
  readonly #program: Program;
  readonly #value: Float64Array;
  readonly #state: Uint8Array;
  readonly #ofClass = new Map<number, ReadonlyMap<number, Float64Array>>();

  constructor(
    evaluated: Evaluated,
    private readonly wish: SimulationWish,
  ) {
    const { measured } = evaluated;
    this.#measured = measured;
    const { graph, model } = measured;
    const inputs = inputsOf(measured);
    this.#columns = inputs.filter((input): input is ColumnVariable => input.sort === "column").sort((a, b) => (a.column.name < b.column.name ? -1 : 1));
    this.#ones = inputs.filter((input): input is OneVariable => input.sort === "common").sort((a, b) => byKey(a.variable, b.variable));
    this.#classes = inputs.filter((input): input is ClassVariable => input.sort === "class").sort((a, b) => (labelOf(a) < labelOf(b) ? -1 : 1));
    const places = { load: new Map<number, Float64Array>(), param: new Map<number, Float64Array>() };
    for (const { node } of inputs) {
      const buffer = new Float64Array(wish.draws);
      this.#buffers.set(node, buffer);
      const { op, value } = graph.at(node);
      (op === "param" ? places.param : places.load).set(value, buffer);
    }
    const columnOf = (place: number): Column => {
      const known = places.load.get(place);
      if (known !== undefined) return known;
      const buffer = new Float64Array(wish.draws);
      places.load.set(place, buffer);
      this.#steady.push({ column: measured.columnOf(place), buffer });
      return buffer;
    };
    const drawn = new Graph(MAX_DERIVED_NODES);
    const adopt = (node: number): number => drawn.adopt(graph, node, columnOf, "", (place) => places.param.get(place));
    const asked = [adopt(model.node), adopt(model.state)];
    this.#program = lower(drawn, asked, (place) => drawn.loads[place]?.column ?? new Float64Array(wish.draws));
    this.#value = new Float64Array(wish.draws);
    this.#state = new Uint8Array(wish.draws);
  }

  /**
   * Draws of one entry's value, in the display unit: those that have one, in the order of the draws. The array is used again
   * by the next entry.
   */
  entry(index: number): Float64Array {
    for (const { column, buffer } of this.#steady) buffer.fill((column.length === 1 ? column[0] : column[index]) ?? Number.NaN);
    this.#fillColumns(index);
    this.#fillCommons(index);
    run(this.#program, this.wish.draws, [this.#value, this.#state]);
    let n = 0;
    for (let k = 0; k < this.wish.draws; k++) if (this.#state[k] === State.present) this.#value[n++] = this.#value[k] as number;
    return this.#value.subarray(0, n);
  }

  #fillColumns(row: number): void {
    const noise = columnNoise(this.#columns, row, this.wish);
    this.#columns.forEach(({ node, column }, i) => {
      const buffer = this.#buffers.get(node);
      const value = column.value[row] ?? Number.NaN;
      const own = noise[i];
      if (own === undefined) buffer?.fill(value);
      else if (buffer !== undefined) for (let k = 0; k < buffer.length; k++) buffer[k] = value + (own[k] as number);
    });
  }

  #fillCommons(index: number): void {
    if (this.#ones.length + this.#classes.length === 0) return;
    const place = this.#classPlace(index);
    let known = this.#ofClass.get(place);
    if (known === undefined) {
      known = this.#drawCommons(place);
      if (this.#ofClass.size >= CLASSES_KEPT) this.#ofClass.clear();
      this.#ofClass.set(place, known);
    }
    for (const [node, draws] of known) this.#buffers.get(node)?.set(draws);
  }

  /** Class that decides about an entry's common inputs; −1 where they are the same for all. */
  #classPlace(index: number): number {
    const [first] = this.#classes;
    if (first === undefined) return -1;
    return this.#measured.model.split === null ? (first.split.classOf[index] ?? -1) : index;
  }

  /**
   * Values of the common inputs of a class, by node. What an aggregate leans on (a body that normalised its samples) moves it
   * by its partial derivative; the partials are total ones, so each error counts once.
   */
  #drawCommons(place: number): ReadonlyMap<number, Float64Array> {
    const { graph, model } = this.#measured;
    const own = new Map<number, CommonVariable>();
    for (const { node, variable } of this.#ones) own.set(node, variable);
    for (const { node, variables } of this.#classes) {
      const variable = variables[place];
      if (variable !== undefined) own.set(node, variable);
    }
    const noise = commonNoise([...new Map([...own.values()].map((variable) => [variable.key, variable])).values()], this.wish);
    const made = new Map<number, Float64Array>();
    for (const [node, variable] of own) {
      const draws = new Float64Array(this.wish.draws).fill(variable.value);
      addTo(draws, noise.get(variable.key), 1);
      for (const { to, partial } of model.links.get(node) ?? []) {
        const leant = own.get(to);
        if (leant !== undefined) addTo(draws, noise.get(leant.key), numberOf(graph, partial, place));
      }
      made.set(node, draws);
    }
    return made;
  }
}

function addTo(draws: Float64Array, noise: Float64Array | undefined, factor: number): void {
  if (noise === undefined || factor === 0 || factor !== factor) return;
  for (let k = 0; k < draws.length; k++) draws[k] = (draws[k] as number) + factor * (noise[k] as number);
}

/** A partial derivative of an aggregate: one number, or one for each class. */
function numberOf(graph: Graph, node: number, place: number): number {
  const { op, value } = graph.at(node);
  if (op === "param") return graph.params[value] ?? 0;
  return op === "load" ? (graph.loads[value]?.column[place] ?? 0) : (graph.constantOf(node) ?? 0);
}

/** Every input that value or state stands on, by way of aggregates too, in the order of the graph. */
function inputsOf({ graph, model }: Measurement): readonly Variable[] {
  const reached = new Set<number>();
  const reach = (node: number): void => {
    if (reached.has(node)) return;
    reached.add(node);
    for (const { to } of model.links.get(node) ?? []) reach(to);
  };
  for (const node of nodesUnder(graph, [model.node, model.state])) if (model.variables.has(node)) reach(node);
  return [...reached].sort((a, b) => a - b).flatMap((node) => model.variables.get(node) ?? []);
}

function labelOf({ variables }: ClassVariable): string {
  return variables[0]?.key ?? "";
}
