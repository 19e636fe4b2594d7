import { formsOf, type ReportSide } from "../budget";
import { spreadOf } from "../budget/algebra";
import type { BudgetResult, TraceNode } from "../page/results";
import type { BudgetBlock } from "../page/schema";
import type { Tracing } from "./commons";
import { formBranches } from "./forms";
import { orNull, short } from "./node";

/** Where a solved amount, or a reported expression at the end of a budget, comes from. */
export function budgetNode(tracing: Tracing, block: BudgetBlock, result: BudgetResult, name: string): TraceNode | null {
  if (name === "solved") return solvedNode(tracing, block, result);
  const left = /^left\.(?<of>.+)$/u.exec(name)?.groups?.["of"];
  if (left !== undefined && result.left !== undefined) return leftNode(tracing, result, result.left, left);
  const whole = reportNode(tracing, result, name);
  if (whole !== null) return whole;
  const side = /^(?<of>.+)\.(?<side>start|end|target|miss)$/u.exec(name)?.groups;
  if (side === undefined) return null;
  const [of, which] = [side["of"] ?? "", side["side"] ?? ""];
  return which === "start" || which === "target" || which === "miss" ? sideNode(tracing, block, result, of, which) : reportNode(tracing, result, of);
}

/** A reported expression at the start or at the target, or the miss, whose branches are of the σ that it is counted in. */
function sideNode(tracing: Tracing, block: BudgetBlock, result: BudgetResult, name: string, side: ReportSide): TraceNode | null {
  const place = placeOf(result, name);
  const report = result.report[place];
  if (report === undefined || report[side] === null) return null;
  // What was solved for misses by nothing; what rounding leaves has no shares worth telling.
  const form = side === "miss" && report.miss === 0 ? undefined : formsOf(result)?.side?.(place, side);
  const { from, notes } = form === undefined || typeof form === "string" ? { from: [], notes: [] } : formBranches(tracing, form);
  const isMiss = side === "miss";
  const sigma = side === "start" ? report.startSigma : side === "target" ? report.targetSigma : null;
  const target = targetWords(block);
  return {
    kind: "result",
    label: `${report.expression}, ${isMiss ? "miss" : `at the ${side}`}`,
    value: report[side],
    sigma,
    unit: isMiss ? "σ" : report.unit,
    ...(isMiss ? {} : { basis: report.basis }),
    share: from.some(({ share }) => share !== null) ? 1 : null,
    notes: [
      ...(isMiss && report.miss === 0 ? ["The end is at the target: this is what the budget was solved for."] : []),
      ...(isMiss && report.miss !== 0
        ? [
            `The end less the target, ${short((report.end ?? Number.NaN) - (report.target ?? Number.NaN), 4)}, over the σ of this difference, in which what both share has cancelled. The shares are of that σ.`,
          ]
        : []),
      ...(side === "target" && target !== undefined ? [`The budget's target: ${target}.`] : []),
      ...(isMiss && report.note !== undefined ? [report.note] : []),
      ...aliasNotes(result),
      ...notes,
    ],
    from,
  };
}

/** Mass or composition of what was left behind. */
function leftNode(tracing: Tracing, result: BudgetResult, left: NonNullable<BudgetResult["left"]>, of: string): TraceNode | null {
  const value = of === "mass" ? left.mass : left.composition[of];
  if (value === undefined) return null;
  const form = formsOf(result)?.left?.(of);
  const known = form === undefined || typeof form === "string" ? undefined : form;
  const spread = known === undefined ? { sigma: null, isLowerBound: false } : spreadOf(known);
  const { from, notes } = known === undefined ? { from: [], notes: [] } : formBranches(tracing, known);
  const factor = of === "mass" ? 1 : 100;
  return {
    kind: "result",
    label: of === "mass" ? `mass of ${left.what}` : `${of} of ${left.what}`,
    value: orNull(value * factor),
    sigma: spread.sigma === null ? null : spread.sigma * factor,
    unit: of === "mass" ? "kg/kg" : "wt%",
    share: spread.sigma === null || !(spread.sigma > 0) ? null : 1,
    notes: [...(spread.isLowerBound ? ["The σ is a lower bound: an input's σ is unknown."] : []), ...aliasNotes(result), ...notes],
    from,
  };
}

function placeOf(result: BudgetResult, name: string): number {
  const squeezed = name.replace(/\s+/gu, "");
  return result.report.findIndex(({ expression }) => expression.replace(/\s+/gu, "") === squeezed);
}

function solvedNode(tracing: Tracing, block: BudgetBlock, result: BudgetResult): TraceNode | null {
  const { solved } = result;
  if (solved === undefined) return null;
  const form = formsOf(result)?.solved;
  const { from, notes } = form === undefined ? { from: [], notes: [] } : formBranches(tracing, form);
  const target = targetWords(block);
  return {
    kind: "result",
    label: solved.of === "" ? "solved amount" : solved.of,
    value: orNull(solved.value),
    sigma: solved.sigma,
    unit: solved.unit,
    share: solved.sigma === null ? null : 1,
    notes: [
      ...(target === undefined ? [] : [`Solved so that ${target}.`]),
      ...(solved.sigmaIs === undefined ? [] : ["The σ is a lower bound: an input's σ is unknown."]),
      ...(result.roots.length > 1
        ? [`There are ${result.roots.length} solutions: ${result.roots.map((root) => short(root, 4)).join(", ")}; this is the smallest that can be.`]
        : []),
      ...aliasNotes(result),
      ...notes,
    ],
    from,
  };
}

function targetWords({ target }: BudgetBlock): string | undefined {
  if (target === undefined) return undefined;
  if ("trend" in target) return `the path reaches the line of ${target.trend}`;
  const { expression, equals } = target;
  if ("body" in equals) return `${expression} is that of ${equals.body}`;
  if ("data" in equals) return `${expression} is that of ${equals.sample} in ${equals.data}`;
  return `${expression} is ${equals.value} by ${equals.basis}`;
}

function reportNode(tracing: Tracing, result: BudgetResult, name: string): TraceNode | null {
  const place = placeOf(result, name);
  const report = result.report[place];
  if (report === undefined) return null;
  const form = formsOf(result)?.report[place];
  const { from, notes } = form === undefined || typeof form === "string" ? { from: [], notes: [] } : formBranches(tracing, form);
  const start =
    report.start === null ? [] : [`It was ${short(report.start, 5)}${report.startSigma === null ? "" : ` ± ${short(report.startSigma, 2)}`} at the start.`];
  const target =
    report.target === null
      ? []
      : [
          `Its target is ${short(report.target, 5)}${report.targetSigma === null ? "" : ` ± ${short(report.targetSigma, 2)}`}${report.miss === null ? "" : `, missed by ${short(report.miss, 2)}σ`}.`,
        ];
  return {
    kind: "result",
    label: report.expression,
    value: report.end,
    sigma: report.sigma,
    unit: report.unit,
    basis: report.basis,
    share: report.sigma === null ? null : 1,
    notes: [
      ...(report.note === undefined ? [] : [report.note]),
      ...start,
      ...target,
      ...(report.sigmaIs === undefined ? [] : ["The σ is a lower bound: an input's σ is unknown."]),
      ...aliasNotes(result),
      ...notes,
    ],
    from,
  };
}

function aliasNotes(result: BudgetResult): string[] {
  return Object.entries(result.bodiesUsed).flatMap(([written, id]) => (written === id ? [] : [`${written} is ${id} on this page.`]));
}
