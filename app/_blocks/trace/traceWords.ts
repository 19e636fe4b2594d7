import { formatNumber, formatValue, withUnit, type UncertaintyForm } from "@/app/_ui/concise";
import { basisInWords, compactExpression } from "@/app/_blocks/shared/words";
import { dominantOf, type Dominant, type TraceNode, type TraceRequest } from "@/cells";

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

/** Under this share nothing can be said to dominate. */
const smallShare = 0.2;

/** What most of a number's σ comes from: one sentence, and the source cell it names. */
export interface MostOfSigma {
  readonly text: string;
  readonly cell: TraceNode["cell"];
}

/**
 * Says which input dominates the σ, with that input's own 1σ; where that is no measurement, also which measurement brings most.
 * Empty where no σ is known.
 */
export function mostOfSigma(node: TraceNode): readonly MostOfSigma[] {
  const most = dominantOf(node);
  if (most === null) return [];
  const name = inputName(most);
  const lead =
    most.inputs === 1
      ? `All of the variance comes from ${name}${ownSigma(most.node)}.`
      : most.share < smallShare
        ? `No single input dominates: of ${most.inputs}, ${name}${ownSigma(most.node)} brings most, ${shareText(most.share)} of the variance.`
        : `${shareText(most.share)} of the variance comes from ${name}${ownSigma(most.node)}.`;
  const said: MostOfSigma = { text: lead, cell: most.node.cell };
  if (most.node.cell !== undefined) return [said];
  const measured = dominantOf(node, "cells");
  if (measured === null) return [said];
  const text = `Of the measurements, ${inputName(measured)}${ownSigma(measured.node)} brings most, ${shareText(measured.share)}.`;
  return [said, { text, cell: measured.node.cell }];
}

function inputName({ node, isSample }: Dominant): string {
  if (node.cell !== undefined) return `${node.cell.column} of ${cellOwner(node.cell)}`;
  return isSample ? `where ${node.label} lies` : node.label;
}

/** The sample a cell belongs to, else its row. */
export function cellOwner(cell: NonNullable<TraceNode["cell"]>): string {
  if (cell.sample !== "") return cell.sample;
  return typeof cell.row === "number" ? `row ${cell.row} of ${cell.block}` : `a typed row of ${cell.block}`;
}

function ownSigma({ sigma, unit }: TraceNode): string {
  return sigma === null ? "" : `, 1σ ${withUnit(formatNumber(sigma, 2), unit === "1" ? "" : unit)}`;
}

const trendNames: Readonly<Record<string, string>> = {
  "crossing.x": "crossing, across",
  "crossing.y": "crossing, upwards",
  mswd: "MSWD",
  p: "p(χ²)",
  covariance: "covariance of slope and intercept",
};

/** What is asked about, as the page calls it. */
export function askedTitle({ name }: TraceRequest, node: TraceNode | null): string {
  const known = trendNames[name];
  if (known !== undefined) return known;
  if (name === "solved") return "solved amount";
  const distance = /^(?<crossing>crossing\.)?from_(?<body>.+)$/u.exec(name)?.groups;
  if (distance !== undefined) return `distance of ${distance["body"] ?? ""} from the ${distance["crossing"] === undefined ? "line" : "crossing"}`;
  // Points of plots are asked for by their place in the list, which nobody needs to read.
  if (/^\d+:/u.test(name)) return compactExpression(node?.label ?? "point");
  const left = /^left\.(?<of>.+)$/u.exec(name)?.groups?.["of"];
  if (left !== undefined) return left === "mass" ? "mass left behind" : `${left} of what was left behind`;
  const side = /^(?<of>.+)\.(?<side>start|end|target|miss)$/u.exec(name)?.groups;
  if (side !== undefined) return `${compactExpression(side["of"] ?? "")}, ${side["side"] ?? ""}`;
  return compactExpression(name);
}

/** The line that stands for branches not shown: `12 more, 8 % together`. */
export function restText(rest: readonly TraceNode[]): string {
  const share = rest.some((node) => node.share !== null) ? shareText(rest.reduce((sum, node) => sum + (node.share ?? 0), 0)) : "";
  return `${rest.length} more${share === "" ? "" : `, ${share} together`}`;
}

/** Branches shown before the rest is asked for, at the top and further down. */
const firstAtTop = 8;
const firstBelow = 5;

/** Divides branches in those shown at once and the rest; the way to what dominates is never in the rest, and one is no rest. */
export function dividedBranches(
  nodes: readonly TraceNode[],
  depth: number,
  path: ReadonlySet<TraceNode>,
): { readonly shown: readonly TraceNode[]; readonly rest: readonly TraceNode[] } {
  const most = depth === 0 ? firstAtTop : firstBelow;
  if (nodes.length <= most + 1) return { shown: nodes, rest: [] };
  const shown = nodes.filter((node, i) => i < most || path.has(node));
  return { shown, rest: nodes.filter((node) => !shown.includes(node)) };
}

/** Whether a branch shows what is under it at once: samples of fits and means do not, unless what dominates is among it. */
export function startsOpen(node: TraceNode, depth: number, path: ReadonlySet<TraceNode>): boolean {
  return depth === 0 || node.kind !== "result" || path.has(node);
}
