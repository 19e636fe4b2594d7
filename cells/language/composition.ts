import { CellError } from "../errors";
import type { Basis } from "../page/schema";
import { State } from "../quantity/state";
import type { BodyLookup } from "../species/body";
import { Compiler } from "./compiler";
import { partialsOf } from "./derivatives";
import { canonicalUnit, composedSymbol, statedBasis } from "./dimension";
import { placed } from "./evaluate";
import type { Frame } from "./frame";
import { run } from "./execute";
import { Graph, type Column } from "./graph";
import { MAX_DERIVED_NODES } from "./limits";
import { shownUnit } from "./meaning";
import { parse } from "./parse";
import { lower } from "./program";
import type { CommonVariable, ExpressionPlace, Scope } from "./scope";

/** An expression made ready for compositions: budgets ask for it at every point of a path. */
export interface OnComposition {
  /** Symbol of the unit of `value`. */
  readonly unit: string;
  readonly basis: Basis | "formula units" | null;
  readonly remark: string | null;
  /** Elements it needs, in order of first appearance. */
  readonly species: readonly string[];
  /** Bodies it names: alias or id as written → id of the compilation. */
  readonly bodiesUsed: Readonly<Record<string, string>>;
  /**
   * @param get mass fraction (kg/kg) of an element, null where it is not known
   * @returns the value in `unit`, with partial derivatives by element and by common variable; null, and why, where there is none
   */
  evaluate(get: (element: string) => number | null): CompositionValue;
  /**
   * Its value alone, by the same operations, where the common variables it names have other values than their own.
   *
   * @returns NaN where there is none
   */
  valueUnder(get: (element: string) => number, valueOf: (variable: CommonVariable) => number): number;
  /** Values near whose zero it turns sharply, see edges.ts. */
  edges(get: (element: string) => number | null): readonly { readonly source: string; readonly tolerated: number; readonly on: CompositionValue }[];
}

export interface CompositionValue {
  readonly value: number | null;
  readonly partials: ReadonlyMap<string, number>;
  readonly commons: readonly { readonly variable: CommonVariable; readonly partial: number }[];
  readonly why?: string;
}

/**
 * Compiles an expression such as `Mg / Si` for evaluation on one composition. Oxides are had from the elements, FeO and Fe2O3
 * standing for all iron.
 *
 * @throws CellError with its place in the field's text
 */
export function compileOnComposition(text: string, at: ExpressionPlace, bodies: BodyLookup): OnComposition {
  return placed(text, at, () => {
    const compiler = new Compiler();
    const { graph } = compiler;
    const elements = new Map<string, { readonly node: number; readonly cell: Float64Array }>();
    const composition = (element: string): number => {
      const known = elements.get(element);
      if (known !== undefined) return known.node;
      const cell = new Float64Array(1);
      const node = graph.load(cell, `composition.${element}`);
      elements.set(element, { node, cell });
      return node;
    };
    const scope: Scope = { table: null, bodies, lookup: () => undefined };
    const frame: Frame = { scope, text, on: { composition } };
    const tree = parse(text);
    const made = compiler.value(tree, frame);
    if (elements.size === 0)
      throw new CellError("not-on-composition", "This is the same on every composition. Name at least one element or oxide, as in Mg / Si.", {
        span: tree.span,
      });
    graph.raiseLimit(MAX_DERIVED_NODES);
    const unit = shownUnit(made.meaning) ?? canonicalUnit(made.meaning.dimension);
    const node = graph.mul(made.node, graph.constant(unit?.per ?? 1));
    const leaves = new Set([...elements.values()].map((element) => element.node).concat([...compiler.variables.keys()]));
    const columnOf = (place: number): Column => graph.loads[place]?.column ?? new Float64Array(1);
    const derived = (of: number, state: number): Derived => derivedProgram(compiler, [of, state], leaves, elements, columnOf);
    const state = graph.guard(made.state, node);
    const whole = derived(node, state);
    let drawn: ReturnType<typeof drawnProgram> | undefined;
    let edges: readonly { source: string; tolerated: number; derived: Derived }[] | undefined;
    return {
      unit: unit?.symbol ?? composedSymbol(made.meaning.dimension),
      basis: statedBasis(made.meaning.counting),
      remark: made.meaning.remark ?? null,
      species: [...elements.keys()],
      bodiesUsed: Object.fromEntries(compiler.uses.bodies),
      evaluate: (get) => {
        for (const [element, { cell }] of elements) {
          const fraction = get(element);
          if (fraction === null || fraction !== fraction) return { value: null, partials: new Map(), commons: [], why: `${element} is not known here.` };
          cell[0] = fraction;
        }
        const found = whole();
        if (found.value !== null) return found;
        return { ...found, why: `${text.trim()} has no value here: it divides by 0 or leaves the domain of a function.` };
      },
      valueUnder: (get, valueOf) => {
        for (const [element, { cell }] of elements) cell[0] = get(element);
        drawn ??= drawnProgram(compiler, [node, state], columnOf);
        return drawn(valueOf);
      },
      edges: (get) => {
        for (const [element, { cell }] of elements) cell[0] = get(element) ?? Number.NaN;
        edges ??= [...compiler.edges].map(([of, { source, tolerated }]) => ({ source, tolerated, derived: derived(of, graph.guard(made.state, of)) }));
        return edges.map(({ source, tolerated, derived: on }) => ({ source, tolerated, on: on() }));
      },
    };
  });
}

/** Runs with what stands in the elements' cells. */
type Derived = () => CompositionValue;

/** One node's value, with its partial derivatives by element and by common variable; null where its state is not "present". */
function derivedProgram(
  compiler: Compiler,
  [of, state]: readonly [value: number, state: number],
  leaves: ReadonlySet<number>,
  elements: ReadonlyMap<string, { readonly node: number }>,
  columnOf: (place: number) => Column,
): Derived {
  const { graph } = compiler;
  const partials = partialsOf(graph, of, leaves, compiler.links);
  const program = lower(graph, [of, state, ...partials.values()], columnOf);
  const [value, is] = [new Float64Array(1), new Uint8Array(1)];
  const results = [...partials.keys()].map(() => new Float64Array(1));
  const elementOf = new Map([...elements].map(([element, { node }]) => [node, element]));
  const found = [...partials.keys()].map((leaf, k) => {
    const variable = compiler.variables.get(leaf);
    return { k, element: elementOf.get(leaf), variable: variable?.sort === "common" ? variable.variable : undefined };
  });
  return () => {
    run(program, 1, [value, is, ...results]);
    if (is[0] !== State.present) return { value: null, partials: new Map(), commons: [] };
    const byElement = new Map<string, number>();
    const commons: { variable: CommonVariable; partial: number }[] = [];
    for (const { k, element, variable } of found) {
      const partial = results[k]?.[0] ?? 0;
      if (element !== undefined) byElement.set(element, partial);
      if (variable !== undefined) commons.push({ variable, partial });
    }
    return { value: value[0] ?? null, partials: byElement, commons };
  };
}

/** A value and its state with the common variables as inputs in the place of fixed numbers. */
function drawnProgram(
  compiler: Compiler,
  [value, state]: readonly [value: number, state: number],
  columnOf: (place: number) => Column,
): (valueOf: (variable: CommonVariable) => number) => number {
  const { graph } = compiler;
  const cells = new Map<number, { readonly variable: CommonVariable; readonly cell: Float64Array }>();
  for (const [node, variable] of compiler.variables)
    if (variable.sort === "common") cells.set(graph.at(node).value, { variable: variable.variable, cell: new Float64Array(1) });
  const drawn = new Graph(MAX_DERIVED_NODES);
  const adopt = (node: number): number => drawn.adopt(graph, node, columnOf, "", (place) => cells.get(place)?.cell);
  const asked = [adopt(value), adopt(state)];
  const program = lower(drawn, asked, (place) => drawn.loads[place]?.column ?? new Float64Array(1));
  const [at, is] = [new Float64Array(1), new Uint8Array(1)];
  return (valueOf) => {
    for (const { variable, cell } of cells.values()) cell[0] = valueOf(variable);
    run(program, 1, [at, is]);
    return is[0] === State.present ? (at[0] ?? Number.NaN) : Number.NaN;
  };
}
