import type { Evaluated } from "../language";
import type { ClassMeans, PlotPoints } from "../page/results";
import { hasUnknown, variance, type LinearForm } from "../trend";
import { at } from "./samplesLayer";

/** One value of a pattern over its table: the points that stand, and what they were calculated from. */
export interface PatternValues {
  readonly of: string;
  readonly place: number;
  readonly points: PlotPoints;
  readonly evaluated: Evaluated;
}

/**
 * Mean of each class for each value, in order of first appearance, over the samples that have the value.
 *
 * 1σ is that of the mean, sd/√n, with the part that all samples share (the normalising body's) added once, since no number
 * of samples makes it smaller. It is null for one sample, and where a shared σ is unknown.
 */
export function classMeans(values: readonly PatternValues[], classes: readonly string[]): ClassMeans[] {
  const rowsOf = new Map<string, number[]>();
  for (let row = 0; row < classes.length; row++) {
    if (!values.some(({ points }) => Number.isFinite(points.y[row]))) continue;
    const name = classes[row] ?? "";
    const rows = rowsOf.get(name);
    if (rows === undefined) rowsOf.set(name, [row]);
    else rows.push(row);
  }
  return Array.from(rowsOf, ([name, rows]) => ({
    name,
    samples: rows.length,
    points: values.flatMap(({ of, place, points, evaluated }) => {
      const present = rows.filter((row) => Number.isFinite(points.y[row]));
      if (present.length === 0) return [];
      const { mean, sigma } = meanOf(points.y, evaluated, present);
      return [{ of, x: place, y: mean, sigmaY: sigma, n: present.length }];
    }),
  }));
}

function meanOf(y: Float64Array, evaluated: Evaluated, rows: readonly number[]): { readonly mean: number; readonly sigma: number | null } {
  const n = rows.length;
  let sum = 0;
  for (const row of rows) sum += y[row] ?? Number.NaN;
  const mean = sum / n;
  if (n < 2) return { mean, sigma: null };
  let squares = 0;
  for (const row of rows) {
    const apart = (y[row] ?? Number.NaN) - mean;
    squares += apart * apart;
  }
  const shared: LinearForm = {
    value: mean,
    terms: evaluated.common.map(({ variable, partial }) => {
      let total = 0;
      for (const row of rows) total += at(partial, row);
      return { variable, partial: total / n };
    }),
  };
  if (hasUnknown(shared)) return { mean, sigma: null };
  return { mean, sigma: Math.sqrt(squares / (n - 1) / n + Math.max(0, variance(shared))) };
}
