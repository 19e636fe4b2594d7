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
/** The last digits may go round in a circle: a step this small that is no smaller than the one before is as near as it gets. */
const CIRCLE = 1e-13;
/** Steps within this part of the slope are near enough to a solution for Newton's. */
const NEAR = 0.01;
/** Error correlations beyond this make several minima of S likely, so several starts are tried. */
const STRONG_CORRELATION = 0.7;
/** With more points than this, starts come from a part of them. */
const MANY = 1000;

/** A slope to start from, and a point that the line is known to pass near. */
interface Start {
  readonly slope: number;
  readonly through?: readonly [x: number, y: number];
}

/**
 * The line with errors on both axes, correlated point by point.
 *
 * York, Evensen, Martínez & De Basabe 2004, Am. J. Phys. 72, 367: their unified equations (13), with weights written in
 * variances, so that σ = 0 on one axis is allowed; solved by their own iteration while far and by Newton's steps when near.
 * σ of slope and intercept from the adjusted points (their equations 13–14 of section III); they agree with maximum
 * likelihood (Titterington & Halliday 1979). Cost n × iterations.
 *
 * @param start a slope known to be near, to be tried first
 * @throws CellError where there are fewer than 3 points, all x are equal, or a point has σ = 0 on both axes
 */
export function york(points: FitPoints, start?: number): YorkFit {
  checkPoints(points, { needsErrors: true });
  const strong = anyBeyond(points.correlation, STRONG_CORRELATION);
  const given = start === undefined ? [] : [startAt(start)];
  let fit: YorkFit | undefined;
  if (points.x.length > MANY) {
    const near = start === undefined || strong ? startsOfPart(points, strong) : [];
    fit = bestFrom(points, [...given, ...near], strong);
    if (fit?.converged) return fit;
  }
  const other = bestFrom(points, [...given, ...startingSlopes(points).map(startAt)], strong);
  return other !== undefined && better(other, fit) ? other : (fit ?? failed(points));
}

/** The same line, followed from one slope that is known to be near; all the starts are tried only where that comes to no rest. */
export function yorkNear(points: FitPoints, start: number): YorkFit {
  const fit = yorkFrom(points, startAt(start));
  return fit?.converged === true ? fit : york(points, start);
}

/** The least S that the starts lead to. Unless all are asked for, those are left out that begin above what has converged. */
function bestFrom(points: FitPoints, starts: readonly Start[], all: boolean): YorkFit | undefined {
  let best: YorkFit | undefined;
  for (const start of starts) {
    if (!all && best?.converged && !(distancesAt(points, start.slope) < best.S)) continue;
    const fit = yorkFrom(points, start);
    if (fit !== undefined && better(fit, best)) best = fit;
  }
  return best;
}

/**
 * Where the fit of some of the points, evenly taken, comes to rest: near the fit of them all. Where correlations are strong,
 * each of its minima, but none at which S of all points is more than twice the least: a sixteenth of 1000 points, 6σ off, is
 * not that far above the minimum next to it.
 */
function startsOfPart(points: FitPoints, strong: boolean): readonly Start[] {
  const part = partOf(points);
  const slopes = startingSlopes(part);
  const fits = strong ? promising(part, slopes).map((slope) => yorkFrom(part, { slope })) : [bestFrom(part, slopes.map(startAt), false)];
  const found: number[] = [];
  for (const fit of fits) {
    if (!fit?.converged || found.some((slope) => Math.abs(slope - fit.slope) <= 1e-9 * Math.abs(slope))) continue;
    found.push(fit.slope);
  }
  const starts = found.map((slope): Start => ({ slope, through: weigh(part, slope) }));
  if (starts.length < 2) return starts;
  const tried = starts.map((each) => ({ each, S: distancesAt(points, each.slope) })).sort((p, q) => p.S - q.S);
  const least = tried[0]?.S ?? Infinity;
  return tried.filter(({ S }) => S <= 2 * least).map(({ each }) => each);
}

function startAt(slope: number): Start {
  return { slope };
}

/** Every so many-th point: a sixteenth of them, but 512 to 4096. */
function partOf({ x, y, sigmaX, sigmaY, correlation }: FitPoints): FitPoints {
  const n = x.length;
  const every = Math.ceil(n / Math.min(4096, Math.max(512, n / 16)));
  const take = (from: Float64Array): Float64Array => {
    const taken = new Float64Array(Math.ceil(n / every));
    for (let i = 0; i < taken.length; i++) taken[i] = from[i * every] as number;
    return taken;
  };
  return { x: take(x), y: take(y), sigmaX: take(sigmaX), sigmaY: take(sigmaY), correlation: take(correlation) };
}

/** The slopes among these from which S falls to neither side, least S first. */
function promising(points: FitPoints, slopes: readonly number[]): number[] {
  const tried = [...slopes].sort((p, q) => p - q).map((slope) => ({ slope, S: distancesAt(points, slope) }));
  return tried
    .filter(({ S }, i) => S <= (tried[i - 1]?.S ?? Infinity) && S <= (tried[i + 1]?.S ?? Infinity))
    .sort((p, q) => p.S - q.S)
    .map(({ slope }) => slope);
}

/** S at a slope, the intercept at its best. */
function distancesAt(points: FitPoints, slope: number): number {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const [xMean, yMean] = weigh(points, slope);
  let S = 0;
  for (let i = 0; i < x.length; i++) {
    const p = sigmaX[i] as number;
    const q = sigmaY[i] as number;
    const r = (y[i] as number) - yMean - slope * ((x[i] as number) - xMean);
    S += (r * r) / (q * q + slope * (slope * p * p - 2 * (correlation[i] as number) * p * q));
  }
  return S;
}

function anyBeyond(values: Float64Array, limit: number): boolean {
  for (let i = 0; i < values.length; i++) if (Math.abs(values[i] as number) > limit) return true;
  return false;
}

function better(fit: YorkFit, than: YorkFit | undefined): boolean {
  if (than === undefined) return true;
  if (fit.converged !== than.converged) return fit.converged;
  return fit.S < than.S;
}

/** Follows one start to its end; undefined where it runs off to no number. */
function yorkFrom(points: FitPoints, start: Start): YorkFit | undefined {
  const line = solve(points, start);
  return line === undefined ? undefined : summarise(points, line.slope, line.converged);
}

/** Iterates the slope from one start; undefined where it runs off to no number. */
function solve(points: FitPoints, start: Start): { readonly slope: number; readonly converged: boolean } | undefined {
  let { slope, through } = start;
  // The line is y = through y + height + slope (x − through x).
  let height = 0;
  let near = through !== undefined;
  let last = Infinity;
  for (let step = 0; step < MAX_STEPS; step++) {
    let next: number;
    if (near && through !== undefined) {
      const [bySlope, byHeight] = newtonStep(points, slope, height, through);
      near = Math.abs(bySlope) <= NEAR * Math.abs(slope);
      // Not near a minimum after all.
      if (!near) continue;
      next = slope + bySlope;
      height += byHeight;
    } else {
      through = weigh(points, slope);
      height = 0;
      next = yorkStep(points, slope, through);
      near = Math.abs(next - slope) <= NEAR * Math.abs(next);
    }
    if (!Number.isFinite(next)) return undefined;
    const moved = Math.abs(next - slope);
    slope = next;
    if (moved <= TOLERANCE * Math.abs(next) || (moved >= last && moved <= CIRCLE * Math.abs(next))) return { slope, converged: true };
    last = moved;
  }
  return { slope, converged: false };
}

/**
 * Newton's step of slope and height towards the least S: with w the weight and r the distance in y, S = Σwr² is least where
 * Σwr = 0 and Σwrβ = 0 (York's equation for the slope), β = u + wr(bσx² − cov) the adjusted x.
 *
 * @returns NaN where S has no minimum in the neighbourhood
 */
function newtonStep(points: FitPoints, slope: number, height: number, [x0, y0]: readonly [number, number]): [bySlope: number, byHeight: number] {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const n = x.length;
  const up = y0 + height;
  let sumR = 0;
  let sumRBeta = 0;
  let hh = 0;
  let hs = 0;
  let ss = 0;
  for (let i = 0; i < n; i++) {
    const p = sigmaX[i] as number;
    const q = sigmaY[i] as number;
    const common = (correlation[i] as number) * p * q;
    const k = slope * p * p - common;
    const w = 1 / (q * q + slope * (k - common));
    const u = (x[i] as number) - x0;
    const r = w * ((y[i] as number) - up - slope * u);
    const t = r * k;
    const z = u + t + t;
    const wz = w * z;
    sumR += r;
    sumRBeta += r * (u + t);
    hh += w;
    hs += wz;
    ss += wz * z - r * r * (p * p);
  }
  const determinant = hh * ss - hs * hs;
  if (!(determinant > 0)) return [Number.NaN, Number.NaN];
  const bySlope = (hh * sumRBeta - hs * sumR) / determinant;
  return [bySlope, (sumR - hs * bySlope) / hh];
}

/** The next slope by York's own iteration, the line going through the weighted means. */
function yorkStep(points: FitPoints, slope: number, [xMean, yMean]: readonly [number, number]): number {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const n = x.length;
  let above = 0;
  let below = 0;
  for (let i = 0; i < n; i++) {
    const p = sigmaX[i] as number;
    const q = sigmaY[i] as number;
    const common = (correlation[i] as number) * p * q;
    const w = 1 / (q * q + slope * (slope * p * p - 2 * common));
    const u = (x[i] as number) - xMean;
    const v = (y[i] as number) - yMean;
    const beta = w * w * (u * q * q + slope * v * p * p - (slope * u + v) * common);
    above += beta * v;
    below += beta * u;
  }
  return above / below;
}

/** The weighted means of x and y at a slope. */
function weigh(points: FitPoints, slope: number, weight?: Float64Array): [xMean: number, yMean: number] {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const n = x.length;
  const x0 = x[0] ?? 0;
  const y0 = y[0] ?? 0;
  let sum = 0;
  let sumX = 0;
  let sumY = 0;
  for (let i = 0; i < n; i++) {
    const p = sigmaX[i] as number;
    const q = sigmaY[i] as number;
    const w = 1 / (q * q + slope * (slope * p * p - 2 * (correlation[i] as number) * p * q));
    if (weight !== undefined) weight[i] = w;
    sum += w;
    // Taken from the first point, so that data far from the origin keep their digits.
    sumX += w * ((x[i] as number) - x0);
    sumY += w * ((y[i] as number) - y0);
  }
  return [x0 + sumX / sum, y0 + sumY / sum];
}

/** Intercept, covariance and S at the fitted slope. */
function summarise(points: FitPoints, slope: number, converged: boolean): YorkFit | undefined {
  const { x, y, sigmaX, sigmaY, correlation } = points;
  const n = x.length;
  const weight = new Float64Array(n);
  const [xMean, yMean] = weigh(points, slope, weight);
  let sum = 0;
  let sumBeta = 0;
  let sumSquare = 0;
  let S = 0;
  for (let i = 0; i < n; i++) {
    const p = sigmaX[i] as number;
    const q = sigmaY[i] as number;
    const w = weight[i] as number;
    const u = (x[i] as number) - xMean;
    const r = (y[i] as number) - yMean - slope * u;
    const wr = w * r;
    const beta = u + wr * (slope * p * p - (correlation[i] as number) * p * q);
    sum += w;
    sumBeta += w * beta;
    sumSquare += w * beta * beta;
    S += wr * r;
  }
  // β is counted from the mean of x, which is not far from its own mean: little is lost in the difference.
  const betaMean = sumBeta / sum;
  const slopeVariance = 1 / (sumSquare - betaMean * sumBeta);
  const adjustedMean = xMean + betaMean;
  const fit: YorkFit = {
    slope,
    intercept: yMean - slope * xMean,
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
