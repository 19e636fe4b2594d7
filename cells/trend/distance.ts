import { chiSquareSurvival, inverseForm2, normalTwoSided } from "../numeric";
import type { LineForms } from "./crossing";
import { combine, covariance, hasUnknown, variance, type LinearForm } from "./linearForm";

/** How far two things are apart, in σ. */
export interface Distance {
  readonly distance: number;
  readonly p: number;
  /** True where a σ that belongs in it is unknown: the true distance is then smaller. */
  readonly upperBound: boolean;
}

export interface PointForms {
  readonly x: LinearForm;
  readonly y: LinearForm;
}

/**
 * Mahalanobis distance of two points in the plane, with both covariances and what they share; p from χ² of two degrees of
 * freedom, so that 2 is 86 %.
 *
 * @returns undefined where nothing is known of the errors
 */
export function distanceOfPoints(a: PointForms, b: PointForms): Distance | undefined {
  const dx = combine(a.x.value - b.x.value, [
    [a.x, 1],
    [b.x, -1],
  ]);
  const dy = combine(a.y.value - b.y.value, [
    [a.y, 1],
    [b.y, -1],
  ]);
  const square = inverseForm2({ xx: variance(dx), xy: covariance(dx, dy), yy: variance(dy) }, dx.value, dy.value);
  if (!Number.isFinite(square)) return undefined;
  return { distance: Math.sqrt(square), p: chiSquareSurvival(square, 2), upperBound: hasUnknown(dx) || hasUnknown(dy) };
}

/**
 * Distance of a point from a line: y − a − bx over its own σ, which holds the errors of the point, of the line, and what
 * they share; p from the normal distribution.
 *
 * @returns undefined where nothing is known of the errors
 */
export function distanceFromLine(point: PointForms, line: LineForms): Distance | undefined {
  const x = point.x.value;
  const slope = line.slope.value;
  const gap = combine(point.y.value - line.intercept.value - slope * x, [
    [point.y, 1],
    [point.x, -slope],
    [line.intercept, -1],
    [line.slope, -x],
  ]);
  const sigma = Math.sqrt(variance(gap));
  if (!(sigma > 0)) return undefined;
  const distance = Math.abs(gap.value) / sigma;
  return { distance, p: normalTwoSided(distance), upperBound: hasUnknown(gap) };
}
