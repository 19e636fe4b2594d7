import { CellError } from "../errors";
import type { BlockContext } from "../page/context";
import type { Curve } from "../page/results";
import type { BudgetBlock } from "../page/schema";
import { readBudget, type Budget } from "./budget";
import { measureOf, type Measure } from "./measure";
import { shown } from "./plan";
import { solve } from "./solve";
import type { Substance } from "./substance";
import { amountsOf, requireRange, standsAlong, sweepOf, type Sweep } from "./sweep";

export interface BudgetTick {
  readonly x: number;
  readonly y: number;
  readonly label: string;
}

/** A budget's path on two expressions, in `units`. */
export interface BudgetCurve {
  readonly line: Curve;
  readonly ticks: readonly BudgetTick[];
  /** Where it ends: at the amount that was solved for, is fixed, or ends the range. */
  readonly end?: BudgetTick;
  /** Symbols of the units of x and y. */
  readonly units: { readonly x: string; readonly y: string };
}

/**
 * The path of a budget on two expressions: a line through its amounts (mixing comes out as the hyperbola it is), ticks at
 * round amounts, and its end. Parts of the path where an expression has no value are left out.
 *
 * @param data data block over which names in `x` and `y` stand
 * @throws CellError with a sentence where the budget has no path, or x or y has no value anywhere on it
 */
export function pathOn(block: BudgetBlock, context: BlockContext, x: string, y: string, data?: string): BudgetCurve {
  const measure = (text: string, field: string): Measure =>
    measureOf(text, { block: block.id, field }, context.bodies, (written) => context.expand(written, data));
  const [onX, onY] = [measure(x, "x"), measure(y, "y")];
  const budget = readBudget(block, context, {}, [onX, onY]);
  const { plan } = budget;
  requireRange(plan);
  const sweep = sweepOf(plan, solvedIn(block, context, budget));
  if (sweep === undefined) throw new CellError("no-path", `${block.id} has no step, so it has no path. Add one to it.`);
  const along = standsAlong(plan, sweep);
  let why: string | undefined;
  const point = (amount: number): { readonly x: number; readonly y: number } | undefined => {
    const stand = along(amount);
    if (stand === undefined) return undefined;
    const [atX, atY] = [valueOn(onX, stand), valueOn(onY, stand)];
    if (typeof atX === "string") why ??= atX;
    if (typeof atY === "string") why ??= atY;
    return typeof atX === "string" || typeof atY === "string" ? undefined : { x: atX, y: atY };
  };
  const points = amountsOf(sweep).flatMap((amount) => point(amount) ?? []);
  if (points.length === 0) throw new CellError("no-path", `The path of ${block.id} cannot be drawn on ${x.trim()} and ${y.trim()}. ${why ?? ""}`.trim());
  const deed = plan.steps[sweep.step]?.deed;
  const label = (amount: number): string => amountLabel(amount, deed?.unit ?? "1");
  const ticks = roundAmounts(sweep).flatMap((amount): BudgetTick[] => {
    const at = point(amount);
    return at === undefined ? [] : [{ ...at, label: label(amount) }];
  });
  const end = point(sweep.to);
  return {
    line: { x: Float64Array.from(points, (p) => p.x), y: Float64Array.from(points, (p) => p.y) },
    ticks,
    ...(end === undefined ? {} : { end: { ...end, label: label(Number(sweep.to.toPrecision(3))) } }),
    units: { x: onX.unit, y: onY.unit },
  };
}

function valueOn(measure: Measure, what: Substance): number | string {
  const known = measure.on(what);
  if (typeof known === "string") return known;
  return Number.isFinite(known.value) ? known.value : `${measure.text.trim()} has no value there.`;
}

/** The solved amount, from the budget's own result where it is there. */
function solvedIn(block: BudgetBlock, context: BlockContext, { plan, aim }: Budget): number | undefined {
  if (plan.varying.how !== "solve" || aim === undefined) return undefined;
  const result = context.result(block.id);
  if (result?.kind === "budget" && result.solved !== undefined) return result.solved.value;
  return solve(plan, plan.varying.step, aim).amount.value;
}

/** Round amounts between the ends of a path, about five, both ends left out where they are not round. */
export function roundAmounts({ from, to }: Sweep): number[] {
  const [low, high] = from < to ? [from, to] : [to, from];
  const step = roundStep((high - low) / 5);
  if (!(step > 0) || !Number.isFinite(step)) return [];
  const found: number[] = [];
  for (let i = Math.ceil(low / step - 1e-9); i * step <= high * (1 + 1e-12); i++) found.push(Number((i * step).toPrecision(12)));
  return found;
}

/** 1, 2 or 5 times a power of ten, the next one up. */
function roundStep(least: number): number {
  if (!(least > 0)) return 0;
  let power = 1;
  while (power * 10 <= least) power *= 10;
  while (power > least) power /= 10;
  const found = [1, 2, 5, 10].find((factor) => factor * power >= least * (1 - 1e-9)) ?? 10;
  return Number((found * power).toPrecision(12));
}

function amountLabel(amount: number, unit: string): string {
  if (unit === "1") return `${shown(amount * 100)} %`;
  return unit === "wt%" ? `${shown(amount)} wt%` : shown(amount);
}
