import type { FittedLine } from "./fitLine";
import type { FitPoints } from "./lineFit";
import { moments } from "./moments";

/** What each sample, by lying where it does, brought to a line: contributions whose squares add up to the line's variances. */
export interface Pulls extends RawPulls {
  /** Rows of the fit's table. */
  readonly rows: Int32Array;
  /** The intercept's as they are but for their size: products with the slope's are then not exactly the line's own covariance. */
  readonly interceptAsFound: Float64Array;
}

export interface RawPulls {
  readonly slope: Float64Array;
  readonly intercept: Float64Array;
}

/**
 * Each point's pull on a line: its influence function at the point itself, so that Σ pull² is the infinitesimal-jackknife
 * variance (Efron 1982, The Jackknife, the Bootstrap and Other Resampling Plans, ch. 6, from memory). For York and least
 * squares the derivative to y times the distance from the line; for the reduced major axis (b/2)(v²/Σv² − u²/Σu²), with u and v
 * from the means; for Theil–Sen the point's share in Kendall's statistic (Sen 1968, J. Am. Stat. Assoc. 63, 1379), up to a
 * factor. Raw: {@link calibrated} gives them the line's own σ.
 *
 * Cost n, for Theil–Sen n².
 */
export function rawPulls(method: string, points: FitPoints, line: Pick<FittedLine, "slope" | "intercept" | "ofErrors">): RawPulls {
  const n = points.x.length;
  const slope = new Float64Array(n);
  const intercept = new Float64Array(n);
  const away = Float64Array.from(points.y, (y, i) => y - line.intercept - line.slope * (points.x[i] ?? 0));
  if (method === "reduced major axis") {
    const { xMean, yMean, xx, yy } = moments(points);
    for (let i = 0; i < n; i++) {
      const u = (points.x[i] ?? 0) - xMean;
      const v = (points.y[i] ?? 0) - yMean;
      const pull = 0.5 * line.slope * ((v * v) / yy - (u * u) / xx);
      slope[i] = pull;
      intercept[i] = (away[i] ?? 0) / n - xMean * pull;
    }
    return { slope, intercept };
  }
  if (method === "theil-sen") {
    const { x } = points;
    for (let i = 0; i < n; i++) {
      let concordance = 0;
      for (let j = 0; j < n; j++) concordance += signOf(((away[i] ?? 0) - (away[j] ?? 0)) * ((x[i] ?? 0) - (x[j] ?? 0)));
      slope[i] = concordance;
      intercept[i] = signOf(away[i] ?? 0);
    }
    return { slope, intercept };
  }
  for (let i = 0; i < n; i++) {
    slope[i] = (line.ofErrors.slopeY[i] ?? 0) * (away[i] ?? 0);
    intercept[i] = (line.ofErrors.interceptY[i] ?? 0) * (away[i] ?? 0);
  }
  return { slope, intercept };
}

/**
 * Pulls scaled to a line's covariance, so that their sums of squares and products are that covariance to the last digits. The
 * intercept's part along the slope's is replaced by what the covariance says, so any multiple of the slope's pulls may be in it.
 * All zero where every point lies on the line, to rounding.
 */
export function calibrated(
  raw: RawPulls,
  { slopeVariance, interceptVariance, covariance }: { readonly slopeVariance: number; readonly interceptVariance: number; readonly covariance: number },
): Omit<Pulls, "rows"> {
  const n = raw.slope.length;
  let ss = 0;
  let si = 0;
  let ii = 0;
  for (let i = 0; i < n; i++) {
    const [s, a] = [raw.slope[i] ?? 0, raw.intercept[i] ?? 0];
    ss += s * s;
    si += s * a;
    ii += a * a;
  }
  const rest = ii - (si * si) / ss;
  const none = { slope: new Float64Array(n), intercept: new Float64Array(n), interceptAsFound: new Float64Array(n) };
  if (!(ss > 1e-20 * slopeVariance) || !(slopeVariance > 0)) return none;
  const toSlope = Math.sqrt(slopeVariance / ss);
  const along = covariance / Math.sqrt(slopeVariance * ss);
  const across = rest > 1e-12 * ii ? Math.sqrt(Math.max(0, interceptVariance - (covariance * covariance) / slopeVariance) / rest) : 0;
  // Where height and slope have nothing in common; there the pulls on the height are scaled by themselves.
  const centre = -covariance / slopeVariance;
  const heights = raw.intercept.map((a, i) => a + centre * (raw.slope[i] ?? 0));
  let hh = 0;
  for (const height of heights) hh += height * height;
  const toHeight = hh > 0 ? Math.sqrt(Math.max(0, interceptVariance - (covariance * covariance) / slopeVariance) / hh) : 0;
  return {
    interceptAsFound: heights.map((height, i) => toHeight * height - centre * toSlope * (raw.slope[i] ?? 0)),
    slope: raw.slope.map((s) => toSlope * s),
    intercept: raw.intercept.map((a, i) => along * (raw.slope[i] ?? 0) + across * (a - (si / ss) * (raw.slope[i] ?? 0))),
  };
}

function signOf(value: number): number {
  return value > 0 ? 1 : value < 0 ? -1 : 0;
}
