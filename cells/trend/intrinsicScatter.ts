import type { FitPoints } from "./lineFit";
import { york, type YorkFit } from "./york";

/** A York line whose errors were widened until they explain the scatter. */
export interface ScatterFit {
  /** Scatter beyond the errors: 1σ, in y. 0 where the errors explain it all. */
  readonly scatter: number;
  /** The line with the scatter in every weight. */
  readonly fit: YorkFit;
}

/**
 * Intrinsic scatter by maximum likelihood: normal, in y, the same for every point, added to its errors. At the maximum,
 * Σ(W²r² − W) = 0 with W = 1/(σy² + s² + b²σx² − 2bρσxσy); the line is the York line for those errors.
 *
 * The root of the score is bracketed in s²; where the score is not positive at s = 0 the scatter is 0.
 */
export function intrinsicScatter(points: FitPoints, plain: YorkFit): ScatterFit {
  let atLow = score(points, plain);
  if (!(atLow > 0)) return { scatter: 0, fit: plain };
  let low = 0;
  let high = residualVariance(points, plain);
  let fit = widened(points, high, plain.slope);
  let atHigh = score(points, fit);
  while (atHigh > 0) {
    low = high;
    atLow = atHigh;
    high *= 4;
    if (!Number.isFinite(high)) return { scatter: NaN, fit: plain };
    fit = widened(points, high, fit.slope);
    atHigh = score(points, fit);
  }
  // False position, with the Illinois rule: the end that stays put counts half.
  let kept = 0;
  for (let step = 0; step < 200 && high - low > 1e-14 * high; step++) {
    const ratio = atLow / (atLow - atHigh);
    let next = low + ratio * (high - low);
    if (!(next > low && next < high)) next = 0.5 * (low + high);
    if (!(next > low && next < high)) break;
    fit = widened(points, next, fit.slope);
    const value = score(points, fit);
    if (value === 0) return { scatter: Math.sqrt(next), fit };
    if (value > 0) {
      low = next;
      atLow = value;
      if (kept === 1) atHigh *= 0.5;
      kept = 1;
    } else {
      high = next;
      atHigh = value;
      if (kept === -1) atLow *= 0.5;
      kept = -1;
    }
  }
  const s2 = 0.5 * (low + high);
  return { scatter: Math.sqrt(s2), fit: widened(points, s2, fit.slope) };
}

/** Derivative of the log-likelihood to s², times two. */
function score({ x, y }: FitPoints, { slope, intercept, weight }: YorkFit): number {
  let sum = 0;
  for (let i = 0; i < x.length; i++) {
    const w = weight[i] ?? 0;
    const r = (y[i] ?? 0) - intercept - slope * (x[i] ?? 0);
    sum += w * (w * r * r - 1);
  }
  return sum;
}

function residualVariance({ x, y }: FitPoints, { slope, intercept }: YorkFit): number {
  let sum = 0;
  for (let i = 0; i < x.length; i++) {
    const r = (y[i] ?? 0) - intercept - slope * (x[i] ?? 0);
    sum += r * r;
  }
  return sum / x.length;
}

function widened(points: FitPoints, variance: number, start: number): YorkFit {
  return york(widenedPoints(points, variance), start);
}

/** The points with a variance added to every σy²; the error covariance of x and y stays what it was. */
export function widenedPoints(points: FitPoints, variance: number): FitPoints {
  const n = points.x.length;
  const sigmaY = new Float64Array(n);
  const correlation = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const q = points.sigmaY[i] ?? 0;
    const wide = Math.sqrt(q * q + variance);
    sigmaY[i] = wide;
    correlation[i] = wide > 0 ? ((points.correlation[i] ?? 0) * q) / wide : 0;
  }
  return { ...points, sigmaY, correlation };
}
