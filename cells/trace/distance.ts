import { determinant2 } from "../numeric";
import type { BodyDistance, TraceNode, TrendResult } from "../page/results";
import type { TrendBlock } from "../page/schema";
import { covariance, fitOf, variance, type LinearForm } from "../trend";
import { bodyPoint } from "../trend/bodyPoint";
import { crossing } from "../trend/crossing";
import { combine } from "../trend/linearForm";
import type { Tracing } from "./commons";
import { formBranches } from "./forms";
import { orNull, short } from "./node";

/**
 * How far a body lies from a line, or from a crossing, in σ. The branches are what the σ is made of that the distance is counted in;
 * their shares sum to 1. In two dimensions it is the σ along the way from the one to the other, C⁻¹δ, of which the distance is
 * exactly value over σ.
 */
export function distanceNode(tracing: Tracing, block: TrendBlock, result: TrendResult, body: string, from: "line" | "crossing"): TraceNode | null {
  const found = (from === "line" ? result.fromBodies : result.crossing?.fromBodies)?.find((each) => each.body === body);
  const fit = fitOf(result);
  if (found === undefined || fit === undefined) return null;
  const { context } = tracing;
  const point = bodyPoint(context.scope(block.data), fit, block.x, block.y, body, { block: block.id });
  const form = point === undefined ? undefined : from === "line" ? gapToLine(point, fit.line) : gapToCrossing(tracing, result, point);
  const { from: branches, notes } = form === undefined ? { from: [], notes: [] } : formBranches(tracing, form);
  const id = context.bodies(body)?.id ?? body;
  return {
    kind: "result",
    label: `distance of ${body} from ${from === "line" ? `the line of ${block.id}` : `its crossing with ${result.crossing?.with ?? ""}`}`,
    value: orNull(found.distance),
    sigma: null,
    unit: "σ",
    share: form === undefined ? null : 1,
    notes: [
      ...(id === body ? [] : [`${body} is ${id} on this page.`]),
      ...placeWords(point, result),
      ...meaningOf(found, from, result),
      "The shares are of the σ that the distance is counted in.",
      ...notes,
    ],
    from: branches,
  };
}

interface Point {
  readonly x: LinearForm;
  readonly y: LinearForm;
}

function placeWords(point: Point | undefined, { x, y }: TrendResult): string[] {
  return point === undefined ? [] : [`It lies at ${x.expression} ${short(point.x.value, 5)}, ${y.expression} ${short(point.y.value, 5)}.`];
}

function meaningOf(found: BodyDistance, from: "line" | "crossing", result: TrendResult): string[] {
  const bound = found.distanceIs === undefined ? [] : ["A σ of the body is unknown, so it lies at most this far away."];
  if (from === "line") return ["The distance is y − a − bx over its own σ, from the body, the line, and what they share.", ...bound];
  const how =
    result.crossing?.region === "simulated"
      ? "The distance is from simulated crossings, since the slopes differ little against their σ; the shares are those of first order."
      : "The distance takes both covariances and what they share; in two dimensions 2 is 86 %.";
  return [how, ...bound];
}

function gapToLine(point: Point, { slope, intercept }: { readonly slope: LinearForm; readonly intercept: LinearForm }): LinearForm {
  const x = point.x.value;
  return combine(point.y.value - intercept.value - slope.value * x, [
    [point.y, 1],
    [point.x, -slope.value],
    [intercept, -1],
    [slope, -x],
  ]);
}

function gapToCrossing({ context }: Tracing, result: TrendResult, body: Point): LinearForm | undefined {
  const other = result.crossing === undefined ? undefined : context.result(result.crossing.with);
  const [first, second] = [fitOf(result), other?.kind === "trend" ? fitOf(other) : undefined];
  if (first === undefined || second === undefined) return undefined;
  if (first.x.unit.symbol !== second.x.unit.symbol || first.y.unit.symbol !== second.y.unit.symbol) return undefined;
  const at = crossing(first.line, second.line);
  const minus = (a: LinearForm, b: LinearForm): LinearForm =>
    combine(a.value - b.value, [
      [a, 1],
      [b, -1],
    ]);
  const [dx, dy] = [minus(at.x, body.x), minus(at.y, body.y)];
  const m = { xx: variance(dx), xy: covariance(dx, dy), yy: variance(dy) };
  const determinant = determinant2(m);
  if (!(determinant > 0)) return undefined;
  const u = (m.yy * dx.value - m.xy * dy.value) / determinant;
  const v = (m.xx * dy.value - m.xy * dx.value) / determinant;
  return combine(u * dx.value + v * dy.value, [
    [dx, u],
    [dy, v],
  ]);
}
