import { checkPoints } from "./checkPoints";
import { emptyInfluence } from "./influence";
import type { FitPoints, Influence, LineFit } from "./lineFit";
import { moments } from "./moments";

/** A line whose σ come from the scatter of the points themselves, with n − 2 degrees of freedom. */
export interface ScatterLine extends LineFit {
  /** Standard deviation of the residuals in y, n − 2 degrees of freedom. */
  readonly residualSd: number;
  readonly influence: Influence;
}

/**
 * Ordinary least squares of y on x (Gauss 1809), centred, so that data far from the origin lose no digits. The errors of
 * the points are not used; σ of slope and intercept come from the residuals.
 *
 * @throws CellError where there are fewer than 3 points or all x are equal
 */
export function ordinaryLeastSquares(points: FitPoints): ScatterLine {
  checkPoints(points, { needsErrors: false });
  const { x, y } = points;
  const n = x.length;
  const { xMean, yMean, xx, xy } = moments(points);
  const slope = xy / xx;
  let square = 0;
  for (let i = 0; i < n; i++) {
    const r = (y[i] ?? 0) - yMean - slope * ((x[i] ?? 0) - xMean);
    square += r * r;
  }
  const residualVariance = square / (n - 2);
  const slopeVariance = residualVariance / xx;
  const influence = emptyInfluence(n);
  for (let i = 0; i < n; i++) {
    const u = (x[i] ?? 0) - xMean;
    const v = (y[i] ?? 0) - yMean;
    const slopeY = u / xx;
    const slopeX = (v - 2 * slope * u) / xx;
    influence.slopeY[i] = slopeY;
    influence.slopeX[i] = slopeX;
    influence.interceptY[i] = 1 / n - xMean * slopeY;
    influence.interceptX[i] = -slope / n - xMean * slopeX;
  }
  return {
    slope,
    intercept: yMean - slope * xMean,
    slopeVariance,
    interceptVariance: residualVariance / n + xMean * xMean * slopeVariance,
    covariance: -xMean * slopeVariance,
    residualSd: Math.sqrt(residualVariance),
    influence,
  };
}
