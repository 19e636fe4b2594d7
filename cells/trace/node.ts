import type { TraceNode } from "../page/results";
import { fromCanonical, sigmaFromCanonical, type Unit } from "../quantity/unit";

export function orNull(value: number | undefined): number | null {
  return value === undefined || !Number.isFinite(value) ? null : value;
}

/** A canonical value with its 1σ, in a unit. */
export function inUnit(value: number, sigma: number, unit: Unit): Pick<TraceNode, "value" | "sigma" | "unit"> {
  return { value: orNull(fromCanonical(value, unit)), sigma: orNull(sigmaFromCanonical(sigma, unit)), unit: unit.symbol };
}

/** Largest share first; what has none comes last, in the order it was met. */
export function byShare(nodes: readonly TraceNode[]): TraceNode[] {
  return nodes
    .map((node, place) => ({ node, place }))
    .sort((a, b) => (b.node.share ?? -1) - (a.node.share ?? -1) || a.place - b.place)
    .map(({ node }) => node);
}

/** Shares of a part, as shares of the whole. */
export function scaled(nodes: readonly TraceNode[], factor: number | null): TraceNode[] {
  return nodes.map((node) => ({
    ...node,
    share: node.share === null || factor === null ? null : node.share * factor,
    from: scaled(node.from, factor),
  }));
}

/** "A", "A and B", "A, B and C". */
export function listed(words: readonly string[]): string {
  return words.length < 2 ? (words[0] ?? "") : `${words.slice(0, -1).join(", ")} and ${words[words.length - 1] ?? ""}`;
}

export function short(x: number, digits = 3): string {
  return String(Number(x.toPrecision(digits))).replace("-", "−");
}
