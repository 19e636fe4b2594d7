import { formatValue, withUnit, type UncertaintyForm } from "@/app/_ui/concise";
import { basisInWords } from "@/app/_blocks/shared/words";
import type { TraceNode } from "@/cells";

/** Width of a branch in pixels: its share of the variance, never too thin to be seen. */
export function branchWidth(share: number | null): number {
  if (share === null || !(share > 0)) return 1;
  return Math.max(1, Math.round(Math.min(1, share) * 12));
}

/** A share of the variance: `35 %`, `under 1 %`; nothing where no σ is known. */
export function shareText(share: number | null): string {
  if (share === null) return "";
  if (share > 0 && share < 0.01) return "under 1 %";
  return `${Math.round(share * 100)} %`;
}

/** A node's number with its unit; "" where it has none. */
export function nodeValue(node: TraceNode, form: UncertaintyForm): string {
  return node.value === null ? "" : withUnit(formatValue(node.value, node.sigma, { form, unknown: "" }), node.unit);
}

/** What the asked number is: basis, and what its uncertainty is. */
export function askedInWords(node: TraceNode): string {
  const basis = basisInWords(node.basis);
  const sigma = node.value === null ? "no value" : node.sigma === null ? "σ unknown" : "1σ";
  return [basis, sigma].filter((t) => t !== "").join(", ");
}

/** How a source cell is named beside its box: `row 7, MgO (wt%)`. */
export function cellInWords(cell: NonNullable<TraceNode["cell"]>): string {
  return `${typeof cell.row === "number" ? `row ${cell.row}` : "typed row"}, ${cell.column}`;
}

/** Whether any branch's width means something. */
export function hasShares(node: TraceNode): boolean {
  return node.from.some((child) => child.share !== null || hasShares(child));
}

/** Number of source cells under a node. */
export function countCells(node: TraceNode): number {
  return (node.kind === "cell" ? 1 : 0) + node.from.reduce((n, child) => n + countCells(child), 0);
}
