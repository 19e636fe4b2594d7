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
  /** The branches from the asked number down to it, for opening them. */
  readonly path: ReadonlySet<TraceNode>;
}

/**
 * Follows a trace down every branch as far as shares are known, adds up what stands in several branches, and gives the largest.
 * What was summed up ("12 more samples") is no single input.
 *
 * @param of `cells` where only measurements are asked for
 * @returns null where no σ is known
 */
export function dominantOf(root: TraceNode, of: "all" | "cells" = "all"): Dominant | null {
  const found = new Map<string, { node: TraceNode; share: number; path: readonly TraceNode[] }>();
  const walk = (node: TraceNode, above: readonly TraceNode[]): void => {
    const further = node.from.filter(({ share }) => share !== null);
    if (further.length > 0) return further.forEach((each) => walk(each, [...above, node]));
    if (node.share === null || node === root) return;
    const key = keyOf(node, above.at(-1));
    const before = found.get(key);
    found.set(key, { node, share: (before?.share ?? 0) + node.share, path: before?.path ?? above });
  };
  walk(root, []);
  let best: { node: TraceNode; share: number; path: readonly TraceNode[] } | undefined;
  let inputs = 0;
  for (const each of found.values()) {
    if (each.share > 0) inputs++;
    if (isSummed(each.node) || (of === "cells" && each.node.cell === undefined) || !(each.share > (best?.share ?? 0))) continue;
    best = each;
  }
  return best === undefined
    ? null
    : { node: best.node, share: best.share, inputs, isSample: best.node.kind === "result", path: new Set([...best.path, best.node]) };
}

function isSummed(node: TraceNode): boolean {
  return node.kind === "aggregate" && node.value === null && node.from.length === 0;
}

function keyOf({ cell, kind, label, notes }: TraceNode, parent: TraceNode | undefined): string {
  if (cell !== undefined) return JSON.stringify([cell.block, cell.row, cell.column]);
  // Samples of one name in two fits are told apart by their fit and by their row's values.
  return JSON.stringify([kind, label, kind === "result" ? [parent?.label, notes[0]] : ""]);
}
