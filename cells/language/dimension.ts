import type { Basis } from "../page/schema";
import { units, type DimensionName, type Unit } from "../quantity/unit";

/**
 * What kind of thing a value is: its dimension and the basis it counts by.
 *
 * Dimensions are exponents over the dimensions of measured quantities, so that Mg × Al / Si has one too.
 */
const measured = [
  "mass fraction",
  "amount fraction",
  "amount per mass",
  "atoms per million Si",
  "relative deviation",
  "temperature",
  "pressure",
  "density",
  "time",
  "dex",
] as const satisfies readonly DimensionName[];

export type Dimension = readonly number[];

export const dimensionless: Dimension = measured.map(() => 0);

export function dimensionOf(unit: Unit): Dimension {
  return measured.map((name) => (name === unit.dimension ? 1 : 0));
}

export function sameDimension(a: Dimension, b: Dimension): boolean {
  return a.every((exponent, i) => exponent === b[i]);
}

export function isDimensionless(a: Dimension): boolean {
  return a.every((exponent) => exponent === 0);
}

/** a + factor × b, exponent by exponent. */
export function combineDimensions(a: Dimension, b: Dimension, factor: number): Dimension {
  return a.map((exponent, i) => exponent + factor * (b[i] ?? 0));
}

export function scaleDimension(a: Dimension, factor: number): Dimension {
  return a.map((exponent) => exponent * factor);
}

const canonicalUnits: readonly Unit[] = [
  units["kg/kg"],
  units["mol%"],
  units["mol/kg"],
  units["atoms/10⁶ Si"],
  units["‰"],
  units.K,
  units.GPa,
  units["g/cm³"],
  units.Ma,
  units.dex,
];
const superscripts = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/** The unit of a value held canonically, for dimensions that no single unit has: `(kg/kg)²`, `K·(kg/kg)⁻¹`. */
export function composedSymbol(dimension: Dimension): string {
  const parts = dimension.flatMap((exponent, i) => {
    if (exponent === 0) return [];
    const symbol = i === 1 || i === 4 ? "1" : (canonicalUnits[i]?.symbol ?? "");
    const bracketed = symbol.includes("/") && (exponent !== 1 || dimension.filter((e) => e !== 0).length > 1) ? `(${symbol})` : symbol;
    return [exponent === 1 ? bracketed : bracketed + superscript(exponent)];
  });
  return parts.length === 0 ? "1" : parts.join("·");
}

function superscript(exponent: number): string {
  const text = String(Math.floor(exponent * 1000 + 0.5) / 1000);
  if (!/^-?\d+$/.test(text)) return `^${text}`;
  return [...text].map((c) => (c === "-" ? "⁻" : (superscripts[Number(c)] ?? ""))).join("");
}

/** A unit in which a value of this dimension is held as it stands; undefined where no single unit has the dimension. */
export function canonicalUnit(dimension: Dimension): Unit | undefined {
  if (isDimensionless(dimension)) return units["1"];
  return canonicalUnits.find((unit) => sameDimension(dimensionOf(unit), dimension));
}

/** In words, for the sentences of errors: "a mass fraction", "a temperature". */
export function dimensionInWords(dimension: Dimension): string {
  const place = dimension.findIndex((exponent) => exponent !== 0);
  const name = measured[place];
  if (name === undefined) return "a number without unit";
  if (dimension.filter((exponent) => exponent !== 0).length > 1 || dimension[place] !== 1) return `a quantity in ${composedSymbol(dimension)}`;
  const words: Partial<Record<DimensionName, string>> = {
    "amount fraction": "an amount fraction",
    "amount per mass": "an amount per mass",
    "atoms per million Si": "a number of atoms per 10⁶ Si",
    dex: "a logarithm in dex",
  };
  return words[name] ?? `a ${name}`;
}

/**
 * What a value counts by. `number` goes with everything (plain numbers, counts, ratios of temperatures), `none` is a ratio
 * that has no basis or does not say, `mixed` came from both.
 */
export type Counting = Basis | "formula units" | "number" | "none" | "mixed";

/** The basis as results state it. */
export function statedBasis(counting: Counting): Basis | "formula units" | null {
  return counting === "mass" || counting === "atoms" || counting === "formula units" ? counting : null;
}

/** The basis of a product or quotient. */
export function combineCounting(a: Counting, b: Counting): Counting {
  if (a === b || b === "number") return a;
  if (a === "number") return b;
  return a === "none" ? b : b === "none" ? a : "mixed";
}

/** True where two values can be added and compared as far as their basis goes. */
export function countsAlike(a: Counting, b: Counting): boolean {
  return a === b || a === "number" || b === "number";
}
