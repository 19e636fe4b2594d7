import { CellError } from "../errors";
import { evaluateExpression, writeName, type Evaluated, type ExpressionPlace, type Scope } from "../language";

/** A body's value of an expression over samples, or the error that says why it has none. */
export function valueOnBody(scope: Scope, expression: string, body: string, at: ExpressionPlace): Evaluated | CellError {
  try {
    const evaluated = evaluateExpression(scope, `at((${expression}), ${writeName(body)})`, at);
    return Number.isFinite(evaluated.value[0]) ? evaluated : new CellError("not-on-body", `${expression} has no value on ${body}.`, { field: at.field ?? "" });
  } catch (error) {
    if (error instanceof CellError) return error;
    throw error;
  }
}
