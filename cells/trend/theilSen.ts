import { CellError } from "../errors";
import { Z_95 } from "../numeric";
import { checkPoints } from "./checkPoints";
import { emptyInfluence } from "./influence";
import type { FitPoints } from "./lineFit";
import type { ScatterLine } from "./ordinaryLeastSquares";

/** More points make more pairs than are sorted while somebody waits. */
const MAX_POINTS = 4000;

/**
 * Theil–Sen: the median of the slopes of all pairs of points with different x (Theil 1950; Sen 1968, J. Am. Stat. Assoc. 63,
 * 1379). Intercept: the median of y − slope·x. σ of the slope is the half-width of Sen's 95 % interval ÷ 1.96, from the
 * normal approximation to Kendall's statistic; the intercept's from the median absolute deviation. Cost n² log n.
 *
 * @throws CellError where there are fewer than 3 points, all x are equal, or more than 4,000 points
 */
export function theilSen(points: FitPoints): ScatterLine {
  checkPoints(points, { needsErrors: false });
  const { x, y } = points;
  const n = x.length;
  if (n > MAX_POINTS)
    throw new CellError(
      "too-many-points",
      `Theil–Sen compares every pair of points and takes up to ${MAX_POINTS} of them; there are ${n}. Choose fewer samples or another method.`,
    );
  const slopes = new Float64Array((n * (n - 1)) / 2);
  let count = 0;
  for (let i = 0; i < n; i++) {
    for (let j = i + 1; j < n; j++) {
      const dx = (x[j] ?? 0) - (x[i] ?? 0);
      if (dx !== 0) slopes[count++] = ((y[j] ?? 0) - (y[i] ?? 0)) / dx;
    }
  }
  const sorted = slopes.subarray(0, count).sort();
  const slope = medianOfSorted(sorted);
  const offsets = Float64Array.from(y, (value, i) => value - slope * (x[i] ?? 0)).sort();
  const intercept = medianOfSorted(offsets);
  const slopeSigma = senInterval(sorted, n) / (2 * Z_95);
  const centre = medianOfSorted(Float64Array.from(x).sort());
  const deviations = Float64Array.from(offsets, (value) => Math.abs(value - intercept)).sort();
  // Of a normal distribution, sd = 1.4826 × median absolute deviation, and σ of a median = 1.2533 sd/√n.
  const residualSd = 1.4826 * medianOfSorted(deviations);
  const heightVariance = (1.2533 * 1.2533 * residualSd * residualSd) / n;
  const slopeVariance = slopeSigma * slopeSigma;
  return {
    slope,
    intercept,
    slopeVariance,
    interceptVariance: heightVariance + centre * centre * slopeVariance,
    covariance: -centre * slopeVariance,
    residualSd,
    influence: influenceOf(points, slope, intercept),
  };
}

/** Width of Sen's 95 % interval of the slope: from the M-th to the M-th from the end of the N slopes, M = (N − C)/2, rounded outwards. */
function senInterval(sorted: Float64Array, n: number): number {
  const half = (Z_95 * Math.sqrt((n * (n - 1) * (2 * n + 5)) / 18)) / 2;
  const low = Math.max(0, Math.floor(sorted.length / 2 - half) - 1);
  const high = Math.min(sorted.length - 1, Math.ceil(sorted.length / 2 + half));
  return (sorted[high] ?? NaN) - (sorted[low] ?? NaN);
}

/**
 * Only the pair or pairs whose slope is the median move it; the intercept follows them and the points at the median
 * offset. Enough for an error that all points share.
 */
function influenceOf({ x, y }: FitPoints, slope: number, intercept: number): ScatterLine["influence"] {
  const n = x.length;
  const made = emptyInfluence(n);
  const pairs = nearestPairs({ x, y }, slope);
  for (const [i, j] of pairs) {
    const dx = (x[j] ?? 0) - (x[i] ?? 0);
    const b = ((y[j] ?? 0) - (y[i] ?? 0)) / dx;
    const share = 1 / pairs.length;
    made.slopeY[j] = (made.slopeY[j] ?? 0) + share / dx;
    made.slopeY[i] = (made.slopeY[i] ?? 0) - share / dx;
    made.slopeX[j] = (made.slopeX[j] ?? 0) - (share * b) / dx;
    made.slopeX[i] = (made.slopeX[i] ?? 0) + (share * b) / dx;
  }
  const offsets = Array.from(x, (value, i) => ({ i, away: Math.abs((y[i] ?? 0) - slope * value - intercept) })).sort((p, q) => p.away - q.away || p.i - q.i);
  const middle = offsets.slice(0, n % 2 === 1 ? 1 : 2);
  let xMiddle = 0;
  for (const { i } of middle) {
    made.interceptY[i] = 1 / middle.length;
    made.interceptX[i] = -slope / middle.length;
    xMiddle += (x[i] ?? 0) / middle.length;
  }
  for (let i = 0; i < n; i++) {
    made.interceptY[i] = (made.interceptY[i] ?? 0) - xMiddle * (made.slopeY[i] ?? 0);
    made.interceptX[i] = (made.interceptX[i] ?? 0) - xMiddle * (made.slopeX[i] ?? 0);
  }
  return made;
}

/** The pair whose slope is the median, or the two whose mean is. */
function nearestPairs({ x, y }: Pick<FitPoints, "x" | "y">, slope: number): [number, number][] {
  let below: [number, number] | undefined;
  let above: [number, number] | undefined;
  let gapBelow = Infinity;
  let gapAbove = Infinity;
  for (let i = 0; i < x.length; i++) {
    for (let j = i + 1; j < x.length; j++) {
      const dx = (x[j] ?? 0) - (x[i] ?? 0);
      if (dx === 0) continue;
      const gap = ((y[j] ?? 0) - (y[i] ?? 0)) / dx - slope;
      if (gap === 0) return [[i, j]];
      if (gap < 0 && -gap < gapBelow) {
        gapBelow = -gap;
        below = [i, j];
      } else if (gap > 0 && gap < gapAbove) {
        gapAbove = gap;
        above = [i, j];
      }
    }
  }
  return [below, above].filter((pair) => pair !== undefined);
}

export function medianOfSorted(sorted: Float64Array): number {
  const half = sorted.length >> 1;
  const upper = sorted[half] ?? NaN;
  return sorted.length % 2 === 1 ? upper : 0.5 * ((sorted[half - 1] ?? NaN) + upper);
}
