import type { Band, Curve } from "../page/results";
import { combine, variance } from "./linearForm";
import type { TrendFit } from "./trendFit";

/** Height of a trend's line at each x, in the unit of its y axis. */
export function lineAt({ line }: TrendFit, xs: ArrayLike<number>): Curve {
  const x = Float64Array.from(xs);
  return { x, y: x.map((at) => line.intercept.value + line.slope.value * at) };
}

/**
 * 95 % band of a trend's line at each x: where the line itself lies, not where new samples would. It holds the errors of the
 * samples, the scatter where that is in use, and what is common to all samples.
 */
export function bandOf({ line, quantile }: TrendFit, xs: ArrayLike<number>): Band {
  const x = Float64Array.from(xs);
  const lower = new Float64Array(x.length);
  const upper = new Float64Array(x.length);
  x.forEach((at, i) => {
    const height = line.intercept.value + line.slope.value * at;
    const form = combine(height, [
      [line.intercept, 1],
      [line.slope, at],
    ]);
    const half = quantile * Math.sqrt(Math.max(0, variance(form)));
    lower[i] = height - half;
    upper[i] = height + half;
  });
  return { x, lower, upper };
}
