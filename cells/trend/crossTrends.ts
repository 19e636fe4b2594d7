import type { Problem } from "../errors";
import { CHI2_95_TWO, createRandom, inverseForm2, type Symmetric2 } from "../numeric";
import type { BodyDistance, Crossing, Curve, Uncertain } from "../page/results";
import { formatNumber, formatUncertain } from "../quantity/format";
import { convertForm, unitFactor } from "./bodyPoint";
import { crossing, crossingCovariance, type CrossingPoint, type LineForms } from "./crossing";
import { distanceOfPoints, type Distance, type PointForms } from "./distance";
import { jointDraws } from "./jointDraws";
import { combine, hasUnknown, variance, type LinearForm } from "./linearForm";
import { ellipseCurve, simulatedRegion } from "./region";
import { sharedEstimated } from "./sharedSamples";
import type { AxisOfFit, TrendFit } from "./trendFit";

/** Where two trends cross, ready for results, and the curve that holds 95 % of where they may. */
export interface TrendsCrossed {
  readonly crossing?: Crossing;
  readonly region?: Curve;
  /** The crossing to first order, with what it depends on. */
  readonly point?: CrossingPoint;
  readonly problems: readonly Problem[];
}

/** Slopes nearer than this many σ to each other leave open whether the lines cross at all. */
const KNOWN = 3;
/** From here on the crossing's errors are normal enough for an ellipse. */
const ELLIPSE = 6;
const DRAWS = 10_000;
const SEED = 1;
/** Share of a normal distribution within 1σ. */
const WITHIN_1_SIGMA = 0.6826894921370859;

/**
 * Crosses a trend with another: by the delta method where their slopes differ by 6σ or more, by a seeded simulation from 3σ
 * on, and not at all below.
 *
 * @param bodies where the page's bodies lie on the first trend's axes
 */
export function crossTrends(block: string, first: TrendFit, second: TrendFit, bodies: readonly { body: string; point: PointForms }[]): TrendsCrossed {
  const at = { block, field: "crossWith" } as const;
  const error = (code: string, text: string): TrendsCrossed => ({ problems: [{ code, severity: "error", ...at, text }] });
  if (first.handle === second.handle)
    return error("crossed-with-itself", `${block} is crossed with itself, and a line meets itself everywhere. Choose another trend.`);
  const refused = disagree(first, second);
  if (refused !== undefined) return error(refused.code, refused.text);
  const other = onAxesOf(first, second);
  if (other === undefined) return error("unit-mismatch", `The axes of ${second.handle} do not convert to those of ${first.handle}.`);
  const point = crossing(first.line, other);
  if (!(point.separation >= KNOWN)) return error("crossing-not-known", tooNear(first, second, other, point.separation));

  const problems = warnings(first, second).map((problem): Problem => ({ ...problem, ...at }));
  const made = point.separation < ELLIPSE ? simulated(first.line, other, point, bodies) : byDelta(point, bodies);
  if (made.region === "simulated")
    problems.push({
      code: "crossing-simulated",
      severity: "note",
      ...at,
      text: `The slopes of ${first.handle} and ${second.handle} differ by only ${formatNumber(point.separation, 2)}σ, so the region of their crossing is simulated (${DRAWS} draws) and no ellipse; its σ are half the width that holds 68 % of the draws.`,
    });
  const { curve, ...rest } = made;
  return { crossing: { with: second.handle, ...rest }, region: curve, point, problems };
}

function tooNear(first: TrendFit, second: TrendFit, other: LineForms, separation: number): string {
  const slope = (line: LineForms): string => formatUncertain(line.slope.value, Math.sqrt(variance(line.slope)));
  const apart = Number.isFinite(separation) ? `differ by ${formatNumber(separation, 2)}σ` : "do not differ";
  return `The slopes of ${first.handle} (${slope(first.line)}) and ${second.handle} (${slope(other)}) ${apart}; below ${KNOWN}σ it is not known where the lines cross. Use more samples, samples that spread further along x, or smaller errors.`;
}

/** What both axes must have alike. */
function disagree(first: TrendFit, second: TrendFit): { code: string; text: string } | undefined {
  for (const axis of ["x", "y"] as const) {
    const [a, b] = [first[axis], second[axis]];
    if (unitFactor(a.unit, b.unit) === undefined)
      return {
        code: "unit-mismatch",
        text: `On ${axis}, ${first.handle} is in ${a.unit.symbol} and ${second.handle} in ${b.unit.symbol}. Only lines over the same quantities cross; give both trends the same ${axis}.`,
      };
    if (a.basis !== b.basis)
      return {
        code: "basis-mismatch",
        text: `On ${axis}, ${first.handle} is ${basisInWords(a)} and ${second.handle} ${basisInWords(b)}. Only lines over the same quantities cross; give both trends the same ${axis}.`,
      };
  }
  return undefined;
}

function basisInWords({ basis, remark }: AxisOfFit): string {
  return basis === null ? (remark ?? "without a basis") : basis === "formula units" ? "a ratio of formula units" : `a ratio by ${basis}`;
}

function warnings(first: TrendFit, second: TrendFit): Pick<Problem, "code" | "severity" | "text">[] {
  const found: Pick<Problem, "code" | "severity" | "text">[] = [];
  for (const axis of ["x", "y"] as const) {
    const [a, b] = [first[axis].meaning, second[axis].meaning];
    if (a !== b)
      found.push({
        code: "different-axes",
        severity: "warning",
        text: `On ${axis}, ${first.handle} has ${a} and ${second.handle} ${b}. Their crossing means something only where these are one quantity.`,
      });
  }
  const estimated = sharedEstimated(first.source, second.source);
  if (estimated > 0)
    found.push({
      code: "shared-samples",
      severity: "note",
      text: `${first.handle} and ${second.handle} share ${estimated} ${estimated === 1 ? "sample" : "samples"}; what their errors thereby have in common is in the crossing's σ, estimated from how ${estimated === 1 ? "it lies" : "these lie"} off both lines.`,
    });
  return found;
}

/** The second trend's line in the units of the first. */
export function onAxesOf(first: TrendFit, second: TrendFit): LineForms | undefined {
  const { slope, intercept } = second.line;
  const byX = unitFactor(second.x.unit, first.x.unit);
  const byY = unitFactor(second.y.unit, first.y.unit);
  const zeroX = convertForm({ value: 0, terms: [] }, second.x.unit, first.x.unit)?.value;
  const zeroY = convertForm({ value: 0, terms: [] }, second.y.unit, first.y.unit)?.value;
  if (byX === undefined || byY === undefined || zeroX === undefined || zeroY === undefined) return undefined;
  const steep = combine((slope.value * byY) / byX, [[slope, byY / byX]]);
  return {
    slope: steep,
    intercept: combine(intercept.value * byY + zeroY - steep.value * zeroX, [
      [intercept, byY],
      [steep, -zeroX],
    ]),
  };
}

type Numbers = Omit<Crossing, "with"> & { readonly curve: Curve };

function byDelta(point: CrossingPoint, bodies: readonly { body: string; point: PointForms }[]): Numbers {
  const covariance = crossingCovariance(point);
  const m: Symmetric2 = { xx: variance(point.x), xy: covariance, yy: variance(point.y) };
  return {
    x: uncertain(point.x.value, Math.sqrt(m.xx), point.x),
    y: uncertain(point.y.value, Math.sqrt(m.yy), point.y),
    covariance,
    region: "ellipse",
    fromBodies: bodies.flatMap(({ body, point: where }) => bodyDistance(body, distanceOfPoints(point, where))),
    curve: ellipseCurve(point.x.value, point.y.value, m, Math.sqrt(CHI2_95_TWO)),
  };
}

function uncertain(value: number, sigma: number, form: LinearForm): Uncertain {
  return { value, sigma, ...(hasUnknown(form) ? { sigmaIs: "lower bound" as const } : {}) };
}

export function bodyDistance(body: string, found: Distance | undefined): BodyDistance[] {
  if (found === undefined) return [];
  return [{ body, distance: found.distance, p: found.p, ...(found.upperBound ? { distanceIs: "upper bound" as const } : {}) }];
}

/**
 * The crossing's region by simulation: slopes and intercepts of both lines, with each body, are drawn jointly normal and
 * crossed each time. σ are half the width that holds 68.27 %; the covariance comes from such widths of u + v and u − v
 * (Gnanadesikan & Kettenring 1972, Biometrics 28, 81), since a ratio of normal numbers has no moments. p of a body is the
 * share of draws further from the crossing than it.
 */
function simulated(first: LineForms, second: LineForms, point: CrossingPoint, bodies: readonly { body: string; point: PointForms }[]): Numbers {
  const lines = [first.slope, first.intercept, second.slope, second.intercept];
  const [x, y] = crossDraws(jointDraws(lines, DRAWS, createRandom(SEED)));
  const m = robustCovariance(x, y);
  return {
    x: uncertain(point.x.value, Math.sqrt(m.xx), point.x),
    y: uncertain(point.y.value, Math.sqrt(m.yy), point.y),
    covariance: m.xy,
    region: "simulated",
    fromBodies: bodies.flatMap(({ body, point: where }) => {
      const draws = jointDraws([...lines, where.x, where.y], DRAWS, createRandom(SEED));
      const [cx, cy] = crossDraws(draws);
      const dx = cx.map((value, k) => value - (draws[4]?.[k] ?? NaN));
      const dy = cy.map((value, k) => value - (draws[5]?.[k] ?? NaN));
      return bodyDistance(
        body,
        simulatedDistance(dx, dy, point.x.value - where.x.value, point.y.value - where.y.value, hasUnknown(where.x) || hasUnknown(where.y)),
      );
    }),
    curve: simulatedRegion(x, y, { x: point.x.value, y: point.y.value }, m, 0.95),
  };
}

function simulatedDistance(dx: Float64Array, dy: Float64Array, x: number, y: number, bodyUnknown: boolean): Distance | undefined {
  const m = robustCovariance(dx, dy);
  const own = inverseForm2(m, x, y);
  if (!Number.isFinite(own)) return undefined;
  let further = 0;
  for (let k = 0; k < dx.length; k++) if (inverseForm2(m, (dx[k] ?? NaN) - x, (dy[k] ?? NaN) - y) >= own) further++;
  return { distance: Math.sqrt(own), p: (further + 1) / (dx.length + 1), upperBound: bodyUnknown };
}

function crossDraws([b1, a1, b2, a2]: readonly Float64Array[]): [x: Float64Array, y: Float64Array] {
  const n = b1?.length ?? 0;
  const x = new Float64Array(n);
  const y = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    const slope = b1?.[k] ?? NaN;
    x[k] = ((a2?.[k] ?? NaN) - (a1?.[k] ?? NaN)) / (slope - (b2?.[k] ?? NaN));
    y[k] = (a1?.[k] ?? NaN) + slope * (x[k] ?? NaN);
  }
  return [x, y];
}

function robustCovariance(x: Float64Array, y: Float64Array): Symmetric2 {
  const sx = halfWidth(x);
  const sy = halfWidth(y);
  const sum = halfWidth(x.map((value, k) => value / sx + (y[k] ?? NaN) / sy));
  const difference = halfWidth(x.map((value, k) => value / sx - (y[k] ?? NaN) / sy));
  const [plus, minus] = [sum * sum, difference * difference];
  return { xx: sx * sx, xy: sx * sy * ((plus - minus) / (plus + minus)), yy: sy * sy };
}

/** Half the width of the middle that holds 68.27 %. */
function halfWidth(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  const at = (share: number): number => sorted[Math.min(sorted.length - 1, Math.max(0, Math.floor(share * sorted.length)))] ?? NaN;
  return 0.5 * (at(0.5 + WITHIN_1_SIGMA / 2) - at(0.5 - WITHIN_1_SIGMA / 2));
}

/** Under this key a trend's result carries its crossing's 95 % region and what the crossing depends on. */
const crossedKey = Symbol("crossing");
type Crossed = Pick<TrendsCrossed, "region" | "point">;
type WithCrossed<T> = T & { readonly [crossedKey]?: Crossed };

export function withCrossed<T extends object>(result: T, { region, point }: Crossed): T {
  if (region === undefined || point === undefined) return result;
  const made: WithCrossed<T> = { ...result, [crossedKey]: { region, point } };
  return made;
}

/** Closed curve of the region that holds 95 % of where a trend's crossing may be; undefined where it has no crossing. */
export function crossingRegionOf(result: object): Curve | undefined {
  return (result as WithCrossed<object>)[crossedKey]?.region;
}

/** The crossing to first order, in the units of the trend's axes, with what it depends on; undefined where there is none. */
export function crossingOf(result: object): CrossingPoint | undefined {
  return (result as WithCrossed<object>)[crossedKey]?.point;
}
