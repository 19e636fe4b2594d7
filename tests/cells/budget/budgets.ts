import type { BlockContext } from "../../../cells/page/context";
import { evaluateBudget } from "../../../cells/budget";
import type { BlockResult, BudgetResult } from "../../../cells/page/results";
import { budgetBlockSchema, type Block, type BudgetBlock } from "../../../cells/page/schema";
import { bodyLookup } from "../../../cells/species";
import type { Scope } from "../../../cells/language";
import type { Table } from "../../../cells/table/table";

export interface Surroundings {
  readonly bodies?: Readonly<Record<string, string>>;
  readonly tables?: readonly Table[];
  readonly results?: Readonly<Record<string, BlockResult>>;
  readonly blocks?: readonly Block[];
}

export const aliases = { CI: "CI_PLJ14", BSE: "BSE_MS95" };

/** What a budget sees of its page, put together by hand. */
export function contextOf({ bodies = aliases, tables = [], results = {}, blocks = [] }: Surroundings = {}): BlockContext {
  const lookup = bodyLookup(bodies);
  return {
    bodies: lookup,
    aliases: Object.keys(bodies),
    scope: (data): Scope => ({ table: tables.find((table) => table.handle === data) ?? null, bodies: lookup, lookup: () => undefined }),
    result: (handle) => results[handle],
    block: (handle) => blocks.find((block) => block.id === handle),
    expand: (text) => text,
  };
}

/** A budget as a page document has it: the schema looks at it, so that no test rests on what no page can hold. */
export function blockOf(budget: object): BudgetBlock {
  return budgetBlockSchema.parse({ kind: "budget", id: "b", ...budget });
}

export function evaluate(budget: object, around: Surroundings = {}): BudgetResult {
  return evaluateBudget(blockOf(budget), contextOf(around));
}

/** The one problem of severity error. */
export function errorIn(result: BudgetResult): { code: string; field: string | undefined; text: string } {
  const errors = result.problems.filter((problem) => problem.severity === "error");
  const [error] = errors;
  if (error === undefined || errors.length > 1) throw new Error(`expected one error, got ${JSON.stringify(result.problems)}`);
  return { code: error.code, field: error.field, text: error.text };
}

export function present(value: number | null | undefined): number {
  if (value === null || value === undefined) throw new Error("expected a number");
  return value;
}
