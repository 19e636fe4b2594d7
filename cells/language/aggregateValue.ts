import type { AggregateName } from "./functions";
import type { Measurement } from "./measure";
import { deviationOf, gather, meanOf, middlePlaces, sampleCovariance } from "./statistics";

/** Ratio of the σ of a median to that of a mean, for normal samples: √(π/2). */
const MEDIAN = 1.2533141373155001;

/** One number drawn from some rows of a measured expression. */
export interface AggregateValue {
  readonly name: AggregateName;
  readonly value: number;
  readonly sigma: number;
  /** Rows of the table that went into it, ascending. */
  readonly rows: Int32Array;
  /** Derivative of the number with respect to each of those rows' values. */
  readonly influence: Float64Array;
  readonly measured: Measurement;
  /** Of a weighted mean: σ with the scatter, and the mean square of weighted deviates. */
  readonly external?: number;
  readonly mswd?: number;
}

/**
 * Calculates an aggregate over rows that are present.
 *
 * σ: mean sd/√n; median 1.2533 sd/√n; sd sd/√(2(n − 1)) and se likewise (normal samples); wmean the internal 1/√Σw; least and
 * most that of the sample; count exact. NaN where n is too small for one.
 */
export function aggregateValue(name: AggregateName, measured: Measurement, rows: Int32Array): AggregateValue {
  const x = gather(measured.value, rows);
  const n = x.length;
  const base = { name, rows, measured };
  const flat = (share: number): Float64Array => new Float64Array(n).fill(share);
  if (name === "count") return { ...base, value: n, sigma: 0, influence: flat(0) };
  if (n === 0) return { ...base, value: Number.NaN, sigma: Number.NaN, influence: flat(0) };
  const mean = meanOf(x);
  const sd = deviationOf(x, mean);
  const root = Math.sqrt(n);
  switch (name) {
    case "mean":
      return { ...base, value: mean, sigma: sd / root, influence: flat(1 / n) };
    case "median": {
      const places = middlePlaces(x);
      const influence = flat(0);
      for (const place of places) influence[place] = 1 / places.length;
      return { ...base, value: meanOf(places.map((place) => x[place] as number)), sigma: (MEDIAN * sd) / root, influence };
    }
    case "sd":
    case "se": {
      const scale = name === "sd" ? 1 : 1 / root;
      const influence = x.map((value) => (scale * (value - mean)) / ((n - 1) * sd));
      return { ...base, value: sd * scale, sigma: (sd * scale) / Math.sqrt(2 * (n - 1)), influence };
    }
    case "least":
    case "most":
      return { ...base, ...extreme(name, x, measured, rows) };
    case "wmean":
      return weighted(measured, rows);
  }
}

function extreme(name: "least" | "most", x: Float64Array, measured: Measurement, rows: Int32Array): Pick<AggregateValue, "value" | "sigma" | "influence"> {
  let place = 0;
  for (let i = 1; i < x.length; i++) if (name === "least" ? (x[i] as number) < (x[place] as number) : (x[i] as number) > (x[place] as number)) place = i;
  const influence = new Float64Array(x.length);
  influence[place] = 1;
  return { value: x[place] as number, sigma: measured.sigmaPerSample[rows[place] as number] as number, influence };
}

/** Weights are 1/σ² of the samples alone: what is common to all samples does not weigh. Samples without σ, or with σ = 0, are left out. */
function weighted(measured: Measurement, all: Int32Array): AggregateValue {
  const rows = all.filter((row) => (measured.sigmaPerSample[row] as number) > 0);
  const weights = gather(measured.sigmaPerSample, rows).map((sigma) => 1 / (sigma * sigma));
  let total = 0;
  let sum = 0;
  rows.forEach((row, i) => {
    total += weights[i] as number;
    sum += (weights[i] as number) * (measured.value[row] as number);
  });
  const value = sum / total;
  let chi = 0;
  rows.forEach((row, i) => {
    const d = (measured.value[row] as number) - value;
    chi += (weights[i] as number) * d * d;
  });
  const sigma = 1 / Math.sqrt(total);
  const mswd = rows.length > 1 ? chi / (rows.length - 1) : Number.NaN;
  const influence = weights.map((weight) => weight / total);
  const known = rows.length > 0;
  return {
    name: "wmean",
    value: known ? value : Number.NaN,
    sigma: known ? sigma : Number.NaN,
    rows,
    influence,
    measured,
    mswd,
    external: sigma * Math.sqrt(mswd),
  };
}

/**
 * Covariance of two aggregates over the same table, from the rows both use. Means and medians: sample covariance times Σ aᵢbᵢ
 * (s_xy / n for two means); two weighted means: Σ aᵢbᵢ cov(xᵢ, yᵢ) of the measured errors; deviations: ρ² σ σ, and
 * independent of means (normal samples); the others 0.
 */
export function aggregateCovariance(a: AggregateValue, b: AggregateValue, errorCovariance: (row: number) => number): number {
  if (a.name === "count" || b.name === "count") return 0;
  const [atA, atB] = sharedPlaces(a.rows, b.rows);
  if (atA.length === 0) return 0;
  const extremes = (x: AggregateValue): boolean => x.name === "least" || x.name === "most";
  if ((a.name === "wmean" && b.name === "wmean") || (extremes(a) && extremes(b))) {
    let sum = 0;
    atA.forEach((i, k) => {
      const share = (a.influence[i] as number) * (b.influence[atB[k] as number] as number);
      if (share !== 0) sum += share * errorCovariance(a.rows[i] as number);
    });
    return within(sum, a, b);
  }
  if (extremes(a) || extremes(b)) return 0;
  const spread = (x: AggregateValue): boolean => x.name === "sd" || x.name === "se";
  if (spread(a) !== spread(b)) return 0;
  const x = gather(
    a.measured.value,
    atA.map((i) => a.rows[i] as number),
  );
  const y = gather(
    b.measured.value,
    atB.map((i) => b.rows[i] as number),
  );
  if (spread(a)) {
    const rho = sampleCovariance(x, y) / (deviationOf(x) * deviationOf(y));
    return within((rho * rho * a.sigma * b.sigma * x.length) / Math.sqrt(a.rows.length * b.rows.length), a, b);
  }
  const weight = (of: AggregateValue, place: number): number => (of.name === "median" ? 1 / of.rows.length : (of.influence[place] as number));
  let shared = 0;
  atA.forEach((i, k) => (shared += weight(a, i) * weight(b, atB[k] as number)));
  const medians = a.name === "median" && b.name === "median" ? MEDIAN * MEDIAN : 1;
  return within(medians * shared * sampleCovariance(x, y), a, b);
}

/** A covariance is never larger than the product of the two σ; where a σ is unknown, it is 0. */
function within(covariance: number, a: AggregateValue, b: AggregateValue): number {
  const bound = a.sigma * b.sigma;
  return covariance === covariance && bound === bound ? Math.max(-bound, Math.min(bound, covariance)) : 0;
}

/** Places, in two ascending lists of rows, of the rows that are in both. */
function sharedPlaces(a: Int32Array, b: Int32Array): [Int32Array, Int32Array] {
  const inA = new Int32Array(Math.min(a.length, b.length));
  const inB = new Int32Array(inA.length);
  let n = 0;
  for (let i = 0, j = 0; i < a.length && j < b.length;) {
    const [x, y] = [a[i] as number, b[j] as number];
    if (x === y) {
      inA[n] = i;
      inB[n++] = j;
    }
    if (x <= y) i++;
    if (y <= x) j++;
  }
  return [inA.subarray(0, n), inB.subarray(0, n)];
}
