/**
 * Reference compositions: what a body holds of each species, by whom, and whether anyone looked.
 */
export interface BodyValue {
  readonly species: string;
  /** As the source has it, in `unit`. */
  readonly value: number;
  readonly unit: string;
  /** 1σ in `unit`; null where the source gives none. Never 0 for "unknown". */
  readonly sigma: number | null;
  /** kg/kg for mass fractions; A(El) for solar abundances. */
  readonly canonical: number;
  readonly canonicalSigma: number | null;
  readonly source: string;
  /** Whether the value was read in a copy of the source or written down from memory. */
  readonly checked: string;
  readonly note: string;
}

export interface Body {
  /** Id of the compilation: `CI_PLJ14`. */
  readonly id: string;
  /** "CI chondrite", "bulk silicate Earth", "solar photosphere", "phase" … */
  readonly what: string;
  /** `composition`: mass fractions; `dex`: solar abundances, log10(N/N_H) + 12; `phase`: stoichiometric, exact. */
  readonly kind: "composition" | "dex" | "phase";
  readonly formula?: string;
  readonly values: readonly BodyValue[];
  /** True where any value was written down from memory. */
  readonly fromMemory: boolean;
}

/** Finds a body by an alias of the page first, then by its own id; undefined where there is none. */
export interface BodyLookup {
  (aliasOrId: string): Body | undefined;
  /** Every body that has an id here: the built-in ones in the order of their tables, then the page's own by id. */
  readonly all: readonly Body[];
}

/** How one species of a body comes about: the value used and the conversion. */
export interface BodySpecies {
  readonly body: Body;
  readonly species: string;
  /** Mass fraction in kg/kg. Of a dex body: kg per kg of hydrogen, which serves for ratios and for nothing else. */
  readonly value: number;
  /** 1σ, canonical; null where unknown, 0 only for the exact composition of a phase. */
  readonly sigma: number | null;
  /** The listed value it was made from. */
  readonly of: BodyValue;
  /** Names the conversion; "" where the species is listed as it stands. */
  readonly sentence: string;
}
