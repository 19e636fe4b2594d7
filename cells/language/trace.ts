import type { Evaluated } from "./evaluated";
import type { ColumnVariable } from "./compiled";
import type { CommonVariable } from "./scope";
import { commonCovarianceOf } from "./uncertainty";

/** One input of one number, for the tree of where it comes from. */
export type TracedInput = TracedColumn | TracedCommon;

interface AnyInput {
  /** Canonical value and 1σ of the input; NaN where unknown. */
  readonly value: number;
  readonly sigma: number;
  /** How the number (in its display unit) moves with the input (in its canonical unit). */
  readonly partial: number;
  /** The input's share of the number's variance, covariances halved between their two inputs; null where no σ is known. */
  readonly share: number | null;
}

export interface TracedColumn extends AnyInput {
  readonly kind: "column";
  readonly variable: ColumnVariable;
  /** Index into the rows of the column's table. */
  readonly row: number;
}

export interface TracedCommon extends AnyInput {
  readonly kind: "common";
  readonly variable: CommonVariable;
}

export interface RowTrace {
  readonly inputs: readonly TracedInput[];
  /** Sentences of the conversions made. */
  readonly conversions: readonly string[];
  /** Lines of formula blocks that the expression went through. */
  readonly lines: readonly { readonly block: string; readonly name: string }[];
  /** Alias or id as written → id of the compilation. */
  readonly bodies: Readonly<Record<string, string>>;
}

/**
 * What one entry of a result was made from. Inputs that this entry does not depend on (the columns that another row took its
 * species from) are left out.
 *
 * @param index entry of the result; 0 where it has one only
 */
export function traceRow(evaluated: Evaluated, index: number): RowTrace {
  const row = evaluated.rows === 1 ? 0 : index;
  const sigma = evaluated.sigma[row] ?? Number.NaN;
  const variance = sigma * sigma;
  const inputs: TracedInput[] = [];
  const share = (own: number): number | null => (variance > 0 ? own / variance : null);
  const columns = evaluated.inputs.map(({ variable, partial }) => ({ variable, partial: partial[row] ?? Number.NaN }));
  const commons = evaluated.common.map(({ variable, partial }) => ({ variable, partial: partial[row] ?? Number.NaN }));
  for (const { variable, partial } of columns) {
    if (partial === 0 || partial !== partial) continue;
    const own = variable.column.sigma[row] ?? Number.NaN;
    let part = own === own ? partial * own * partial * own : 0;
    for (const other of columns) {
      if (other.variable === variable) continue;
      const rho = variable.table.correlations.find(({ of }) => of.includes(variable.column.name) && of.includes(other.variable.column.name))?.value[row] ?? 0;
      const product = rho * partial * own * other.partial * (other.variable.column.sigma[row] ?? Number.NaN);
      if (product === product) part += product;
    }
    for (const common of commons) part += crossPart(common, { variable, partial }, row);
    inputs.push({ kind: "column", variable, row, value: variable.column.value[row] ?? Number.NaN, sigma: own, partial, share: share(part) });
  }
  for (const { variable, partial } of commons) {
    if (partial === 0 || partial !== partial) continue;
    const own = variable.sigma;
    let part = own === own ? partial * own * partial * own : 0;
    for (const other of commons) {
      if (other.variable.key === variable.key) continue;
      const covariance = commonCovarianceOf(variable, other.variable);
      if (other.partial === other.partial) part += covariance * partial * other.partial;
    }
    for (const column of columns) part += crossPart({ variable, partial }, column, row);
    inputs.push({ kind: "common", variable, value: variable.value, sigma: own, partial, share: share(part) });
  }
  return { inputs, conversions: evaluated.conversions, lines: evaluated.lines, bodies: evaluated.bodiesUsed };
}

/** What a common variable and a measured value have in common, once: half of it for each. */
function crossPart(common: { variable: CommonVariable; partial: number }, column: { variable: ColumnVariable; partial: number }, row: number): number {
  const covariance = common.variable.covarianceWithColumn?.(column.variable.column);
  const product = common.partial * column.partial * (covariance?.[row] ?? 0);
  return product === product ? product : 0;
}
