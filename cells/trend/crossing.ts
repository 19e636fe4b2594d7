import { combine, covariance, variance, type LinearForm } from "./linearForm";

/** Where two lines meet. */
export interface CrossingPoint {
  readonly x: LinearForm;
  readonly y: LinearForm;
  /** Difference of the slopes over its own 1σ: below 3 the crossing is not known, below 6 its region is not an ellipse. */
  readonly separation: number;
}

/** A line as two forms, so that what two lines share is known. */
export interface LineForms {
  readonly slope: LinearForm;
  readonly intercept: LinearForm;
}

/**
 * The crossing of y = a₁ + b₁x and y = a₂ + b₂x by the delta method, with both covariances and what the lines have in
 * common: x = (a₂ − a₁)/(b₁ − b₂).
 */
export function crossing(first: LineForms, second: LineForms): CrossingPoint {
  const gap = first.slope.value - second.slope.value;
  const x = (second.intercept.value - first.intercept.value) / gap;
  const y = first.intercept.value + first.slope.value * x;
  const b1 = first.slope.value;
  const b2 = second.slope.value;
  const difference = combine(gap, [
    [first.slope, 1],
    [second.slope, -1],
  ]);
  return {
    x: combine(x, [
      [first.intercept, -1 / gap],
      [first.slope, -x / gap],
      [second.intercept, 1 / gap],
      [second.slope, x / gap],
    ]),
    y: combine(y, [
      [first.intercept, -b2 / gap],
      [first.slope, (-b2 * x) / gap],
      [second.intercept, b1 / gap],
      [second.slope, (b1 * x) / gap],
    ]),
    separation: Math.abs(gap) / Math.sqrt(variance(difference)),
  };
}

/** Covariance of the crossing's x and y. */
export function crossingCovariance(point: Pick<CrossingPoint, "x" | "y">): number {
  return covariance(point.x, point.y);
}
