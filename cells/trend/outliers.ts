import { normalTwoSided, studentTwoSided } from "../numeric";
import type { TrendBlock } from "../page/schema";
import type { FittedLine } from "./fitLine";
import type { FitPoints } from "./lineFit";

/** How far one point lies from the line. */
export interface Residual {
  /** Distance in y over its own 1σ; the line's share in it is taken off. NaN where there is no such σ. */
  readonly residual: number;
  readonly outlier: boolean;
}

/** Of points that all belong to the line, one set in twenty has a point flagged. */
const FAMILY = 0.05;
/** Modified z beyond which a value is flagged (Iglewicz & Hoaglin 1993). */
const MODIFIED_Z = 3.5;

/**
 * Studentised distances of the points, and which of them are too far for the number of points (Bonferroni: p · n < 0.05).
 * Where the errors alone are used, p is of the normal distribution. Where the spread of the points themselves enters, a wild
 * point widens it and would hide itself: p is then of the distance from the line and spread of the others (Student's t with
 * n − 3 degrees of freedom; Cook & Weisberg 1982, from memory). Theil–Sen flags by the modified z (Iglewicz & Hoaglin 1993).
 * A flagged point stays in the fit.
 */
export function residuals(method: TrendBlock["method"], points: FitPoints, line: FittedLine): readonly Residual[] {
  const n = points.x.length;
  const own = line.usesScatter ? (line.withScatter ?? line.plain) : line.plain;
  const studentised = new Float64Array(n);
  let spread = 0;
  for (let i = 0; i < n; i++) {
    const x = points.x[i] ?? 0;
    const r = (points.y[i] ?? 0) - line.intercept - line.slope * x;
    const s = line.pointSigma[i] ?? Number.NaN;
    const height = own.interceptVariance + 2 * x * own.covariance + x * x * own.slopeVariance;
    const variance = method === "york" || method === "ordinary least squares" ? s * s * (1 - 2 * (line.leverage[i] ?? 0)) + height : s * s;
    // A point that alone holds one end of the line has no freedom to lie off it.
    studentised[i] = r === 0 ? 0 : variance > 1e-9 * s * s ? r / Math.sqrt(variance) : Number.NaN;
    spread += r === 0 ? 0 : (r / s) * (r / s);
  }
  const fromSpread = line.usesScatter || method !== "york";
  const scale = fromSpread && method !== "theil-sen" ? spread / (n - 2) : 1;
  return Array.from(studentised, (residual) => ({ residual, outlier: isOutlier(method, residual / Math.sqrt(scale), n, fromSpread) }));
}

function isOutlier(method: TrendBlock["method"], distance: number, n: number, fromSpread: boolean): boolean {
  if (!(Math.abs(distance) > 0)) return false;
  if (method === "theil-sen") return Math.abs(distance) > MODIFIED_Z;
  if (!fromSpread) return normalTwoSided(distance) * n < FAMILY;
  if (n < 4) return false;
  const left = n - 2 - distance * distance;
  if (!(left > 0)) return true;
  return studentTwoSided(Math.abs(distance) * Math.sqrt((n - 3) / left), n - 3) * n < FAMILY;
}
