import type { Basis, RowId } from "../page/schema";
import type { Unit } from "../quantity/unit";

/**
 * A data block, read: the columns that formulas are calculated over. Immutable once made.
 *
 * Numbers are in canonical units (mass fractions in kg/kg). NaN stands for "no number" inside the engine only and never
 * leaves it: JSON writes `null`.
 */
export interface Table {
  /** Handle of the data block. */
  readonly handle: string;
  /** Number of rows, those set aside included. */
  readonly rows: number;
  /** Identity of each row: 1-based row of the source, id of a typed row, or `origin` rows of a table made of tables. */
  readonly rowIds: readonly RowId[];
  /** Name of each sample, `""` where the table gives none. Not unique. */
  readonly samples: readonly string[];
  /** Class of each row, `""` where none. */
  readonly classes: readonly string[];
  /** Where each row came from, down to sources and typed rows. One entry a row, or several where rows were merged. */
  readonly origins: readonly (readonly RowOrigin[])[];
  /** 1 where the whole sample is set aside. */
  readonly setAside: Uint8Array;
  readonly columns: readonly TableColumn[];
  /** Error correlation of two columns, row by row. */
  readonly correlations: readonly ColumnCorrelation[];
  /** That values were renormalised, for the sentence every result says. */
  readonly renormalised?: string;
  /** What a declared substitution for values below detection is, for the sentence every result says. */
  readonly substitution?: { readonly fraction: number; readonly reason: string };
}

export interface RowOrigin {
  readonly table: string;
  readonly row: RowId;
}

export type TableColumn = QuantityColumn | TextColumn;

export interface TextColumn {
  readonly kind: "text";
  readonly name: string;
  readonly header?: string;
  readonly role: "sample" | "class" | "text" | "reference";
  readonly text: readonly string[];
}

export interface QuantityColumn {
  readonly kind: "quantity";
  readonly name: string;
  readonly header?: string;
  /** Header of the column the σ came from, where one did. */
  readonly sigmaHeader?: string;
  readonly species?: string;
  /** Unit the column is written in. */
  readonly unit: Unit;
  readonly basis?: Basis;
  /** Canonical values; NaN unless the state is present. */
  readonly value: Float64Array;
  /** Canonical 1σ; NaN where unknown. */
  readonly sigma: Float64Array;
  readonly state: Uint8Array;
  /** Canonical detection limit where the state is below detection and the limit is known; NaN elsewhere. */
  readonly limit: Float64Array;
  /** 1 where the σ is assumed. */
  readonly assumed: Uint8Array;
  /** The text of each cell as the source has it; amended cells keep the source's text here. */
  readonly raw: readonly string[];
  /** Text the σ was read from, `""` where none. */
  readonly rawSigma: readonly string[];
  /** 1 where an amendment replaced the source's value. */
  readonly amended: Uint8Array;
  /** In a table made of tables: the column's name in each of the tables that its rows' origins name. */
  readonly sources?: readonly ColumnOrigin[];
}

export interface ColumnOrigin {
  readonly table: string;
  readonly column: string;
}

export interface ColumnCorrelation {
  readonly of: readonly [string, string];
  readonly value: Float64Array;
}
