import type { TraceNode, TrendResult } from "../page/results";
import type { TrendBlock } from "../page/schema";
import { fitOf, type LinearForm } from "../trend";
import { crossing } from "../trend/crossing";
import type { Tracing } from "./commons";
import { distanceNode } from "./distance";
import { formBranches } from "./forms";
import { goodnessNode } from "./goodness";
import { orNull, short } from "./node";

/** Where a slope, an intercept or a crossing comes from: the samples of the fits, and what is common to them. */
export function trendNode(tracing: Tracing, block: TrendBlock, result: TrendResult, name: string): TraceNode | null {
  if (!result.ok) return null;
  const axis = /^crossing[._](?<axis>[xy])$/u.exec(name)?.groups?.["axis"];
  if (axis === "x" || axis === "y") return crossingNode(tracing, block, result, axis);
  if (name === "mswd" || name === "p" || name === "scatter") return goodnessNode(block, result, name);
  if (name === "covariance") return covarianceNode(tracing, block, result);
  const away = /^(?<of>crossing[._])?from_(?<body>.+)$/u.exec(name)?.groups;
  if (away !== undefined) return distanceNode(tracing, block, result, away["body"] ?? "", away["of"] === undefined ? "line" : "crossing");
  return name === "slope" || name === "intercept" ? parameterNode(tracing, block, result, name) : null;
}

function parameterNode(tracing: Tracing, block: TrendBlock, result: TrendResult, name: "slope" | "intercept"): TraceNode | null {
  const parameter = result[name];
  if (parameter === undefined) return null;
  const sigma = result.usesScatter === true ? parameter.sigmaWithScatter : parameter.sigma;
  const form = fitOf(result)?.line[name];
  const { from, notes } = form === undefined ? { from: [], notes: [] } : formBranches(tracing, form);
  return {
    kind: "result",
    label: `${name} of ${result.y.label || block.y} on ${result.x.label || block.x}`,
    value: orNull(parameter.value),
    sigma,
    unit: name === "intercept" ? result.y.unit : slopeUnit(result),
    share: sigma === null ? null : 1,
    notes: [...fitNotes(result, block), ...notes],
    from,
  };
}

/** The covariance of slope and intercept, with both of them as its branches: a variance has no variance, so nothing has a share. */
function covarianceNode(tracing: Tracing, block: TrendBlock, result: TrendResult): TraceNode | null {
  const value = result.usesScatter === true ? (result.covarianceWithScatter ?? result.covariance) : result.covariance;
  if (value === undefined) return null;
  const of = (["slope", "intercept"] as const).flatMap((name) => parameterNode(tracing, block, result, name) ?? []);
  const product = of.reduce((all, { sigma }) => all * (sigma ?? Number.NaN), 1);
  const correlation = value / product;
  return {
    kind: "result",
    label: `covariance of slope and intercept of ${block.id}`,
    value: orNull(value),
    sigma: null,
    unit: "",
    share: null,
    notes: Number.isFinite(correlation) ? [`Over the two σ it is a correlation of ${short(correlation)}.`] : [],
    from: of.map((node) => ({ ...node, share: null, notes: [], from: [] })),
  };
}

function slopeUnit(result: TrendResult): string {
  return result.x.unit === result.y.unit ? "1" : `${result.y.unit} per ${result.x.unit}`;
}

function crossingNode(tracing: Tracing, block: TrendBlock, result: TrendResult, axis: "x" | "y"): TraceNode | null {
  const found = result.crossing;
  if (found === undefined) return null;
  const { context } = tracing;
  const other = context.result(found.with);
  const [first, second] = [fitOf(result), other?.kind === "trend" ? fitOf(other) : undefined];
  const inOneUnit = first !== undefined && second !== undefined && first.x.unit.symbol === second.x.unit.symbol && first.y.unit.symbol === second.y.unit.symbol;
  const form: LinearForm | undefined = inOneUnit ? crossing(first.line, second.line)[axis] : undefined;
  const { from, notes } = form === undefined ? { from: [], notes: [] } : formBranches(tracing, form);
  const { value, sigma, sigmaIs } = found[axis];
  return {
    kind: "result",
    label: `${axis} of the crossing of ${block.id} with ${found.with}`,
    value: orNull(value),
    sigma,
    unit: result[axis].unit,
    basis: result[axis].basis,
    share: sigma === null ? null : 1,
    notes: [
      found.region === "simulated"
        ? "The σ is simulated, since the slopes differ little against their σ; the shares are those of the first-order propagation."
        : "First-order propagation with both lines' covariances and what the lines have in common.",
      ...(sigmaIs === undefined ? [] : ["The σ is a lower bound: an input's σ is unknown."]),
      ...notes,
    ],
    from,
  };
}

const methods: Readonly<Record<TrendBlock["method"], string>> = {
  york: "York et al. 2004, weighted by the errors of both axes and their correlation",
  "ordinary least squares": "ordinary least squares",
  "reduced major axis": "reduced major axis",
  "theil-sen": "Theil–Sen, the median of the slopes of all pairs",
};

function fitNotes(result: TrendResult, block: TrendBlock): string[] {
  const notes = [`Line through ${result.n} samples of ${block.data}: ${methods[result.method]}.`];
  if (block.where !== undefined && block.where.trim() !== "") notes.push(`Only where ${block.where.trim()}.`);
  for (const { row, sample, reason } of block.leaveOut ?? [])
    notes.push(`Left out: ${sample === undefined || sample === "" ? `row ${row}` : sample}: ${reason}`);
  if (result.usesScatter === true && result.p !== undefined)
    notes.push(`The samples scatter more than their errors say (p = ${short(result.p, 2)}), so the σ is the one with scatter.`);
  return notes;
}
