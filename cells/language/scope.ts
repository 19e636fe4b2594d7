import type { Basis } from "../page/schema";
import type { Unit } from "../quantity/unit";
import type { BodyLookup } from "../species/body";
import type { QuantityColumn, Table } from "../table/table";

/**
 * A quantity that is one and the same for every sample: a body's value, a fitted slope, a budget's solved amount, the mean of
 * a column. Its error does not average out over samples, so it is kept apart from what was measured on each.
 */
export interface CommonVariable {
  /** Identity: two expressions that use the same key share its error. `body:CI_PLJ14:Mg`, `trend:t:slope` … */
  readonly key: string;
  /** As a trace names it: "Mg of CI_PLJ14". */
  readonly label: string;
  /** Canonical value. */
  readonly value: number;
  /** Canonical 1σ; NaN where unknown. */
  readonly sigma: number;
  /** Unit it is shown in; dimensionless where left out. */
  readonly unit?: Unit;
  /** Basis of a ratio; left out for what has none. */
  readonly basis?: Basis | "formula units";
  /** Canonical covariance with another common variable; 0 where they are independent. Never asked about itself. */
  readonly covarianceWith?: (other: CommonVariable) => number;
  /**
   * Canonical covariance with the measured values of a column, row by row; undefined where there is none. A fitted slope has one
   * with each sample it was fitted to.
   */
  readonly covarianceWithColumn?: (column: QuantityColumn) => Float64Array | undefined;
  /** What it leans on in turn, beside its own σ: the bodies that a fit's samples are normalised to. Canonical derivatives, direct ones only. */
  readonly leansOn?: readonly { readonly variable: CommonVariable; readonly partial: number }[];
  /** Sentences for a trace: source, checked state … */
  readonly notes?: readonly string[];
}

/** What a name outside the table means. */
export type Named =
  | NamedLine
  | { readonly kind: "common"; readonly variable: CommonVariable }
  /** A column or species of another data block: `ch.MgO`. */
  | { readonly kind: "column"; readonly table: Table; readonly name: string }
  | "ambiguous";

/** A line of a formula block. It stays an expression, so that what it shares with the expression that uses it is known. */
export interface NamedLine {
  readonly kind: "line";
  readonly block: string;
  readonly name: string;
  /** The expression alone, without `name =`. */
  readonly text: string;
  /** What names mean where the line stands. */
  readonly scope: Scope;
}

/** What names mean where an expression stands. */
export interface Scope {
  /** The table whose columns stand alone; null over bodies only. */
  readonly table: Table | null;
  readonly bodies: BodyLookup;
  /** Lines of formula blocks over the same table by name alone, and `block.name` for the rest of the page. */
  lookup(name: string, member?: string): Named | undefined;
  /** For completion: the names that `lookup` knows. */
  readonly offers?: () => readonly ScopeOffer[];
}

export interface ScopeOffer {
  /** As it is written: `mg_si`, `t.slope`. */
  readonly text: string;
  readonly kind: "line" | "common" | "column" | "body";
  readonly unit?: string;
  readonly help?: string;
}

/** Where an expression stands, for the places of errors. */
export interface ExpressionPlace {
  /** Handle of the block. */
  readonly block: string;
  /** Field of the block, where the expression is not in its `text`. */
  readonly field?: string;
  /** Where the expression begins in the field's text; 0 where left out. */
  readonly offset?: number;
}
