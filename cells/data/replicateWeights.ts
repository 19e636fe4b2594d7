import type { DataBlock } from "../page/schema";
import { State } from "../quantity/state";
import type { QuantityColumn } from "../table/table";

/** One analysis among those that were merged. */
export interface ReplicateWeight {
  /** Index into the rows before they were merged. */
  readonly row: number;
  /** Its factor in the merged value; 0 where it does not count. They sum to 1 where there is a value. */
  readonly weight: number;
  /** Its part in the variance of the merged value, summing to 1; null where that has no known σ, or one of 0. */
  readonly part: number | null;
}

/**
 * How much each analysis counts in a merged value, and brings to its variance. Weighted mean: weight and part are both 1/σ² over
 * Σ 1/σ². Plain mean: 1/n, and the squared distance from the mean over the sum of them, since σ is s/√n; where all are equal,
 * σ² over Σ σ². Preferred: the one that was taken has all of both.
 *
 * @param merged place of the merged value in `to`
 */
export function replicateWeights(
  from: QuantityColumn,
  rows: readonly number[],
  rule: NonNullable<DataBlock["replicates"]>,
  to: QuantityColumn,
  merged: number,
): readonly ReplicateWeight[] {
  const present = rows.filter((row) => from.state[row] === State.present);
  const sigmaOf = (row: number): number => from.sigma[row] ?? Number.NaN;
  const isKnown = (to.sigma[merged] ?? Number.NaN) > 0;
  const only = typeof rule === "string" ? (present.length === 1 ? present[0] : undefined) : rows.find((row) => isSame(from, row, to, merged));
  if (only !== undefined) return rows.map((row) => ({ row, weight: row === only ? 1 : 0, part: isKnown ? (row === only ? 1 : 0) : null }));
  if (typeof rule !== "string" || present.length === 0) return rows.map((row) => ({ row, weight: 0, part: null }));
  const exact = present.some((row) => sigmaOf(row) === 0);
  const weightOf = (row: number): number => (exact ? (sigmaOf(row) === 0 ? 1 : 0) : sigmaOf(row) > 0 ? 1 / (sigmaOf(row) * sigmaOf(row)) : 0);
  const isWeighted = rule === "weighted" && present.some((row) => weightOf(row) > 0);
  const weights = rows.map((row) => (present.includes(row) ? (isWeighted ? weightOf(row) : 1) : 0));
  const first = from.value[present[0] ?? 0] ?? Number.NaN;
  const areEqual = present.every((row) => from.value[row] === first);
  const parts = isWeighted
    ? weights
    : rows.map((row) => {
        if (!present.includes(row)) return 0;
        const apart = areEqual ? sigmaOf(row) : (from.value[row] ?? Number.NaN) - (to.value[merged] ?? Number.NaN);
        return apart * apart;
      });
  const [total, spread] = [sumOf(weights), sumOf(parts)];
  return rows.map((row, i) => ({ row, weight: (weights[i] ?? 0) / total, part: isKnown && spread > 0 ? (parts[i] ?? 0) / spread : null }));
}

/** Whether a merged value is this analysis as it stands. */
function isSame(from: QuantityColumn, row: number, to: QuantityColumn, at: number): boolean {
  return (
    from.state[row] === to.state[at] && Object.is(from.value[row], to.value[at]) && Object.is(from.sigma[row], to.sigma[at]) && from.raw[row] === to.raw[at]
  );
}

function sumOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0);
}
