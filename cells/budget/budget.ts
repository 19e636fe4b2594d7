import { CellError, type Problem } from "../errors";
import type { BlockContext } from "../page/context";
import type { BudgetBlock, TrendBlock } from "../page/schema";
import type { Body, BodyLookup } from "../species";
import { expressionAim, trendAim, type Aim } from "./aim";
import { measureOf, type Measure } from "./measure";
import { planOf, type Plan } from "./plan";
import type { Access } from "./readSubstance";

/** A budget, read: what is done and what is asked. */
export interface Budget {
  readonly plan: Plan;
  readonly aim: Aim | undefined;
  /** Reported expressions in the block's order; undefined where one cannot be read, which is then among the problems. */
  readonly report: readonly { readonly text: string; readonly measure: Measure | undefined }[];
  /** Names of bodies as the block writes them → the compilation. */
  readonly bodiesUsed: Readonly<Record<string, string>>;
  readonly problems: readonly Problem[];
}

/** Other compilations to use for names of bodies, tried out. */
export type Swap = Readonly<Record<string, string>>;

/**
 * Reads a budget.
 *
 * @param more expressions whose elements are needed too: the axes of a plot
 * @param memo expressions that name no body, kept from one reading with other compilations to the next
 * @throws CellError where the start, a step or the target cannot be read; a reported expression that cannot is a problem of its own
 */
export function readBudget(
  block: BudgetBlock,
  context: BlockContext,
  swap: Swap = {},
  more: readonly Measure[] = [],
  memo = new Map<string, Measure>(),
): Budget {
  const bodiesUsed: Record<string, string> = {};
  const problems: Problem[] = [];
  const lookup = bodiesWith(context, swap);
  const measure = (text: string, field: string, data?: string): Measure => {
    const key = JSON.stringify([text, data]);
    const made = memo.get(key) ?? measureOf(text, { block: block.id, field }, lookup, (written) => context.expand(written, data));
    Object.assign(bodiesUsed, made.bodiesUsed);
    if (Object.keys(made.bodiesUsed).length === 0) memo.set(key, made);
    return made;
  };
  const report = (block.report ?? []).map((text, i) => {
    try {
      return { text, measure: measure(text, `report[${i}]`) };
    } catch (error) {
      if (!(error instanceof CellError)) throw error;
      problems.push(error.toProblem(block.id));
      return { text, measure: undefined };
    }
  });
  const { target } = block;
  const aimed = target === undefined ? [] : aimMeasures(block, context, measure);
  const measures = [...report.flatMap((row) => row.measure ?? []), ...aimed, ...more];
  const access: Access = {
    context,
    body: (name) => {
      const body = lookup(name);
      if (body !== undefined) bodiesUsed[name] = body.id;
      return body;
    },
    needed: [...new Set(measures.flatMap((made) => made.species))],
    note: (text, severity = "note") => {
      if (!problems.some((known) => known.text === text)) problems.push({ code: "budget-note", severity, block: block.id, text });
    },
  };
  const plan = planOf(block, access);
  const aim = target === undefined ? undefined : aimOf(block, context, access, aimed);
  // A budget that reports nothing of its own shows what it aims at.
  const shownReport = report.length > 0 ? report : aimed.map((made) => ({ text: made.text, measure: made }));
  return { plan, aim, report: shownReport, bodiesUsed, problems };
}

function bodiesWith({ bodies }: BlockContext, swap: Swap): BodyLookup {
  const find = (name: string): Body | undefined => {
    const other = Object.hasOwn(swap, name) ? swap[name] : undefined;
    return other === undefined ? bodies(name) : bodies.all.find(({ id }) => id === other);
  };
  return Object.assign(find, { all: bodies.all });
}

function trendBlock(handle: string, context: BlockContext): TrendBlock {
  const block = context.block(handle);
  if (block === undefined) throw new CellError("no-such-block", `There is no block "${handle}" on this page.`, { field: "target.trend" });
  if (block.kind !== "trend") throw new CellError("wrong-kind", `"${handle}" is not a trend.`, { field: "target.trend" });
  return block;
}

function aimMeasures(block: BudgetBlock, context: BlockContext, measure: (text: string, field: string, data?: string) => Measure): readonly Measure[] {
  const { target } = block;
  if (target === undefined) return [];
  if ("expression" in target) return [measure(target.expression, "target.expression")];
  const trend = trendBlock(target.trend, context);
  return [measure(trend.x, "target.trend", trend.data), measure(trend.y, "target.trend", trend.data)];
}

function aimOf(block: BudgetBlock, context: BlockContext, access: Access, measures: readonly Measure[]): Aim | undefined {
  const { target } = block;
  const [first, second] = measures;
  if (target === undefined || first === undefined) return undefined;
  if ("expression" in target) return expressionAim(target, first, { access, block });
  const result = context.result(target.trend);
  if (result?.kind !== "trend" || second === undefined)
    throw new CellError("no-line", `${target.trend} has no result, so nothing can reach its line.`, { field: "target.trend" });
  return trendAim(target.trend, first, second, result);
}
