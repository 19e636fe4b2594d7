import { CellError } from "../errors";
import { evaluateExpression, writeName, type Evaluated, type ExpressionPlace, type Scope } from "../language";
import type { Unit } from "../quantity/unit";
import type { PointForms } from "./distance";
import type { LinearForm } from "./linearForm";
import type { AxesOfFit, AxisOfFit } from "./trendFit";

/** An expression that has one value for everything, as a form of what it depends on. */
function formOf(evaluated: Evaluated): LinearForm {
  return {
    value: evaluated.value[0] ?? NaN,
    terms: evaluated.common.map(({ variable, partial }) => ({ variable, partial: partial[0] ?? 0 })),
  };
}

/**
 * A form in another unit; undefined where the units do not convert. Units that are put together, as of Mg × Al, convert to
 * themselves alone.
 */
export function convertForm(form: LinearForm, from: Unit, to: Unit): LinearForm | undefined {
  if (from === to || from.symbol === to.symbol) return form;
  const factor = unitFactor(from, to);
  if (factor === undefined) return undefined;
  return {
    value: (form.value / from.per + from.offset - to.offset) * to.per,
    terms: form.terms.map(({ variable, partial }) => ({ variable, partial: partial * factor })),
  };
}

/** How many of `to` make one of `from`, offsets apart; undefined where the units do not convert. */
export function unitFactor(from: Unit, to: Unit): number | undefined {
  if (from.symbol === to.symbol) return 1;
  return from.dimension === to.dimension && from.dimension !== "dimensionless" ? to.per / from.per : undefined;
}

/** A body's value of an expression over samples, on an axis; undefined where the body does not hold what the expression needs. */
function valueOnBody(scope: Scope, expression: string, axis: AxisOfFit, body: string, at: ExpressionPlace): LinearForm | undefined {
  try {
    const evaluated = evaluateExpression(scope, `at((${expression}), ${writeName(body)})`, at);
    if (!Number.isFinite(evaluated.value[0]) || evaluated.basis !== axis.basis) return undefined;
    return convertForm(formOf(evaluated), evaluated.unit, axis.unit);
  } catch (error) {
    if (error instanceof CellError) return undefined;
    throw error;
  }
}

/**
 * Where a body lies on the axes of a trend, with what its coordinates share; undefined where it lies nowhere.
 *
 * @param x the expression over samples that stands on x
 */
export function bodyPoint(scope: Scope, axes: AxesOfFit, x: string, y: string, body: string, at: ExpressionPlace): PointForms | undefined {
  const onX = valueOnBody(scope, x, axes.x, body, at);
  const onY = onX === undefined ? undefined : valueOnBody(scope, y, axes.y, body, at);
  return onX === undefined || onY === undefined ? undefined : { x: onX, y: onY };
}
