import { CellError } from "../errors";
import { exact } from "./algebra";
import { follow, type Plan } from "./plan";
import type { Stand } from "./state";

/** Points of a path. */
export const PATH_POINTS = 101;

/** Which amount a path goes along, and from where to where. */
export interface Sweep {
  readonly step: number;
  readonly from: number;
  readonly to: number;
}

/**
 * The path of a budget: over the range that is swept, or from nothing to the amount that was solved for or is fixed (that of
 * the last step, where all are).
 *
 * @param solved the amount that was solved for, if it was
 */
export function sweepOf(plan: Plan, solved: number | undefined): Sweep | undefined {
  const { varying } = plan;
  if (varying.how === "sweep") return { step: varying.step, from: varying.from, to: varying.to };
  if (varying.how === "solve") return solved === undefined ? undefined : { step: varying.step, from: 0, to: solved };
  const last = plan.steps.length - 1;
  const amount = plan.steps[last]?.amount;
  return amount === undefined ? undefined : { step: last, from: 0, to: amount.value };
}

/** The amounts of a path's points, evenly spaced, both ends exact. */
export function amountsOf({ from, to }: Sweep): number[] {
  return Array.from({ length: PATH_POINTS }, (_, i) => (i === PATH_POINTS - 1 ? to : from + ((to - from) * i) / (PATH_POINTS - 1)));
}

/** Where the budget stands at an amount of the swept step, in plain numbers; undefined where that amount is not possible. */
export function standsAlong(plan: Plan, { step }: Sweep): (amount: number) => Stand | undefined {
  const quick = plan.plain ?? plan;
  const varied: Plan = { ...quick, steps: quick.steps.map((known, i) => (i === step ? { ...known, amount: undefined } : known)) };
  return (amount) => {
    try {
      return follow(varied, exact(amount));
    } catch (error) {
      if (error instanceof CellError) return undefined;
      throw error;
    }
  };
}

/** @throws CellError where an end of the swept range is not possible */
export function requireRange(plan: Plan): void {
  const { varying } = plan;
  if (varying.how !== "sweep") return;
  const quick = plan.plain ?? plan;
  for (const end of [varying.from, varying.to]) follow(quick, exact(end));
  if (varying.from === varying.to)
    throw new CellError("empty-range", "The range begins where it ends. Give two different amounts, or a fixed one.", {
      field: `${quick.steps[varying.step]?.deed.field ?? ""}.amount`,
    });
}
