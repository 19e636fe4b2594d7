import type { BudgetReport } from "../page/results";
import type { Aim } from "./aim";
import { minus, spreadOf, type LinearForm } from "./algebra";
import type { Measure } from "./measure";
import { isKnown, type Known, type Substance } from "./substance";

/**
 * One reported expression at the start, at the end and at the target, and by how many σ the end misses: (end − target) over
 * the σ of that difference, in which what the two share has cancelled.
 *
 * @param end undefined where the budget has no end
 */
export function reportRow(text: string, measure: Measure | undefined, start: Substance, end: Substance | undefined, aim: Aim | undefined): BudgetReport {
  if (measure === undefined) return { ...emptyRow(text), note: "This expression cannot be read." };
  const [atStart, atEnd, atTarget] = [measure.on(start), end === undefined ? undefined : measure.on(end), aim?.of(measure)];
  const [begun, ended, wanted] = [numbers(atStart), numbers(atEnd), numbers(atTarget)];
  const miss = atEnd !== undefined && isKnown(atEnd) && atTarget !== undefined && isKnown(atTarget) ? missOf(atEnd, atTarget) : { miss: null, isMost: false };
  const why = [atEnd, atStart, atTarget].find((known) => typeof known === "string") ?? (miss.isMost ? AT_MOST : undefined);
  return {
    expression: text,
    basis: measure.basis,
    unit: measure.unit,
    start: begun.value,
    startSigma: begun.isLowerBound ? null : begun.sigma,
    end: ended.value,
    sigma: ended.sigma,
    ...(ended.isLowerBound ? { sigmaIs: "lower bound" as const } : {}),
    target: wanted.value,
    targetSigma: wanted.isLowerBound ? null : wanted.sigma,
    miss: miss.miss,
    ...(why === undefined ? {} : { note: why }),
  };
}

function emptyRow(expression: string): BudgetReport {
  const nothing = { start: null, startSigma: null, end: null, sigma: null, target: null, targetSigma: null, miss: null };
  return { expression, basis: null, unit: "1", ...nothing };
}

function numbers(known: Known | undefined): { readonly value: number | null; readonly sigma: number | null; readonly isLowerBound: boolean } {
  if (known === undefined || !isKnown(known) || !Number.isFinite(known.value)) return { value: null, sigma: null, isLowerBound: false };
  return { value: known.value, ...spreadOf(known) };
}

/** Differences below this part of the value are rounding: the end is at the target. */
const ROUNDING = 1e-10;

const AT_MOST = "The σ of an input is unknown, so it misses by this many σ at most.";

/** `isMost` where the σ of the difference is a lower bound. */
function missOf(end: LinearForm, target: LinearForm): { readonly miss: number | null; readonly isMost: boolean } {
  const difference = minus(end, target);
  if (Math.abs(difference.value) <= ROUNDING * Math.max(Math.abs(end.value), Math.abs(target.value))) return { miss: 0, isMost: false };
  const { sigma, isLowerBound } = spreadOf(difference);
  return sigma === null || !(sigma > 0) ? { miss: null, isMost: false } : { miss: difference.value / sigma, isMost: isLowerBound };
}
