/** Reductions over chosen rows, each in the order of the rows, so that the digits depend on the numbers alone. */

/** Arithmetic mean; NaN of nothing. */
export function meanOf(x: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < x.length; i++) sum += x[i] as number;
  return sum / x.length;
}

/** Standard deviation with n − 1, about the mean (two passes); NaN for fewer than two. */
export function deviationOf(x: ArrayLike<number>, mean = meanOf(x)): number {
  if (x.length < 2) return Number.NaN;
  let sum = 0;
  for (let i = 0; i < x.length; i++) {
    const d = (x[i] as number) - mean;
    sum += d * d;
  }
  return Math.sqrt(sum / (x.length - 1));
}

/** Sample covariance with n − 1 (two passes); 0 for fewer than two. */
export function sampleCovariance(x: ArrayLike<number>, y: ArrayLike<number>): number {
  const n = Math.min(x.length, y.length);
  if (n < 2) return 0;
  const [mx, my] = [meanOf(x), meanOf(y)];
  let sum = 0;
  for (let i = 0; i < n; i++) sum += ((x[i] as number) - mx) * ((y[i] as number) - my);
  return sum / (n - 1);
}

/** Entries of a column at some rows. */
export function gather(column: Float64Array, rows: Int32Array): Float64Array {
  const found = new Float64Array(rows.length);
  for (let i = 0; i < found.length; i++) found[i] = column[rows[i] as number] as number;
  return found;
}

/** Position of the middle value, or of the two around the middle; of equal values the first. */
export function middlePlaces(x: Float64Array): readonly number[] {
  if (x.length === 0) return [];
  const sorted = x.slice().sort();
  const half = Math.floor(x.length / 2);
  const upper = x.indexOf(sorted[half] as number);
  if (x.length % 2 === 1) return [upper];
  const lower = x.indexOf(sorted[half - 1] as number);
  // Equal values around the middle are two samples, not one.
  return [lower, lower === upper ? x.indexOf(sorted[half] as number, lower + 1) : upper];
}
