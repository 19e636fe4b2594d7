import { formsOf } from "../budget";
import type { BudgetResult, TraceNode } from "../page/results";
import type { BudgetBlock } from "../page/schema";
import type { Tracing } from "./commons";
import { formBranches } from "./forms";
import { orNull, short } from "./node";

/** Where a solved amount, or a reported expression at the end of a budget, comes from. */
export function budgetNode(tracing: Tracing, block: BudgetBlock, result: BudgetResult, name: string): TraceNode | null {
  return name === "solved" ? solvedNode(tracing, block, result) : reportNode(tracing, result, name);
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
  const squeezed = name.replace(/\s+/gu, "");
  const place = result.report.findIndex(({ expression }) => expression.replace(/\s+/gu, "") === squeezed);
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
