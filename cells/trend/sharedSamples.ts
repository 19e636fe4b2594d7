import { aggregateOf, declaredCorrelation, type CommonVariable, type Evaluated } from "../language";
import type { QuantityColumn } from "../table/table";
import { valueAt } from "./choosePoints";
import { covariance } from "./linearForm";
import type { SampleSource } from "./sampleSource";

/** Covariances of slope (0) and intercept (1) of one fit with those of another. */
export type Shared = readonly [readonly [number, number], readonly [number, number]];

const nothing: Shared = [
  [0, 0],
  [0, 0],
];
const known = new WeakMap<SampleSource, WeakMap<SampleSource, Shared>>();

/**
 * Covariance that two fits have because they use the same samples.
 *
 * Where the errors of the shared samples are known to both, or to one of them over the same table, it is the sum over these of
 * J₁ · cov((x₁, y₁), (x₂, y₂)) · J₂ᵀ, with the scatter beyond the errors where both have the same thing on y. Else it is
 * estimated from where the shared samples lie: Σ pull₁ · pull₂ (see pulls.ts; {@link sharedEstimated} says so). Samples are
 * known again by their origins, so that a table and a stack of it share theirs.
 */
export function sharedCovariance(a: SampleSource, b: SampleSource): Shared {
  const found = known.get(a)?.get(b);
  if (found !== undefined) return found;
  const made = within(a, b, wayOf(a, b) === "pulls" ? byPulls(a, b) : byErrors(a, b));
  const inner = known.get(a) ?? new WeakMap<SampleSource, Shared>();
  inner.set(b, made);
  known.set(a, inner);
  return made;
}

/** How many samples two fits share whose part in both is estimated from where they lie, rather than known from their errors. */
export function sharedEstimated(a: SampleSource, b: SampleSource): number {
  return wayOf(a, b) === "pulls" ? new Set(sharedPairs(a, b).map(([i]) => i)).size : 0;
}

function wayOf(a: SampleSource, b: SampleSource): "errors" | "pulls" {
  if (a.table !== b.table) return "pulls";
  if (a.classes !== undefined || b.classes !== undefined)
    return a.classes !== undefined && b.classes !== undefined && a.errors.from === "errors" && b.errors.from === "errors" ? "errors" : "pulls";
  if (a.errors.from === "errors" || b.errors.from === "errors") return "errors";
  return a.errors.from === "residuals" && b.errors.from === "residuals" && a.yMeaning === b.yMeaning ? "errors" : "pulls";
}

/** Two estimates of one covariance may not agree with two σ; it is never larger than their product. */
function within(a: SampleSource, b: SampleSource, shared: Shared): Shared {
  const sigma = ({ covariance: of }: SampleSource, which: 0 | 1): number => Math.sqrt(which === 0 ? of.slopeVariance : of.interceptVariance);
  let most = 1;
  for (const p of [0, 1] as const) for (const q of [0, 1] as const) most = Math.max(most, Math.abs(shared[p][q]) / (sigma(a, p) * sigma(b, q)));
  if (!Number.isFinite(most)) return nothing;
  return most === 1
    ? shared
    : [
        [shared[0][0] / most, shared[0][1] / most],
        [shared[1][0] / most, shared[1][1] / most],
      ];
}

/** Of points i and j of two fits: the covariances of their coordinates. */
interface PointCovariance {
  readonly i: number;
  readonly j: number;
  readonly xx: number;
  readonly xy: number;
  readonly yx: number;
  readonly yy: number;
}

function byErrors(a: SampleSource, b: SampleSource): Shared {
  const pairs = a.classes === undefined ? samplePairs(a, b) : classPairs(a, b);
  if (pairs.length === 0) return nothing;
  const factor = sharedFactor(a, b);
  const entry = (p: 0 | 1, q: 0 | 1): number => {
    const [ax, ay] = p === 0 ? [a.influence.slopeX, a.influence.slopeY] : [a.influence.interceptX, a.influence.interceptY];
    const [bx, by] = q === 0 ? [b.influence.slopeX, b.influence.slopeY] : [b.influence.interceptX, b.influence.interceptY];
    let sum = 0;
    for (const { i, j, xx, xy, yx, yy } of pairs) {
      sum += (ax[i] ?? 0) * (xx * (bx[j] ?? 0) + xy * (by[j] ?? 0));
      sum += (ay[i] ?? 0) * (yx * (bx[j] ?? 0) + yy * (by[j] ?? 0));
    }
    return Number.isFinite(sum) ? factor * sum : 0;
  };
  return [
    [entry(0, 0), entry(0, 1)],
    [entry(1, 0), entry(1, 1)],
  ];
}

function sharedFactor({ errors: a }: SampleSource, { errors: b }: SampleSource): number {
  if (a.from === "errors" && b.from === "errors") return a.factor * b.factor;
  const own = a.from === "errors" ? a.factor : b.factor;
  return own * own;
}

/** What lies off one line lies off the other by the same, where both have the same thing on y. Where one fit knows the errors, its scatter counts. */
function sharedScatter(a: SampleSource, b: SampleSource): number {
  if (a.yMeaning !== b.yMeaning) return 0;
  if (a.errors.from === b.errors.from) return a.errors.extraY * b.errors.extraY;
  const own = a.errors.from === "errors" ? a.errors.extraY : b.errors.extraY;
  return own * own;
}

function samplePairs(a: SampleSource, b: SampleSource): PointCovariance[] {
  const isMeasured = a.errors.from === "errors" || b.errors.from === "errors";
  const none = new Float64Array(1);
  const measured = (first: Evaluated, second: Evaluated): Float64Array => (isMeasured ? first.covariance(second) : none);
  const [xx, xy, yx, yy] = [measured(a.x, b.x), measured(a.x, b.y), measured(a.y, b.x), measured(a.y, b.y)];
  const scatter = sharedScatter(a, b);
  return sameRows(a, b).map(([row, i, j]) => ({
    i,
    j,
    xx: valueAt(xx, row),
    xy: valueAt(xy, row),
    yx: valueAt(yx, row),
    yy: valueAt(yy, row) + scatter,
  }));
}

function classPairs(a: SampleSource, b: SampleSource): PointCovariance[] {
  const scatter = sharedScatter(a, b);
  const form = (terms: NonNullable<SampleSource["classes"]>[number]["x"]) => ({ value: 0, terms });
  return (a.classes ?? []).flatMap((one, i) =>
    (b.classes ?? []).map((other, j): PointCovariance => ({
      i,
      j,
      xx: covariance(form(one.x), form(other.x)),
      xy: covariance(form(one.x), form(other.y)),
      yx: covariance(form(one.y), form(other.x)),
      yy: covariance(form(one.y), form(other.y)) + (one.name === other.name && a.x.splitColumn === b.x.splitColumn ? scatter : 0),
    })),
  );
}

function sameRows(a: SampleSource, b: SampleSource): [row: number, i: number, j: number][] {
  const placeInB = new Map<number, number>();
  b.rows.forEach((row, j) => placeInB.set(row, j));
  const pairs: [number, number, number][] = [];
  a.rows.forEach((row, i) => {
    const j = placeInB.get(row);
    if (j !== undefined) pairs.push([row, i, j]);
  });
  return pairs;
}

function byPulls(a: SampleSource, b: SampleSource): Shared {
  const [one, other] = [a.pulls(), b.pulls()];
  const sums = [0, 0, 0, 0];
  for (const [i, j] of sharedPairs(a, b)) {
    const [as, ai] = [one.slope[i] ?? 0, one.intercept[i] ?? 0];
    const [bs, bi] = [other.slope[j] ?? 0, other.intercept[j] ?? 0];
    sums[0] = (sums[0] ?? 0) + as * bs;
    sums[1] = (sums[1] ?? 0) + as * bi;
    sums[2] = (sums[2] ?? 0) + ai * bs;
    sums[3] = (sums[3] ?? 0) + ai * bi;
  }
  return [
    [sums[0] ?? 0, sums[1] ?? 0],
    [sums[2] ?? 0, sums[3] ?? 0],
  ];
}

/** Places, in the pulls of two fits, of samples that have an origin in common. */
function sharedPairs(a: SampleSource, b: SampleSource): [i: number, j: number][] {
  const originsOf = ({ table }: SampleSource, row: number): string[] => (table.origins[row] ?? []).map((origin) => JSON.stringify([origin.table, origin.row]));
  const inB = new Map<string, number[]>();
  b.pulls().rows.forEach((row, j) => {
    for (const origin of originsOf(b, row)) {
      const places = inB.get(origin);
      if (places === undefined) inB.set(origin, [j]);
      else places.push(j);
    }
  });
  const pairs: [number, number][] = [];
  a.pulls().rows.forEach((row, i) => {
    const met = new Set(originsOf(a, row).flatMap((origin) => inB.get(origin) ?? []));
    for (const j of met) pairs.push([i, j]);
  });
  return pairs;
}

/**
 * Covariance of a fit's slope (0) or intercept (1) with the measured values of a column, row by row: the fit's derivative to
 * its own samples times their errors. 0 at rows that are not in the fit; undefined for a column of another table, or one that
 * has no part in the fit. Canonical in the column, in the fit's own unit for the parameter.
 */
export function columnCovariance(source: SampleSource, which: 0 | 1, column: QuantityColumn): Float64Array | undefined {
  const { table, x, y, rows, influence } = source;
  if (source.classes !== undefined || !table.columns.includes(column)) return undefined;
  const found = new Float64Array(table.rows);
  let isPart = false;
  for (const [evaluated, moves] of [
    [x, which === 0 ? influence.slopeX : influence.interceptX],
    [y, which === 0 ? influence.slopeY : influence.interceptY],
  ] as const) {
    for (const { variable, partial } of evaluated.inputs) {
      const rho = variable.column === column ? undefined : declaredCorrelation(variable, { sort: "column", node: -1, table, column });
      if (variable.column !== column && rho === undefined) continue;
      isPart = true;
      rows.forEach((row, i) => {
        const errors = (variable.column.sigma[row] ?? 0) * (column.sigma[row] ?? 0) * (rho === undefined ? 1 : (rho[row] ?? 0));
        const part = (moves[i] ?? 0) * (partial[row] ?? 0) * errors;
        if (part === part) found[row] = (found[row] ?? 0) + part;
      });
    }
  }
  return isPart ? found : undefined;
}

/** Covariance of a fit's slope (0) or intercept (1) with the mean of some of its samples, from where these lie; 0 for what is no such mean. */
export function aggregateCovariance(source: SampleSource, which: 0 | 1, variable: CommonVariable): number {
  const aggregated = aggregateOf(variable);
  if (aggregated === undefined || (aggregated.name !== "mean" && aggregated.name !== "wmean" && aggregated.name !== "median")) return 0;
  // The rows of an aggregate are those of the table that its columns are of.
  if (!aggregated.measured.columns.some((input) => input.table === source.table)) return 0;
  const { rows, slope, interceptAsFound } = source.pulls();
  const pull = new Map<number, number>();
  rows.forEach((row, i) => pull.set(row, (which === 0 ? slope[i] : interceptAsFound[i]) ?? 0));
  let sum = 0;
  let square = 0;
  aggregated.rows.forEach((row, i) => {
    const share = aggregated.name === "median" ? 1 / aggregated.rows.length : (aggregated.influence[i] ?? 0);
    const own = share * ((aggregated.measured.value[row] ?? NaN) - aggregated.value);
    sum += (pull.get(row) ?? 0) * own;
    square += own * own;
  });
  // The mean's own pulls, scaled to its σ as the line's are to the line's.
  sum *= variable.sigma / Math.sqrt(square);
  if (sum !== sum) return 0;
  const sigma = Math.sqrt(which === 0 ? source.covariance.slopeVariance : source.covariance.interceptVariance);
  const bound = sigma * variable.sigma;
  return bound === bound ? Math.max(-bound, Math.min(bound, sum)) : 0;
}
