import type { FitPoints, Influence, LineFit } from "./lineFit";

/**
 * Influence of each point on a York line, by implicit differentiation of the normal equations ∂S/∂a = ∂S/∂b = 0 with the
 * errors held fixed. With r = y − a − bx, W the weight and q = bσx² − ρσxσy: half of ∂S/∂a is −ΣWr, half of ∂S/∂b is
 * −ΣWr(x + Wqr). Everything is taken from the weighted mean of x, where the equations are best conditioned.
 */
export function yorkInfluence(points: FitPoints, line: LineFit, weight: Float64Array): Influence {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const n = x.length;
  const b = line.slope;
  let sum = 0;
  let sumX = 0;
  for (let i = 0; i < n; i++) {
    sum += weight[i] ?? 0;
    sumX += (weight[i] ?? 0) * (x[i] ?? 0);
  }
  const centre = sumX / sum;
  const height = line.intercept + b * centre;
  const inner = new Float64Array(n);
  const residual = new Float64Array(n);
  let aa = 0;
  let ab = 0;
  let bb = 0;
  for (let i = 0; i < n; i++) {
    const w = weight[i] ?? 0;
    const p = sigmaX[i] ?? 0;
    const r = (y[i] ?? 0) - height - b * ((x[i] ?? 0) - centre);
    const q = b * p * p - (correlation[i] ?? 0) * p * (sigmaY[i] ?? 0);
    const z = (x[i] ?? 0) - centre + 2 * w * q * r;
    residual[i] = r;
    inner[i] = z;
    aa += w;
    ab += w * z;
    bb += w * z * z - w * w * p * p * r * r;
  }
  const determinant = aa * bb - ab * ab;
  const made = emptyInfluence(n);
  for (let i = 0; i < n; i++) {
    const w = weight[i] ?? 0;
    const z = inner[i] ?? 0;
    const r = residual[i] ?? 0;
    // Minus the derivative of each normal equation to y and to x.
    const ay = w;
    const by = w * z;
    const ax = -b * w;
    const bx = w * r - b * w * z;
    const heightY = (bb * ay - ab * by) / determinant;
    const slopeY = (aa * by - ab * ay) / determinant;
    const heightX = (bb * ax - ab * bx) / determinant;
    const slopeX = (aa * bx - ab * ax) / determinant;
    made.slopeX[i] = slopeX;
    made.slopeY[i] = slopeY;
    made.interceptX[i] = heightX - centre * slopeX;
    made.interceptY[i] = heightY - centre * slopeY;
  }
  return made;
}

export function emptyInfluence(n: number): Influence {
  return { slopeX: new Float64Array(n), slopeY: new Float64Array(n), interceptX: new Float64Array(n), interceptY: new Float64Array(n) };
}

/** Covariance of a line's slope and intercept that errors of its points bring, point by point. */
export function propagate(
  influence: Influence,
  points: Pick<FitPoints, "sigmaX" | "sigmaY" | "correlation">,
  extraVarianceY: number,
): Pick<LineFit, "slopeVariance" | "interceptVariance" | "covariance"> {
  let slopeVariance = 0;
  let interceptVariance = 0;
  let covariance = 0;
  for (let i = 0; i < influence.slopeX.length; i++) {
    const p = points.sigmaX[i] ?? 0;
    const q = points.sigmaY[i] ?? 0;
    const xx = p * p;
    const xy = (points.correlation[i] ?? 0) * p * q;
    const yy = q * q + extraVarianceY;
    const bx = influence.slopeX[i] ?? 0;
    const by = influence.slopeY[i] ?? 0;
    const ax = influence.interceptX[i] ?? 0;
    const ay = influence.interceptY[i] ?? 0;
    slopeVariance += bx * bx * xx + 2 * bx * by * xy + by * by * yy;
    interceptVariance += ax * ax * xx + 2 * ax * ay * xy + ay * ay * yy;
    covariance += ax * bx * xx + (ax * by + ay * bx) * xy + ay * by * yy;
  }
  return { slopeVariance, interceptVariance, covariance };
}
