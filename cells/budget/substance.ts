import type { LinearForm } from "./algebra";
import { exact, plain } from "./algebra";

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

/** The same composition without its errors, each element asked for once. */
export function withoutErrors(substance: Substance): Substance {
  const known = new Map<string, Known>();
  return {
    ...substance,
    at: (element) => {
      const found = known.get(element);
      if (found !== undefined) return found;
      const value = substance.at(element);
      const made = typeof value === "string" ? value : plain(value);
      known.set(element, made);
      return made;
    },
  };
}

export const nothing: LinearForm = exact(0);

export function isKnown(known: Known): known is LinearForm {
  return typeof known !== "string";
}
