import { CellError } from "../errors";
import type { Aim } from "./aim";
import { combine, exact, spreadOf, type LinearForm } from "./algebra";
import { follow, shown, type Plan } from "./plan";
import { findRoots, type Found } from "./roots";
import type { Deed, Range } from "./state";
import { isKnown } from "./substance";

/** The amount that reaches the target. */
export interface Solution {
  /** With its dependence on every input. */
  readonly amount: LinearForm;
  /** All amounts that reach it, ascending. */
  readonly roots: readonly number[];
  /** True where the path turns within 1σ of the answer, so that σ to first order is not to be trusted. */
  readonly isTurning: boolean;
  /** Amounts that are possible. */
  readonly range: Range;
}

/**
 * Solves for the amount of the step that varies: all roots in the step's physical range, of which the smallest is taken. How
 * it depends on the inputs p follows by implicit differentiation of G(x, p) = 0: dx/dp = −(∂G/∂p)/(∂G/∂x).
 *
 * @throws CellError `no-physical-solution` where no possible amount reaches the target, with what there is in its place
 */
export function solve(plan: Plan, step: number, aim: Aim): Solution {
  const { found, range, deed, gapAt } = rootsOf(plan, step, aim);
  const [root] = found.roots;
  if (root === undefined) throw noSolution(plan, deed, aim, found, range.to, gapAt(true));
  const { amount, isTurning } = implicit(plan, aim, root, gapAt(true));
  return { amount, roots: found.roots, isTurning, range };
}

/** All amounts that reach the target, and where they were looked for. @throws CellError where a step before cannot be done */
export function rootsOf(plan: Plan, step: number, aim: Aim): Roots {
  const quick = plan.plain ?? plan;
  const deed = quick.steps[step]?.deed;
  if (deed === undefined) throw new RangeError(`expected a step from 0 to ${quick.steps.length - 1}, got ${step}`);
  // Also says what is wrong with the steps before.
  const range = deed.range(follow(quick, exact(0), false, step));
  const gapAt =
    (unchecked: boolean) =>
    (x: number): number => {
      try {
        return aim.plainGap(follow(quick, exact(x), unchecked));
      } catch (error) {
        if (error instanceof CellError) return Number.NaN;
        throw error;
      }
    };
  return { found: findRoots(gapAt(false), range.from, range.to, aim.scale), range, deed, gapAt };
}

/** Points between the least possible amount and an answer at which the path is looked at for an earlier one. */
const LOOKS = 8;
/** Steps of the secant method; it doubles its digits with every two. */
const STEPS = 30;

/**
 * The smallest amount that reaches the target, where another is known that lies close to it: the secant method from there,
 * and a look at the path before it. Everything is searched where that does not settle it. Undefined where there is none.
 *
 * @param guess an amount near the answer
 * @throws CellError where a step before cannot be done
 */
export function rootNear(plan: Plan, step: number, aim: Aim, guess: number): number | undefined {
  const quick = plan.plain ?? plan;
  const range = quick.steps[step]?.deed.range(follow(quick, exact(0), false, step));
  const gap = (x: number): number => {
    try {
      return aim.plainGap(follow(quick, exact(x)));
    } catch (error) {
      if (error instanceof CellError) return Number.NaN;
      throw error;
    }
  };
  const root = range === undefined ? undefined : secant(gap, guess, range);
  if (root === undefined || range === undefined) return rootsOf(plan, step, aim).found.roots[0];
  const side = gap(range.from);
  for (let i = 1; i < LOOKS; i++) {
    const at = gap(range.from + ((root - range.from) * i) / LOOKS);
    if (!(at * side > 0)) return rootsOf(plan, step, aim).found.roots[0];
  }
  return root;
}

function secant(f: (x: number) => number, guess: number, { from, to }: Range): number | undefined {
  let [a, b] = [guess, guess === 0 ? 1e-6 : guess * (1 + 1e-4)];
  let [fa, fb] = [f(a), f(b)];
  for (let i = 0; i < STEPS; i++) {
    if (fb === 0 || Math.abs(b - a) <= 4e-16 * Math.abs(b)) return b >= from && b <= to ? b : undefined;
    const next = b - (fb * (b - a)) / (fb - fa);
    if (!(next >= from && next <= to)) return undefined;
    [a, fa] = [b, fb];
    [b, fb] = [next, f(next)];
    if (fb !== fb) return undefined;
    // No closer than rounding allows: it goes to and fro between neighbours.
    if (Math.abs(fb) >= Math.abs(fa) && Math.abs(b - a) <= 1e-12 * Math.abs(b)) return a;
  }
  return undefined;
}

interface Roots {
  readonly found: Found;
  readonly range: Range;
  readonly deed: Deed;
  /** How far from the target an amount leads, possible ones only or all. */
  gapAt(unchecked: boolean): (x: number) => number;
}

function implicit(plan: Plan, aim: Aim, root: number, gapAt: (x: number) => number): Pick<Solution, "amount" | "isTurning"> {
  const own = { key: "budget:amount", label: "amount", value: root, sigma: 0 };
  const gap = aim.gap(follow(plan, { value: root, terms: [{ variable: own, partial: 1 }] }));
  if (!isKnown(gap)) throw new CellError("no-physical-solution", gap);
  const slope = gap.terms.find(({ variable }) => variable.key === own.key)?.partial ?? 0;
  // At a turning point of the path the amount has no derivative: its σ is unknown, not infinite and not 0.
  if (slope === 0) return { amount: { value: root, terms: [{ variable: { ...own, value: 1, sigma: Number.NaN }, partial: 1 }] }, isTurning: true };
  const others = { value: 0, terms: gap.terms.filter(({ variable }) => variable.key !== own.key) };
  const amount = combine(root, [[others, -1 / slope]]);
  const { sigma } = spreadOf(amount);
  return { amount, isTurning: sigma !== null && sigma > 0 && turnsWithin(gapAt, root, sigma, slope) };
}

/** True where f' at a root differs in sign, or vanishes, one σ to either side of it. */
function turnsWithin(f: (x: number) => number, root: number, sigma: number, slope: number): boolean {
  return [-sigma, sigma].some((by) => {
    const rise = (f(root + by) - f(root + by * 0.99)) / (by * 0.01);
    return Number.isFinite(rise) && rise * slope <= 0;
  });
}

function noSolution(plan: Plan, deed: Deed, aim: Aim, found: Found, to: number, anyAmount: (x: number) => number): CellError {
  const field = `${deed.field}.amount`;
  const code = "no-physical-solution";
  const unit = deed.unit === "1" ? "" : ` ${deed.unit}`;
  if (Number.isNaN(found.least)) {
    return new CellError(code, `No amount of ${deed.of} brings ${aim.words}: ${reasonAtStart(plan, aim)}`, { field });
  }
  if (found.isFlat) {
    const isThere = Math.abs(found.most) <= 1e-12 * aim.scale;
    return new CellError(
      code,
      isThere
        ? `${deed.of} does not move what is aimed at, which is met already: every amount would do, so none is the answer.`
        : `${deed.of} does not move what is aimed at, so no amount brings ${aim.words}.`,
      { field },
    );
  }
  const width = to === Infinity ? 1 : to;
  const negative = findRoots((x) => anyAmount(-x), 0, width * 0.999, aim.scale).roots.find((x) => x > 0);
  const would =
    negative === undefined
      ? `over all possible amounts it stays ${spanOf(found)} the target.`
      : `it would take a negative amount, ${shown(-negative)}${unit}. Something must be taken away that is added here, or the other way round.`;
  return new CellError(code, `No possible amount of ${deed.of} brings ${aim.words}: ${would}`, { field });
}

function spanOf({ least, most }: Found): string {
  const [near, far] = Math.abs(least) < Math.abs(most) ? [least, most] : [most, least];
  return `between ${shown(Math.abs(near))} and ${shown(Math.abs(far))} ${near > 0 || far > 0 ? "above" : "below"}`;
}

function reasonAtStart(plan: Plan, aim: Aim): string {
  const quick = plan.plain ?? plan;
  for (const trial of [0, 1e-3, 0.5]) {
    try {
      const gap = aim.gap(follow(quick, exact(trial)));
      if (!isKnown(gap)) return gap;
    } catch (error) {
      if (!(error instanceof CellError)) throw error;
      return error.message;
    }
  }
  return "what is aimed at has no value at any possible amount.";
}
