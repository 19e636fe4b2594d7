import type { TraceNode } from "../page/results";
import { byShare } from "./node";

/** Samples that are listed one by one; the rest is summed. */
export const MOST_SAMPLES = 200;

/**
 * Samples in the order of their parts in something, largest first, each one of the first 200 as a node, the others summed in one.
 *
 * @param weights variance that each brings, but for a common factor; undefined where they have none that is known
 * @param share what all of them have together
 */
export function listSamples(
  n: number,
  weights: Float64Array | undefined,
  share: number | null,
  make: (i: number, share: number | null) => TraceNode,
): TraceNode[] {
  let total = 0;
  for (let i = 0; i < n; i++) total += weights?.[i] ?? 0;
  const shareOf = (weight: number): number | null => (share === null || weights === undefined || !(total > 0) ? null : (share * weight) / total);
  const order = Array.from({ length: n }, (_, i) => i);
  if (weights !== undefined) order.sort((a, b) => (weights[b] ?? 0) - (weights[a] ?? 0) || a - b);
  const listed = byShare(order.slice(0, MOST_SAMPLES).map((i) => make(i, shareOf(weights?.[i] ?? 0))));
  const rest = order.slice(MOST_SAMPLES);
  if (rest.length === 0) return listed;
  const left = rest.reduce((sum, i) => sum + (weights?.[i] ?? 0), 0);
  return [
    ...listed,
    { kind: "aggregate", label: `${rest.length} more samples`, value: null, sigma: null, unit: "", share: shareOf(left), notes: [], from: [] },
  ];
}
