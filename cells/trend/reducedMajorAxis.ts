import { CellError } from "../errors";
import { checkPoints } from "./checkPoints";
import { emptyInfluence } from "./influence";
import type { FitPoints } from "./lineFit";
import { moments } from "./moments";
import type { ScatterLine } from "./ordinaryLeastSquares";

/**
 * Reduced major axis: slope = sign(r) · sd(y)/sd(x) through the means (Kermack & Haldane 1950, Biometrika 37, 30). σ of the
 * slope is |b|·√((1 − r²)/(n − 2)); the intercept's adds the scatter of y − bx about its mean. The errors of the points are
 * not used.
 *
 * @throws CellError where there are fewer than 3 points, all x are equal, or x and y are not correlated at all
 */
export function reducedMajorAxis(points: FitPoints): ScatterLine {
  checkPoints(points, { needsErrors: false });
  const { x, y } = points;
  const n = x.length;
  const { xMean, yMean, xx, xy, yy } = moments(points);
  if (xy === 0)
    throw new CellError("no-direction", "x and y are not correlated at all, so the sign of a reduced major axis cannot be told. Use ordinary least squares.");
  const r2 = Math.min(1, (xy * xy) / (xx * yy));
  const slope = (xy < 0 ? -1 : 1) * Math.sqrt(yy / xx);
  const slopeVariance = ((yy / xx) * (1 - r2)) / (n - 2);
  const residualVariance = Math.max(0, yy - 2 * slope * xy + slope * slope * xx) / (n - 2);
  const influence = emptyInfluence(n);
  for (let i = 0; i < n; i++) {
    const slopeY = (slope * ((y[i] ?? 0) - yMean)) / yy;
    const slopeX = (-slope * ((x[i] ?? 0) - xMean)) / xx;
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
