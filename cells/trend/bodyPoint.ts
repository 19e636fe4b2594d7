import { CellError } from "../errors";
import { evaluateExpression, type Evaluated, type ExpressionPlace, type Scope } from "../language";
import type { LinearForm } from "./linearForm";
import type { PointForms } from "./distance";

/** An expression that has one value for everything, as a form of what it depends on. */
export function formOf(evaluated: Evaluated): LinearForm {
  return {
    value: evaluated.value[0] ?? NaN,
    terms: evaluated.common.map(({ variable, partial }) => ({ variable, partial: partial[0] ?? 0 })),
  };
}

/** A body's value of an expression over samples; undefined where the body does not hold what the expression needs. */
export function valueOnBody(scope: Scope, expression: string, body: string, at: ExpressionPlace): Evaluated | undefined {
  try {
    const evaluated = evaluateExpression(scope, `at((${expression}), ${nameInFormula(body)})`, at);
    return Number.isFinite(evaluated.value[0]) ? evaluated : undefined;
  } catch (error) {
    if (error instanceof CellError) return undefined;
    throw error;
  }
}

/** Where a body lies on two axes, with what its coordinates share; undefined where it lies nowhere. */
export function bodyPoint(
  scope: Scope,
  x: string,
  y: string,
  body: string,
  at: ExpressionPlace,
): (PointForms & { readonly xEvaluated: Evaluated; readonly yEvaluated: Evaluated }) | undefined {
  const xEvaluated = valueOnBody(scope, x, body, at);
  const yEvaluated = xEvaluated === undefined ? undefined : valueOnBody(scope, y, body, at);
  if (xEvaluated === undefined || yEvaluated === undefined) return undefined;
  return { x: formOf(xEvaluated), y: formOf(yEvaluated), xEvaluated, yEvaluated };
}

/** A name as formulas write it: in backticks unless it is letters, digits and `_`. */
export function nameInFormula(name: string): string {
  return /^[\p{L}_][\p{L}\p{N}_]*$/u.test(name) ? name : `\`${name}\``;
}
