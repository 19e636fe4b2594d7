import type { BudgetResult } from "../page/results";
import type { LinearForm } from "../trend/linearForm";
import type { Known } from "./substance";

/** What a calculated budget knows beside its numbers: how they depend on its inputs, for traces. Never leaves the engine. */
export interface BudgetForms {
  readonly solved?: LinearForm;
  /** Reported expressions at the end, in the report's order; a sentence where there is no value. */
  readonly report: readonly (Known | undefined)[];
  /** Another side of a reported expression, by its place: made when asked for. */
  side?(place: number, side: ReportSide): Known | undefined;
  /** What was left behind: its mass, or an element of it; made when asked for. */
  left?(of: string): Known | undefined;
}

/** `miss` is the difference of end and target, whose σ the miss is counted in. */
export type ReportSide = "start" | "target" | "miss";

/** Under this key a budget's result carries its forms; neither JSON nor a message between threads takes it along. */
const formsKey = Symbol("forms");

export function withForms(result: BudgetResult, forms: BudgetForms): BudgetResult {
  return { ...result, [formsKey]: forms } as BudgetResult;
}

/** How a budget's solved amount and reported values depend on its inputs; undefined where it has no end. */
export function formsOf(result: BudgetResult): BudgetForms | undefined {
  return (result as BudgetResult & { readonly [formsKey]?: BudgetForms })[formsKey];
}
