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
    const partials = partialsOf(graph, node, leaves, compiler.links);
    const program = lower(graph, [node, graph.guard(made.state, node), ...partials.values()], (place) => graph.loads[place]?.column ?? new Float64Array(1));
    const commons = [...partials.keys()].flatMap((leaf, k) => {
      const variable = compiler.variables.get(leaf);
      return variable?.sort === "common" ? [{ variable: variable.variable, k }] : [];
    });
    const results = [...partials.keys()].map(() => new Float64Array(1));
    const value = new Float64Array(1);
    const state = new Uint8Array(1);
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
        run(program, 1, [value, state, ...results]);
        if (state[0] !== State.present)
          return {
            value: null,
            partials: new Map(),
            commons: [],
            why: `${text.trim()} has no value here: it divides by 0 or leaves the domain of a function.`,
          };
        const byElement = new Map<string, number>();
        [...partials.keys()].forEach((leaf, k) => {
          for (const [element, { node: own }] of elements) if (own === leaf) byElement.set(element, results[k]?.[0] ?? 0);
        });
        return { value: value[0] ?? null, partials: byElement, commons: commons.map(({ variable, k }) => ({ variable, partial: results[k]?.[0] ?? 0 })) };
      },
    };
  });
}
