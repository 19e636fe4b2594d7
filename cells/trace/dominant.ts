import type { TraceNode } from "../page/results";

/** The single input that most of a number's variance comes from. */
export interface Dominant {
  /** The cell, body, amount … as it stands in the trace. */
  readonly node: TraceNode;
  /** Its share of the asked number's variance, over every branch it stands in. */
  readonly share: number;
  /** How many inputs share the variance. */
  readonly inputs: number;
  /** The sample of a fit or a mean, where the trace ends at how far that lies from the others and not at a measurement. */
  readonly isSample: boolean;
}

/**
 * Follows a trace down every branch as far as shares are known, adds up what stands in several branches, and gives the largest.
 * What was summed up ("12 more samples") is no single input.
 *
 * @returns null where no σ is known
 */
export function dominantOf(root: TraceNode): Dominant | null {
  const found = new Map<string, { node: TraceNode; share: number }>();
  const walk = (node: TraceNode, parent: TraceNode | undefined): void => {
    const further = node.from.filter(({ share }) => share !== null);
    if (further.length > 0) return further.forEach((each) => walk(each, node));
    if (node.share === null || node === root) return;
    const key = keyOf(node, parent);
    const before = found.get(key);
    found.set(key, { node, share: (before?.share ?? 0) + node.share });
  };
  walk(root, undefined);
  let best: { node: TraceNode; share: number } | undefined;
  let inputs = 0;
  for (const each of found.values()) {
    if (each.share > 0) inputs++;
    if (isSummed(each.node) || !(each.share > (best?.share ?? 0))) continue;
    best = each;
  }
  return best === undefined ? null : { ...best, inputs, isSample: best.node.kind === "result" };
}

function isSummed(node: TraceNode): boolean {
  return node.kind === "aggregate" && node.value === null && node.from.length === 0;
}

function keyOf({ cell, kind, label, notes }: TraceNode, parent: TraceNode | undefined): string {
  if (cell !== undefined) return JSON.stringify([cell.block, cell.row, cell.column]);
  // Samples of one name in two fits are told apart by their fit and by their row's values.
  return JSON.stringify([kind, label, kind === "result" ? [parent?.label, notes[0]] : ""]);
}
