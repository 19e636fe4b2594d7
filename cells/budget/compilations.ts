import { CellError } from "../errors";
import type { BlockContext } from "../page/context";
import type { BudgetResult } from "../page/results";
import type { BudgetBlock } from "../page/schema";
import type { Body } from "../species";
import { spreadOf, type LinearForm } from "./algebra";
import { readBudget, type Budget } from "./budget";
import type { Measure } from "./measure";
import { solve } from "./solve";

/** More combinations than this are not tried. */
const MAX_COMBINATIONS = 60;

/**
 * The solved amount for every combination of the compilations at hand: each name of a body that the budget uses, put for
 * every compilation of the same kind of body.
 *
 * @param own the amount with the page's own compilations
 * @param fixed names that stand for the same body throughout, since a trend was fitted with them
 */
export function byCompilation(
  block: BudgetBlock,
  context: BlockContext,
  budget: Budget,
  step: number,
  own: LinearForm,
  fixed: ReadonlySet<string>,
): BudgetResult["byCompilation"] {
  const names = Object.entries(budget.bodiesUsed).flatMap(([name, id]) => {
    const body = context.bodies.all.find((known) => known.id === id);
    const alike = body === undefined || fixed.has(name) ? [] : compilationsLike(body, context.bodies.all);
    return alike.length > 1 ? [{ name, ids: alike.map((other) => other.id) }] : [];
  });
  if (names.length === 0) return [];
  let combinations: Record<string, string>[] = [{}];
  for (const { name, ids } of names) {
    if (combinations.length * ids.length > MAX_COMBINATIONS) break;
    combinations = combinations.flatMap((known) => ids.map((id) => ({ ...known, [name]: id })));
  }
  const isOwn = (bodies: Readonly<Record<string, string>>): boolean => Object.entries(bodies).every(([name, id]) => budget.bodiesUsed[name] === id);
  const memo = new Map<string, Measure>();
  return combinations.map((bodies) => ({
    bodies,
    ...(isOwn(bodies) ? answerOf(own) : answer(block, context, bodies, step, memo)),
  }));
}

type Answer = Omit<BudgetResult["byCompilation"][number], "bodies">;

const none: Answer = { solved: null, sigma: null };

function answerOf(amount: LinearForm): Answer {
  const { sigma, isLowerBound } = spreadOf(amount);
  return { solved: amount.value, sigma, ...(isLowerBound ? { sigmaIs: "lower bound" as const } : {}) };
}

function answer(block: BudgetBlock, context: BlockContext, bodies: Readonly<Record<string, string>>, step: number, memo: Map<string, Measure>): Answer {
  try {
    const { plan, aim } = readBudget(block, context, bodies, [], memo);
    return aim === undefined ? none : answerOf(solve(plan, step, aim).amount);
  } catch (error) {
    // With this compilation there is no answer: it lacks an element, or no possible amount reaches the target.
    if (error instanceof CellError) return none;
    throw error;
  }
}

/**
 * Compilations of the same kind of body: those of CI chondrites, those of the bulk silicate Earth … in the tables' order, the
 * page's own behind them.
 */
export function compilationsLike(body: Body, all: readonly Body[]): readonly Body[] {
  if (body.kind === "phase") return [];
  return all.filter((other) => other.kind === body.kind && kindOf(other) === kindOf(body));
}

/** "CI chondrite" and "CI chondrites, group mean" are compilations of one kind of body. */
function kindOf({ what }: Body): string {
  return what.replace(/ chondrites?(?:, group mean)?$/u, " chondrite");
}
