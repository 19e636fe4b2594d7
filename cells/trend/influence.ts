import type { FitPoints, Influence, LineFit } from "./lineFit";
import type { YorkFit } from "./york";

/** How a York line answers its points, twice: see {@link yorkInfluence}. */
export interface YorkInfluence {
  /** For errors of single points: gives York's σ to the last digits. */
  readonly ofErrors: Influence;
  /** For changes common to all points, such as another value of the body they are normalised to. */
  readonly ofChanges: Influence;
}

/**
 * Influence of each point on a York line, by implicit differentiation of its normal equations at the adjusted points (York,
 * Evensen, Martínez & De Basabe 2004, Am. J. Phys. 72, 367). With W the weight, β the adjusted x from the weighted mean and
 * u = β − mean β, a change of yᵢ moves the slope by Wᵢuᵢ / Σ, a change of xᵢ by −b times as much. Σ is ΣWu² where errors are
 * meant, as in the σ of York et al.; and ΣWβ(x − mean x) for a change common to all points, which is exact where all x or
 * all y are scaled together with their errors, or shifted.
 */
export function yorkInfluence(points: FitPoints, { slope: b, weight }: Pick<YorkFit, "slope" | "weight">): YorkInfluence {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const n = x.length;
  const x0 = x[0] ?? 0;
  const y0 = y[0] ?? 0;
  let sum = 0;
  let sumX = 0;
  let sumY = 0;
  for (let i = 0; i < n; i++) {
    const w = weight[i] ?? 0;
    sum += w;
    sumX += w * ((x[i] ?? 0) - x0);
    sumY += w * ((y[i] ?? 0) - y0);
  }
  const xMean = x0 + sumX / sum;
  const yMean = y0 + sumY / sum;
  const inner = new Float64Array(n);
  let sumBeta = 0;
  for (let i = 0; i < n; i++) {
    const p = sigmaX[i] ?? 0;
    const q = sigmaY[i] ?? 0;
    const u = (x[i] ?? 0) - xMean;
    const v = (y[i] ?? 0) - yMean;
    const beta = (weight[i] ?? 0) * (u * q * q + b * v * p * p - (b * u + v) * (correlation[i] ?? 0) * p * q);
    inner[i] = beta;
    sumBeta += (weight[i] ?? 0) * beta;
  }
  const betaMean = sumBeta / sum;
  let square = 0;
  let product = 0;
  for (let i = 0; i < n; i++) {
    const u = (inner[i] ?? 0) - betaMean;
    inner[i] = u;
    square += (weight[i] ?? 0) * u * u;
    product += (weight[i] ?? 0) * u * ((x[i] ?? 0) - xMean);
  }
  const influence = (below: number, centre: number): Influence => {
    const made = emptyInfluence(n);
    for (let i = 0; i < n; i++) {
      const w = weight[i] ?? 0;
      const slopeY = (w * (inner[i] ?? 0)) / below;
      const interceptY = w / sum - centre * slopeY;
      made.slopeY[i] = slopeY;
      made.slopeX[i] = -b * slopeY;
      made.interceptY[i] = interceptY;
      made.interceptX[i] = -b * interceptY;
    }
    return made;
  };
  return { ofErrors: influence(square, xMean + betaMean), ofChanges: influence(product, xMean) };
}

export function emptyInfluence(n: number): Influence {
  return { slopeX: new Float64Array(n), slopeY: new Float64Array(n), interceptX: new Float64Array(n), interceptY: new Float64Array(n) };
}

/**
 * Covariance of a line's slope and intercept that errors of its points bring, point by point.
 *
 * @param extraVarianceY added to every σy²: scatter beyond the errors
 */
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
