import type { FitPoints } from "./lineFit";

/** Means, and sums of squares and products about them. */
export interface Moments {
  readonly xMean: number;
  readonly yMean: number;
  readonly xx: number;
  readonly xy: number;
  readonly yy: number;
}

/** Two passes: means first, from the first point, then squares about them. */
export function moments({ x, y }: Pick<FitPoints, "x" | "y">): Moments {
  const n = x.length;
  const x0 = x[0] ?? 0;
  const y0 = y[0] ?? 0;
  let sumX = 0;
  let sumY = 0;
  for (let i = 0; i < n; i++) {
    sumX += (x[i] ?? 0) - x0;
    sumY += (y[i] ?? 0) - y0;
  }
  const xMean = x0 + sumX / n;
  const yMean = y0 + sumY / n;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (let i = 0; i < n; i++) {
    const u = (x[i] ?? 0) - xMean;
    const v = (y[i] ?? 0) - yMean;
    xx += u * u;
    xy += u * v;
    yy += v * v;
  }
  return { xMean, yMean, xx, xy, yy };
}
