import type { Basis } from "../page/schema";
import { State } from "../quantity/state";
import type { Unit } from "../quantity/unit";
import type { ColumnOrigin, QuantityColumn } from "../table/table";

/** A quantity's column while it is made; nobody else has seen it yet. */
export interface DraftColumn extends QuantityColumn {
  readonly raw: string[];
  readonly rawSigma: string[];
}

export interface ColumnMeaning {
  readonly name: string;
  readonly header?: string;
  readonly sigmaHeader?: string;
  readonly species?: string;
  readonly unit: Unit;
  readonly basis?: Basis;
  readonly sources?: readonly ColumnOrigin[];
}

/** A column of that many rows in which every value is missing and every σ unknown. */
export function draftColumn(meaning: ColumnMeaning, rows: number): DraftColumn {
  const { name, header, sigmaHeader, species, unit, basis, sources } = meaning;
  return {
    kind: "quantity",
    name,
    ...(header === undefined ? {} : { header }),
    ...(sigmaHeader === undefined ? {} : { sigmaHeader }),
    ...(species === undefined ? {} : { species }),
    unit,
    ...(basis === undefined ? {} : { basis }),
    ...(sources === undefined ? {} : { sources }),
    value: new Float64Array(rows).fill(Number.NaN),
    sigma: new Float64Array(rows).fill(Number.NaN),
    state: new Uint8Array(rows).fill(State.missing),
    limit: new Float64Array(rows).fill(Number.NaN),
    assumed: new Uint8Array(rows),
    raw: new Array<string>(rows).fill(""),
    rawSigma: new Array<string>(rows).fill(""),
    amended: new Uint8Array(rows),
  };
}

/** Copies one cell of a column, with everything that belongs to it. */
export function copyCell(from: QuantityColumn, row: number, to: DraftColumn, at: number): void {
  to.value[at] = from.value[row] ?? Number.NaN;
  to.sigma[at] = from.sigma[row] ?? Number.NaN;
  to.state[at] = from.state[row] ?? State.missing;
  to.limit[at] = from.limit[row] ?? Number.NaN;
  to.assumed[at] = from.assumed[row] ?? 0;
  to.amended[at] = from.amended[row] ?? 0;
  to.raw[at] = from.raw[row] ?? "";
  to.rawSigma[at] = from.rawSigma[row] ?? "";
}

/** Whether a value stands in for one below detection, by a declared substitution: it is present, and has a limit. */
export function isSubstituted(column: QuantityColumn, row: number): boolean {
  return column.state[row] === State.present && Number.isFinite(column.limit[row] ?? Number.NaN);
}
