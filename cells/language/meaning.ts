import { CellError, type Span } from "../errors";
import { units, type Unit } from "../quantity/unit";
import {
  combineCounting,
  combineDimensions,
  countsAlike,
  dimensionInWords,
  dimensionOf,
  dimensionless,
  isDimensionless,
  sameDimension,
  scaleDimension,
  type Counting,
  type Dimension,
} from "./dimension";

/** What a value of an expression is, apart from its number. */
export interface Meaning {
  readonly dimension: Dimension;
  readonly counting: Counting;
  /** The unit of its first column, or the one a function chose. It counts where it is of the value's dimension: see {@link shownUnit}. */
  readonly shown?: Unit;
  /** True for temperatures on a scale with a zero of its own; false for differences of temperatures and everything else. */
  readonly onScale: boolean;
  /** Says what a number without basis is: "normalised to CI". */
  readonly remark?: string;
}

export const plainNumber: Meaning = { dimension: dimensionless, counting: "number", onScale: false };

export function quantityIn(unit: Unit, counting: Counting, dimension: Dimension): Meaning {
  return { dimension, counting, onScale: unit.dimension === "temperature", ...(unit.dimension === "dimensionless" ? {} : { shown: unit }) };
}

/** In words, with its article: "a ratio by mass", "a mass fraction", "a plain number". */
export function inWords(meaning: Meaning): string {
  if (!isDimensionless(meaning.dimension)) return dimensionInWords(meaning.dimension);
  switch (meaning.counting) {
    case "mass":
    case "atoms":
    case "formula units":
      return `a ratio by ${meaning.counting}`;
    case "number":
      return "a plain number";
    case "none":
      return meaning.remark ?? "a ratio that does not say whether it is by mass or by atoms";
    case "mixed":
      return "a number that mixes mass and atoms";
  }
}

/** Both sides of an operator as they are written, for its errors. */
export interface Sides {
  readonly operator: string;
  readonly at: Span;
  readonly left: string;
  readonly right: string;
  /** The left side written by atoms, where that can be said, and the right. */
  readonly byAtoms: readonly [string | undefined, string | undefined];
}

const deeds: ReadonlyMap<string, string> = new Map([
  ["+", "added"],
  ["-", "subtracted from one another"],
  ["?", "alternatives of one choice"],
]);

/**
 * Adding, subtracting and comparing: both sides must be of one dimension and one basis.
 *
 * @throws CellError `unit-mismatch` or `basis-mismatch` at the operator
 */
export function requireAlike(left: Meaning, right: Meaning, written: () => Sides): void {
  const alike = sameDimension(left.dimension, right.dimension);
  if (alike && countsAlike(left.counting, right.counting)) return;
  const sides = written();
  const deed = deeds.get(sides.operator) ?? "compared";
  const is = `${sides.left} is ${inWords(left)}, ${sides.right} ${inWords(right)}; they cannot be ${deed}.`;
  if (!alike) throw new CellError("unit-mismatch", `${is} ${unitAdvice(left, right, sides)}`, { span: sides.at });
  throw new CellError("basis-mismatch", `${is} ${basisAdvice(left, right, sides)}`, { span: sides.at });
}

function unitAdvice(left: Meaning, right: Meaning, sides: Sides): string {
  const [number, quantity] = left.counting === "number" && isDimensionless(left.dimension) ? [sides.left, right] : [sides.right, left];
  const plain = [left, right].some((m) => m.counting === "number" && isDimensionless(m.dimension));
  const unit = shownUnit(quantity);
  if (plain && unit?.dimension === "mass fraction") return `Say what ${number} is: wtpct(${number}) or ugg(${number}).`;
  if (plain && unit !== undefined) return `Say in which unit ${number} is, as in ${maker(unit)}(${number}).`;
  return "Bring both to one kind of quantity first.";
}

function maker(unit: Unit): string {
  const makers: Partial<Record<Unit["dimension"], string>> = {
    temperature: "celsius",
    pressure: "gpa",
    density: "gcm3",
    time: "ma",
    dex: "dex",
    "amount fraction": "molpct",
    "amount per mass": "molkg",
    "relative deviation": "permil",
  };
  return makers[unit.dimension] ?? "wtpct";
}

function basisAdvice(left: Meaning, right: Meaning, sides: Sides): string {
  const counts = new Set([left.counting, right.counting]);
  if (counts.has("mass") && counts.has("atoms")) {
    const rewritten = left.counting === "mass" ? sides.byAtoms[0] : sides.byAtoms[1];
    const which = left.counting === "mass" ? sides.left : sides.right;
    const advice = rewritten === undefined ? "Write both by mass, or both with atoms( )." : `By atoms, ${which} is ${rewritten}; or write both by mass.`;
    return `The two differ: forsterite's Mg/Si is 2 by atoms and 1.7308 by mass. ${advice}`;
  }
  if (counts.has("formula units"))
    return "A formula unit such as Al2O3 may hold several atoms of an element. Count both sides alike: with mol( ), with atoms( ), or both by mass.";
  if (counts.has("none")) return "State the basis of the ratio in its table, or normalise both sides to one body with norm( ).";
  return "Count both sides alike.";
}

/** The meaning of a sum or difference of alike values. */
export function sumMeaning(left: Meaning, right: Meaning, operator: "+" | "-"): Meaning {
  const shown = left.shown ?? right.shown;
  const remark = left.remark ?? right.remark;
  const onScale = operator === "+" ? left.onScale !== right.onScale : left.onScale && !right.onScale;
  const counting = left.counting === "number" ? right.counting : left.counting;
  return { dimension: left.dimension, counting, onScale, ...(shown === undefined ? {} : { shown }), ...(remark === undefined ? {} : { remark }) };
}

/** The meaning of a product (factor 1) or quotient (factor −1). */
export function productMeaning(left: Meaning, right: Meaning, factor: 1 | -1): Meaning {
  const dimension = combineDimensions(left.dimension, right.dimension, factor);
  // Temperatures, pressures and the like have no basis of their own, so a product takes the other side's.
  const counting = combineCounting(left.counting, right.counting);
  const shown = left.shown ?? right.shown;
  const remark = counting === "mixed" ? "mixes mass and atoms" : (left.remark ?? right.remark);
  return { dimension, counting, onScale: false, ...(shown === undefined ? {} : { shown }), ...(remark === undefined ? {} : { remark }) };
}

/** The meaning of x to a constant power. */
export function powerMeaning(base: Meaning, exponent: number): Meaning {
  return {
    dimension: scaleDimension(base.dimension, exponent),
    counting: base.counting,
    onScale: exponent === 1 && base.onScale,
    ...(base.shown === undefined ? {} : { shown: base.shown }),
    ...(base.remark === undefined ? {} : { remark: base.remark }),
  };
}

/** The unit a value is shown in: the one chosen, where it is of the value's dimension; K for differences of temperatures. */
export function shownUnit({ shown, dimension, onScale }: Meaning): Unit | undefined {
  if (shown === undefined || !sameDimension(dimension, dimensionOf(shown))) return undefined;
  return shown.offset !== 0 && !onScale ? units.K : shown;
}
