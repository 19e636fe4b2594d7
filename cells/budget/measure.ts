import { CellError } from "../errors";
import { compileOnComposition, type OnComposition } from "../language";
import type { BodyLookup } from "../species";
import { combine, type LinearForm } from "./algebra";
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
  return {
    text,
    unit: compiled.unit,
    basis: compiled.basis,
    species: compiled.species,
    bodiesUsed: compiled.bodiesUsed,
    on: (what) => evaluateOn(compiled, what),
    isRatioOn: (what) => {
      const get = (factor: number) => (element: string) => {
        const known = what.at(element);
        return typeof known === "string" ? null : known.value * factor;
      };
      const [once, twice] = [compiled.evaluate(get(1)).value, compiled.evaluate(get(2)).value];
      return once !== null && twice !== null && Math.abs(once - twice) <= 1e-9 * Math.abs(once);
    },
  };
}

function evaluateOn(compiled: OnComposition, what: Substance): Known {
  const forms = new Map<string, LinearForm>();
  for (const element of compiled.species) {
    const known = what.at(element);
    if (typeof known === "string") return known;
    forms.set(element, known);
  }
  const { value, partials, commons, why } = compiled.evaluate((element) => forms.get(element)?.value ?? null);
  if (value === null || !Number.isFinite(value)) return why ?? "It has no value here.";
  const parts: [LinearForm, number][] = [];
  for (const [element, partial] of partials) {
    const form = forms.get(element);
    if (form !== undefined && form.terms.length > 0) parts.push([form, partial]);
  }
  for (const { variable, partial } of commons) parts.push([{ value: variable.value, terms: [{ variable, partial: 1 }] }, partial]);
  return combine(value, parts);
}
