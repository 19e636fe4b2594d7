import type { LinearForm } from "./algebra";
import type { CommonVariable } from "../language";
import { exact } from "./algebra";

/** What is known of one element in something: its mass fraction in kg/kg, or the sentence that says why there is none. */
export type Known = LinearForm | string;

/** Something that has a composition: a body, a phase, a sample, what a step left. */
export interface Substance {
  /** As sentences name it. */
  readonly name: string;
  /** Elements it is known to hold, for listing; `at` may know others, such as those it holds none of. */
  readonly elements: readonly string[];
  at(element: string): Known;
}

/** Puts numbers without error in the place of numbers that have one: the numbers themselves, or what they are in one draw. */
export type Settle = (form: LinearForm) => LinearForm;

/** Settles every number where it lies when the inputs have other values than their own; forms of inputs are linear in them. */
export function settleAt(valueOf: (variable: CommonVariable) => number): Settle {
  return (form) => exact(form.terms.reduce((sum, { variable, partial }) => sum + partial * (valueOf(variable) - variable.value), form.value));
}

/** The same composition without its errors, each element asked for once. */
export function settled(substance: Substance, settle: Settle): Substance {
  const known = new Map<string, Known>();
  return {
    ...substance,
    at: (element) => {
      const found = known.get(element);
      if (found !== undefined) return found;
      const value = substance.at(element);
      const made = typeof value === "string" ? value : settle(value);
      known.set(element, made);
      return made;
    },
  };
}

export const nothing: LinearForm = exact(0);

export function isKnown(known: Known): known is LinearForm {
  return typeof known !== "string";
}
