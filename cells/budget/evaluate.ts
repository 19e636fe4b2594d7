import { CellError, type Problem } from "../errors";
import type { BlockContext } from "../page/context";
import { emptyResult } from "../page/emptyResult";
import type { BudgetPathPoint, BudgetResult } from "../page/results";
import type { BudgetBlock } from "../page/schema";
import { withSimulation } from "../simulate";
import { exact, minus, significantTerms, spreadOf, type LinearForm } from "./algebra";
import { balanceOf, closureOf, leftForm, leftOf } from "./balance";
import { readBudget, type Budget } from "./budget";
import { byCompilation } from "./compilations";
import { withForms, type ReportSide } from "./forms";
import { follow, shown } from "./plan";
import { reportRow } from "./report";
import { solve, type Solution } from "./solve";
import { shareOf } from "./shares";
import { simulateBudget, type Distrust } from "./simulate";
import { both, type Stand } from "./state";
import type { Known } from "./substance";
import { amountsOf, requireRange, standsAlong, sweepOf } from "./sweep";

/**
 * A budget: the composition that its steps lead to, the amount that reaches the target with its 1σ from all inputs, every
 * reported expression beside its target, what was left, and the answer for each compilation at hand. What cannot be said is
 * null with a sentence; what is wrong is a problem in the field concerned.
 */
export function evaluateBudget(block: BudgetBlock, context: BlockContext): BudgetResult {
  const problems: Problem[] = [];
  const nothing = (): BudgetResult => emptyResult(block, problems) as BudgetResult;
  let budget: Budget;
  try {
    budget = readBudget(block, context);
  } catch (error) {
    if (!(error instanceof CellError)) throw error;
    problems.push(error.toProblem(block.id));
    return nothing();
  }
  problems.push(...budget.problems);
  const { plan, bodiesUsed } = budget;
  const attempt = endOf(budget);
  if ("error" in attempt) {
    problems.push(attempt.error.toProblem(block.id));
    const report = budget.report.map(({ text, measure }) => reportRow(text, measure, plan.start, undefined, budget.aim));
    return { ...nothing(), problems, bodiesUsed, report };
  }
  const { end, solution } = attempt;
  const distrusted = distrustedIn(block, budget, attempt);
  problems.push(...distrusted.map(({ warning }) => warning), ...notesOf(block, attempt));
  const report = budget.report.map(({ text, measure }) => reportRow(text, measure, plan.start, end, budget.aim));
  const step = plan.varying.how === "solve" ? plan.varying.step : undefined;
  const [left, closure, balance] = [leftOf(end), closureOf(end), balanceOf(end, elementsOf(budget))];
  const result = withForms(
    {
      kind: "budget",
      ok: true,
      ...(solution === undefined || step === undefined ? {} : { solved: solvedOf(budget, step, solution) }),
      roots: solution?.roots ?? [],
      report,
      ...(left === undefined ? {} : { left }),
      path: pathOf(budget, solution),
      ...(balance === undefined ? {} : { balance }),
      shares: solution === undefined ? [] : shareOf(solution.amount),
      byCompilation:
        step === undefined || solution === undefined ? [] : byCompilation(block, context, budget, step, solution.amount, fixedNames(block, context)),
      ...(closure === undefined ? {} : { closure }),
      problems,
      bodiesUsed,
    },
    {
      ...(solution === undefined ? {} : { solved: solution.amount }),
      report: budget.report.map(({ measure }) => measure?.on(end)),
      side: (at, side) => sideOf(budget, end, at, side),
      left: (of) => leftForm(end, of),
    },
  );
  return withSimulation(result, (base, wish) => simulateBudget(base, { budget, solved: solution?.amount, distrusted }, wish));
}

function sideOf({ plan, report, aim }: Budget, end: Stand, at: number, side: ReportSide): Known | undefined {
  const measure = report[at]?.measure;
  if (measure === undefined) return undefined;
  if (side === "start") return measure.on(plan.start);
  const target = aim?.of(measure);
  if (side === "target" || target === undefined) return target;
  return both(measure.on(end), target, minus);
}

interface End {
  readonly end: Stand;
  readonly solution: Solution | undefined;
}

function endOf({ plan, aim }: Budget): End | { readonly error: CellError } {
  try {
    requireRange(plan);
    const { varying } = plan;
    const solution = varying.how === "solve" && aim !== undefined ? solve(plan, varying.step, aim) : undefined;
    const amount: LinearForm = solution?.amount ?? exact(varying.how === "sweep" ? varying.to : 0);
    return { end: follow(plan, amount), solution };
  } catch (error) {
    if (error instanceof CellError) return { error };
    throw error;
  }
}

function solvedOf({ plan }: Budget, step: number, { amount }: Solution): NonNullable<BudgetResult["solved"]> {
  const deed = plan.steps[step]?.deed;
  const { sigma, isLowerBound } = spreadOf(amount);
  return { value: amount.value, sigma, ...(isLowerBound ? { sigmaIs: "lower bound" as const } : {}), unit: deed?.unit ?? "1", of: deed?.of ?? "" };
}

function pathOf({ plan, report }: Budget, solution: Solution | undefined): BudgetPathPoint[] {
  const sweep = sweepOf(plan, solution?.amount.value);
  if (sweep === undefined) return [];
  const along = standsAlong(plan, sweep);
  return amountsOf(sweep).map((amount) => {
    const stand = along(amount);
    const values = report.map(({ measure }) => {
      const known = stand === undefined ? undefined : measure?.on(stand);
      return known === undefined || typeof known === "string" || !Number.isFinite(known.value) ? null : known.value;
    });
    return { amount, values };
  });
}

/** Elements of the reported and aimed-at expressions, in order of first appearance. */
function elementsOf({ report, aim }: Budget): string[] {
  return [...new Set([...(aim?.measures ?? []), ...report.flatMap(({ measure }) => measure ?? [])].flatMap(({ species }) => species))];
}

/** Names of bodies that the trend aimed at was fitted with. */
function fixedNames({ target }: BudgetBlock, context: BlockContext): ReadonlySet<string> {
  if (target === undefined || !("trend" in target)) return new Set();
  return new Set(Object.keys(context.result(target.trend)?.bodiesUsed ?? {}));
}

/** An amount this near to the edge of what is possible, in σ, is as good as at it. */
const NEAR_LIMIT = 3;

/** Where first order cannot be trusted: what is simulated unasked. */
function distrustedIn(block: BudgetBlock, { plan, report, aim }: Budget, { end, solution }: End): Distrust[] {
  const warn = (code: string, text: string): Problem => ({ code, severity: "warning", block: block.id, text });
  const found: Distrust[] = [];
  if (solution?.isTurning === true)
    found.push({
      warning: warn("turning-point", "The path turns close to the target, within 1σ of the answer, so the amount's σ to first order is not to be trusted."),
    });
  if (solution !== undefined && plan.varying.how === "solve") {
    const limit = nearLimit(solution, plan.steps[plan.varying.step]?.deed.unit ?? "1");
    if (limit !== undefined) found.push({ warning: warn("near-limit", `${limit}, so the amount's σ to first order reaches amounts that are not possible.`) });
  }
  const measures = new Map([...report.flatMap(({ measure }) => measure ?? []), ...(aim?.measures ?? [])].map((measure) => [measure.text, measure]));
  for (const [text, measure] of measures) {
    const sharp = measure.edges(end).find(({ form, tolerated }) => (spreadOf(form).sigma ?? 0) > tolerated * Math.abs(form.value));
    if (sharp === undefined) continue;
    const sentence = `The σ of ${sharp.source} at the end is large against the value itself (over 10 % in a denominator, or 0 within 3σ in a logarithm or root), so the σ of ${text.trim()} there, which is of first order, is a rough one.`;
    found.push({ warning: warn("first-order", sentence), of: text });
  }
  return found;
}

function nearLimit({ amount, range }: Solution, unit: string): string | undefined {
  const { sigma } = spreadOf(amount);
  if (sigma === null || !(sigma > 0)) return undefined;
  const near = (limit: number): boolean => Math.abs(amount.value - limit) < NEAR_LIMIT * sigma;
  const [least, most] = [near(range.from), near(range.to)];
  const shownUnit = unit === "1" ? "" : ` ${unit}`;
  if (least && most) return `Both ends of what is possible, 0 and ${shown(range.to)}${shownUnit}, lie within ${NEAR_LIMIT}σ of the amount`;
  if (least) return `An amount of 0 lies within ${NEAR_LIMIT}σ of the answer`;
  return most ? `The most that is possible, ${shown(range.to)}${shownUnit}, lies within ${NEAR_LIMIT}σ of the amount` : undefined;
}

function notesOf(block: BudgetBlock, { solution }: End): Problem[] {
  if (solution === undefined) return [];
  const unknown = significantTerms(solution.amount).filter(({ variable }) => !(variable.sigma >= 0));
  if (unknown.length === 0) return [];
  const named = unknown.slice(0, 4).map(({ variable }) => variable.label);
  const more = unknown.length > 4 ? ` and ${unknown.length - 4} more` : "";
  const text = `The σ of ${named.join(", ")}${more} is unknown, so that of the amount is ${spreadOf(solution.amount).sigma === null ? "unknown" : "a lower bound"}.`;
  return [{ code: "unknown-sigma", severity: "note", block: block.id, text }];
}
