import type { FitPoints, LineFit } from "./lineFit";
import { checkPoints } from "./checkPoints";
import { startingSlopes } from "./startingSlopes";

/** What a York fit knows beside the line. */
export interface YorkFit extends LineFit {
  /** Weighted sum of squared distances to the line. */
  readonly S: number;
  readonly converged: boolean;
  /** Weight of each point at the fitted slope: 1 / (σy² + b²σx² − 2bρσxσy). */
  readonly weight: Float64Array;
}

const MAX_STEPS = 200;
const TOLERANCE = 1e-15;
/** Error correlations beyond this make several minima of S likely, so several starts are tried. */
const STRONG_CORRELATION = 0.7;
/** With more points than this, only the more promising of several starts are followed. */
const MANY = 1000;

/**
 * The line with errors on both axes, correlated point by point.
 *
 * York, Evensen, Martínez & De Basabe 2004, Am. J. Phys. 72, 367: their unified equations (13), with weights written in
 * variances, so that σ = 0 on one axis is allowed. σ of slope and intercept from the adjusted points (their equations
 * 13–14 of section III); they agree with maximum likelihood (Titterington & Halliday 1979). Cost n × iterations.
 *
 * @param start a slope known to be near, to be tried first
 * @throws CellError where there are fewer than 3 points, all x are equal, or a point has σ = 0 on both axes
 */
export function york(points: FitPoints, start?: number): YorkFit {
  checkPoints(points, { needsErrors: true });
  const strong = points.correlation.some((r) => Math.abs(r) > STRONG_CORRELATION);
  let best: YorkFit | undefined;
  const starts = strong && points.x.length > MANY ? promising(points, startingSlopes(points)) : startingSlopes(points);
  for (const slope of start === undefined ? starts : [start, ...starts]) {
    const fit = yorkFrom(points, slope);
    if (fit !== undefined && better(fit, best)) best = fit;
    if (best?.converged && !strong) break;
  }
  return best ?? failed(points);
}

/** The slopes among these from which S falls to neither side, least S first. */
function promising(points: FitPoints, slopes: readonly number[]): number[] {
  const weight = new Float64Array(points.x.length);
  const tried = [...slopes].sort((p, q) => p - q).map((slope) => ({ slope, S: distancesAt(points, slope, weight) }));
  return tried
    .filter(({ S }, i) => S <= (tried[i - 1]?.S ?? Infinity) && S <= (tried[i + 1]?.S ?? Infinity))
    .sort((p, q) => p.S - q.S)
    .map(({ slope }) => slope);
}

/** S at a slope, the intercept at its best. */
function distancesAt(points: FitPoints, slope: number, weight: Float64Array): number {
  const { x, y } = points;
  const [xMean, yMean] = weigh(points, slope, weight);
  let S = 0;
  for (let i = 0; i < x.length; i++) {
    const r = (y[i] as number) - yMean - slope * ((x[i] as number) - xMean);
    S += (weight[i] as number) * r * r;
  }
  return S;
}

function better(fit: YorkFit, than: YorkFit | undefined): boolean {
  if (than === undefined) return true;
  if (fit.converged !== than.converged) return fit.converged;
  return fit.S < than.S;
}

/** Iterates the slope from one start; undefined where it runs off to no number. */
function yorkFrom(points: FitPoints, start: number): YorkFit | undefined {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const n = x.length;
  const weight = new Float64Array(n);
  let slope = start;
  let converged = false;
  for (let step = 0; step < MAX_STEPS && !converged; step++) {
    const [xMean, yMean] = weigh(points, slope, weight);
    let above = 0;
    let below = 0;
    for (let i = 0; i < n; i++) {
      const p = sigmaX[i] as number;
      const q = sigmaY[i] as number;
      const w = weight[i] as number;
      const common = (correlation[i] as number) * p * q;
      const u = (x[i] as number) - xMean;
      const v = (y[i] as number) - yMean;
      const beta = w * (u * q * q + slope * v * p * p - (slope * u + v) * common);
      above += w * beta * v;
      below += w * beta * u;
    }
    const next = above / below;
    if (!Number.isFinite(next)) return undefined;
    converged = Math.abs(next - slope) <= TOLERANCE * Math.abs(next);
    // The last digits may go round in a circle; a step of two roundings is as near as it gets.
    if (step > 30 && Math.abs(next - slope) <= 1e-13 * Math.abs(next)) converged = true;
    slope = next;
  }
  return summarise(points, slope, weight, converged);
}

/** Fills the weights at a slope and returns the weighted means of x and y. */
function weigh(points: FitPoints, slope: number, weight: Float64Array): [xMean: number, yMean: number] {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const x0 = x[0] ?? 0;
  const y0 = y[0] ?? 0;
  let sum = 0;
  let sumX = 0;
  let sumY = 0;
  for (let i = 0; i < x.length; i++) {
    const p = sigmaX[i] as number;
    const q = sigmaY[i] as number;
    const w = 1 / (q * q + slope * (slope * p * p - 2 * (correlation[i] as number) * p * q));
    weight[i] = w;
    sum += w;
    // Taken from the first point, so that data far from the origin keep their digits.
    sumX += w * ((x[i] as number) - x0);
    sumY += w * ((y[i] as number) - y0);
  }
  return [x0 + sumX / sum, y0 + sumY / sum];
}

/** Intercept, covariance and S at the fitted slope. */
function summarise(points: FitPoints, slope: number, weight: Float64Array, converged: boolean): YorkFit | undefined {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const n = x.length;
  const [xMean, yMean] = weigh(points, slope, weight);
  const intercept = yMean - slope * xMean;
  const betas = new Float64Array(n);
  let sum = 0;
  let sumBeta = 0;
  let S = 0;
  for (let i = 0; i < n; i++) {
    const p = sigmaX[i] as number;
    const q = sigmaY[i] as number;
    const w = weight[i] as number;
    const common = (correlation[i] as number) * p * q;
    const u = (x[i] as number) - xMean;
    const v = (y[i] as number) - yMean;
    const beta = w * (u * q * q + slope * v * p * p - (slope * u + v) * common);
    betas[i] = beta;
    sum += w;
    sumBeta += w * beta;
    const r = v - slope * u;
    S += w * r * r;
  }
  const betaMean = sumBeta / sum;
  let spread = 0;
  for (let i = 0; i < n; i++) {
    const d = (betas[i] as number) - betaMean;
    spread += (weight[i] as number) * d * d;
  }
  const slopeVariance = 1 / spread;
  const adjustedMean = xMean + betaMean;
  const fit: YorkFit = {
    slope,
    intercept,
    slopeVariance,
    interceptVariance: 1 / sum + adjustedMean * adjustedMean * slopeVariance,
    covariance: -adjustedMean * slopeVariance,
    S,
    converged,
    weight,
  };
  return Number.isFinite(fit.interceptVariance) && Number.isFinite(S) && S >= 0 ? fit : undefined;
}

/** What stands where no start led to a number: a line that says it did not converge. */
function failed(points: FitPoints): YorkFit {
  return {
    slope: NaN,
    intercept: NaN,
    slopeVariance: NaN,
    interceptVariance: NaN,
    covariance: NaN,
    S: NaN,
    converged: false,
    weight: new Float64Array(points.x.length),
  };
}
