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
 * The root of the score is bracketed and halved in s²; where the score is not positive at s = 0 the scatter is 0.
 */
export function intrinsicScatter(points: FitPoints, plain: YorkFit): ScatterFit {
  if (!(score(points, plain) > 0)) return { scatter: 0, fit: plain };
  let high = residualVariance(points, plain);
  let low = 0;
  let fit = widened(points, high);
  while (score(points, fit) > 0) {
    low = high;
    high *= 4;
    fit = widened(points, high);
    if (!Number.isFinite(high)) return { scatter: NaN, fit: plain };
  }
  for (let step = 0; step < 200; step++) {
    const middle = 0.5 * (low + high);
    if (middle <= low || middle >= high || high - low <= 1e-14 * high) break;
    fit = widened(points, middle);
    if (score(points, fit) > 0) low = middle;
    else high = middle;
  }
  const s2 = 0.5 * (low + high);
  return { scatter: Math.sqrt(s2), fit: widened(points, s2) };
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

/** The York fit with a variance added to every σy; the error covariance of x and y stays what it was. */
export function widened(points: FitPoints, variance: number): YorkFit {
  const n = points.x.length;
  const sigmaY = new Float64Array(n);
  const correlation = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const q = points.sigmaY[i] ?? 0;
    const wide = Math.sqrt(q * q + variance);
    sigmaY[i] = wide;
    correlation[i] = ((points.correlation[i] ?? 0) * q) / wide;
  }
  return york({ ...points, sigmaY, correlation });
}
