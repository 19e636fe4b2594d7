import { CellError } from "../errors";
import { compileOnComposition, type CommonVariable, type CompositionValue, type OnComposition } from "../language";
import type { BodyLookup } from "../species";
import { combine, exact, type LinearForm } from "./algebra";
import type { Known, Substance } from "./substance";

/** An expression that a budget reports, aims at or is drawn on. */
export interface Measure {
  /** As it is written in the block. */
  readonly text: string;
  readonly unit: string;
  readonly basis: OnComposition["basis"];
  /** Elements it needs. */
  readonly species: readonly string[];
  readonly bodiesUsed: Readonly<Record<string, string>>;
  /** Its value on something, in `unit`, or the sentence that says why there is none. */
  on(what: Substance): Known;
  /** The same with the inputs it names itself (a body that normalises) at other values than their own, as a plain number. */
  under(valueOf: (variable: CommonVariable) => number): Measure;
  /** Its denominators and arguments of logarithms on something, each with the relative σ up to which first order holds. */
  edges(what: Substance): readonly { readonly source: string; readonly tolerated: number; readonly form: LinearForm }[];
  /** True where it is the same for a composition and twice the composition: a ratio. */
  isRatioOn(what: Substance): boolean;
}

/**
 * @param expand puts the expressions of lines in the place of their names
 * @throws CellError with the field, and with the place in the text where no line was put in
 */
export function measureOf(text: string, at: { readonly block: string; readonly field: string }, bodies: BodyLookup, expand: (text: string) => string): Measure {
  let expanded: string | undefined;
  let compiled: OnComposition;
  try {
    expanded = expand(text);
    compiled = compileOnComposition(expanded, at, bodies);
  } catch (error) {
    if (!(error instanceof CellError)) throw error;
    const { span, ...place } = error.place;
    throw new CellError(error.code, error.message, { field: at.field, ...place, ...(expanded === text && span !== undefined ? { span } : {}) });
  }
  const measure: Measure = {
    text,
    unit: compiled.unit,
    basis: compiled.basis,
    species: compiled.species,
    bodiesUsed: compiled.bodiesUsed,
    on: (what) => evaluateOn(compiled, what),
    under: (valueOf) => ({ ...measure, on: (what) => valueUnder(compiled, what, valueOf) }),
    edges: (what) => {
      const forms = formsIn(compiled, what);
      if (typeof forms === "string") return [];
      return compiled
        .edges((element) => forms.get(element)?.value ?? null)
        .map(({ source, tolerated, on }) => ({ source, tolerated, form: formOf(on, forms) }));
    },
    isRatioOn: (what) => {
      const get = (factor: number) => (element: string) => {
        const known = what.at(element);
        return typeof known === "string" ? null : known.value * factor;
      };
      const [once, twice] = [compiled.evaluate(get(1)).value, compiled.evaluate(get(2)).value];
      return once !== null && twice !== null && Math.abs(once - twice) <= 1e-9 * Math.abs(once);
    },
  };
  return measure;
}

function evaluateOn(compiled: OnComposition, what: Substance): Known {
  const forms = formsIn(compiled, what);
  if (typeof forms === "string") return forms;
  const found = compiled.evaluate((element) => forms.get(element)?.value ?? null);
  if (found.value === null || !Number.isFinite(found.value)) return found.why ?? NO_VALUE;
  return formOf(found, forms);
}

/** The elements an expression needs, or the sentence of the first that is not known. */
function formsIn(compiled: OnComposition, what: Substance): ReadonlyMap<string, LinearForm> | string {
  const forms = new Map<string, LinearForm>();
  for (const element of compiled.species) {
    const known = what.at(element);
    if (typeof known === "string") return known;
    forms.set(element, known);
  }
  return forms;
}

function formOf({ value, partials, commons }: CompositionValue, forms: ReadonlyMap<string, LinearForm>): LinearForm {
  const parts: [LinearForm, number][] = [];
  for (const [element, partial] of partials) {
    const form = forms.get(element);
    if (form !== undefined && form.terms.length > 0) parts.push([form, partial]);
  }
  for (const { variable, partial } of commons) parts.push([{ value: variable.value, terms: [{ variable, partial: 1 }] }, partial]);
  return combine(value ?? Number.NaN, parts);
}

function valueUnder(compiled: OnComposition, what: Substance, valueOf: (variable: CommonVariable) => number): Known {
  const forms = formsIn(compiled, what);
  if (typeof forms === "string") return forms;
  const value = compiled.valueUnder((element) => forms.get(element)?.value ?? Number.NaN, valueOf);
  return Number.isFinite(value) ? exact(value) : NO_VALUE;
}

const NO_VALUE = "It has no value here.";
