import type { LinearForm } from "./algebra";
import type { Known, Substance } from "./substance";

/** What a step moved out of the balance or into it. */
export interface Parcel {
  readonly what: string;
  readonly way: "left" | "taken in";
  /** kg per kg of the start. */
  readonly mass: LinearForm;
  /** What the parcel is reported as: of fractional melting the last melt. */
  readonly reported: Substance;
  /** What the parcel is made of as a whole, for balances. */
  readonly whole: Substance;
  /** Metal: what the shared species are of it. The silicate that it parted from is `1 − mass` of the whole. */
  readonly metal?: { readonly species: readonly string[]; readonly share: LinearForm };
}

/** Where a balance stands after some of its steps. */
export interface Stand extends Substance {
  /** kg per kg of the start; of the whole, once a step has shared with metal. */
  readonly mass: LinearForm;
  readonly parcels: readonly Parcel[];
}

/** Amounts a step can take, in the unit the step is written in. */
export interface Range {
  readonly from: number;
  /** Infinity where only the target limits it. */
  readonly to: number;
  /** True where `to` itself is possible. */
  readonly isClosed: boolean;
  /** Why no more than `to`. */
  readonly why: string;
}

/** A step made ready: what it does to a stand, and how much it can. */
export interface Deed {
  readonly field: string;
  /** As sentences name what the amount is of: "forsterite added". */
  readonly of: string;
  readonly unit: string;
  range(before: Stand): Range;
  /** Calculates without asking whether the amount is possible: see {@link Deed.range}. */
  apply(before: Stand, amount: LinearForm): Stand;
}

/** The element of both, or the sentence of the one that does not know it. */
export function both(a: Known, b: Known, join: (a: LinearForm, b: LinearForm) => LinearForm): Known {
  if (typeof a === "string") return a;
  return typeof b === "string" ? b : join(a, b);
}

export function elementsOfBoth(a: Substance, b: Substance): readonly string[] {
  return [...new Set([...a.elements, ...b.elements])];
}
