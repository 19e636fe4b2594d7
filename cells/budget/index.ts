/** Mass balances: a start, steps, and what they reach. */
export { evaluateBudget } from "./evaluate";
export { formsOf } from "./forms";
export type { BudgetForms, ReportSide } from "./forms";
export { pathOn } from "./pathOn";
export type { BudgetCurve, BudgetTick } from "./pathOn";
