import { CellError } from "../errors";
import type { Evaluated } from "../language";
import type { PlotLayer } from "../page/results";
import type { Drawn } from "../page/schema";
import { covariance, hasUnknown, variance, type LinearForm } from "../trend";
import { conversion, requireOnAxis, type PlotAxis } from "./axes";
import { contour } from "./contour";
import type { Drawing } from "./drawing";
import { valueOnBody } from "./valueOnBody";

export type BodiesDrawn = Extract<Drawn, { bodies: readonly string[] }>;
type BodyDrawn = Extract<PlotLayer, { what: "bodies" }>["bodies"][number];

/** Reference bodies where the axes' own expressions put them. A body that lacks a species is left out, with a sentence. */
export function bodiesLayer(drawing: Drawing, drawn: BodiesDrawn, place: number, x: PlotAxis, y: PlotAxis | null, radius: number): PlotLayer {
  const field = `drawn[${place}].bodies`;
  const bodies = drawn.bodies.flatMap((name): BodyDrawn[] => {
    const made = drawing.attempt(field, () => bodyDrawn(drawing, name, field, x, y, radius));
    return made === undefined ? [] : [made];
  });
  return { what: "bodies", drawn: place, bodies };
}

function bodyDrawn(drawing: Drawing, name: string, field: string, x: PlotAxis, y: PlotAxis | null, radius: number): BodyDrawn | undefined {
  const { context, block } = drawing;
  const body = context.bodies(name);
  if (body === undefined)
    throw new CellError("unknown-body", `There is no body ${name}. Give the page an alias of this name, or write the id of a compilation, such as CI_PLJ14.`, {
      field,
    });
  const at = { block: block.id, field };
  const onX = valueOnBody(context.scope(x.placed.data), x.placed.text, name, at);
  const onY = y === null ? null : valueOnBody(context.scope(y.placed.data), y.placed.text, name, at);
  if (onX instanceof CellError || onY instanceof CellError) {
    drawing.warn("not-on-body", field, `${name} is not drawn: ${onX instanceof CellError ? onX.message : onY instanceof CellError ? onY.message : ""}`);
    return undefined;
  }
  requireOnAxis(x, `${x.placed.text} on ${name}`, onX, field);
  if (y !== null && onY !== null) requireOnAxis(y, `${y.placed.text} on ${name}`, onY, field);
  Object.assign(drawing.bodiesUsed, onX.bodiesUsed, onY?.bodiesUsed);
  const [formX, formY] = [inUnitOf(x, onX), y === null || onY === null ? null : inUnitOf(y, onY)];
  const [sigmaX, sigmaY] = [sigmaOf(formX), formY === null ? null : sigmaOf(formY)];
  if (radius > 0 && (sigmaX === null || (formY !== null && sigmaY === null)))
    drawing.note({
      code: "sigma-unknown",
      severity: "note",
      block: block.id,
      field,
      text: `${name} (${body.id}) is drawn without an ellipse: its source gives no σ for something that stands on an axis.`,
    });
  const shared = sigmaX !== null && sigmaY !== null && formY !== null && sigmaX > 0 && sigmaY > 0 ? covariance(formX, formY) / (sigmaX * sigmaY) : 0;
  const correlation = Math.max(-1, Math.min(1, shared));
  const ellipse = sigmaX === null || sigmaY === null || formY === null ? undefined : contour(formX.value, formY.value, sigmaX, sigmaY, correlation, radius);
  return {
    name,
    compilation: body.id,
    x: formX.value,
    y: formY?.value ?? Number.NaN,
    sigmaX,
    sigmaY,
    correlation,
    ...(ellipse === undefined ? {} : { ellipse }),
  };
}

/** The value on an axis as a form of what the body's source gives, in the axis' unit. */
function inUnitOf(axis: PlotAxis, evaluated: Evaluated): LinearForm {
  const to = conversion(evaluated.unit, axis.unit);
  return {
    value: to.value(evaluated.value[0] ?? Number.NaN),
    terms: evaluated.common.map(({ variable, partial }) => ({ variable, partial: (partial[0] ?? 0) * to.factor })),
  };
}

/** 1σ of a form; null where a σ that belongs in it is unknown. */
function sigmaOf(form: LinearForm): number | null {
  return hasUnknown(form) ? null : Math.sqrt(Math.max(0, variance(form)));
}
