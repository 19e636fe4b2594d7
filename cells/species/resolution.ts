import type { Basis, RowId } from "../page/schema";
import type { Unit } from "../quantity/unit";
import type { QuantityColumn } from "../table/table";

/**
 * What a name means over a table: `Mg` may be the column Mg, or MgO × 0.603, or either, row by row.
 *
 * The value of row i is the sum over the chosen candidate's terms of factor × column.value[i], in canonical units; its state
 * is `state[i]`. `choice[i]` is an index into `candidates`, always valid, also where the state is not "present" (it then
 * points at the candidate whose state is reported).
 */
export interface Resolved {
  readonly ok: true;
  readonly name: string;
  /** Species the name stands for; left out for columns that have none (temperatures, ages, ready-made ratios). */
  readonly species?: string;
  /** Unit of the first candidate's first column: the one a result is shown in. Its dimension is that of the value. */
  readonly unit: Unit;
  /** Basis of a ready-made ratio. */
  readonly basis?: Basis;
  readonly candidates: readonly Candidate[];
  readonly choice: Uint16Array;
  /** State of each row; the rows of a sample set aside have that state. */
  readonly state: Uint8Array;
  readonly warnings: readonly ResolutionWarning[];
}

export interface Candidate {
  readonly terms: readonly Term[];
  /** True where this is one column taken as it stands. */
  readonly asItStands: boolean;
  /** Names the conversion: "Mg = MgO × 0.603042"; for a column as it stands, its name alone. */
  readonly sentence: string;
}

export interface Term {
  readonly column: QuantityColumn;
  /** Place of the column among the table's columns. */
  readonly index: number;
  /** Canonical value of the name per canonical value of the column. */
  readonly factor: number;
}

export interface ResolutionWarning {
  readonly code: "species-disagree" | "iron-untold";
  readonly text: string;
  readonly row?: RowId;
  readonly column?: string;
}

/** The name stands for something the table has, but not in a way that gives a number: `text` says why and what to do. */
export interface Refused {
  readonly ok: false;
  readonly name: string;
  readonly code: "iron-untold" | "iron-part-only" | "iron-total-only" | "species-unit";
  readonly column?: string;
  readonly text: string;
}

export type Resolution = Resolved | Refused;
