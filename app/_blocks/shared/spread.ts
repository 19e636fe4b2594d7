/** Lowest and highest of the finite values; null where there is none. */
export function extent(values: ArrayLike<number>): readonly [number, number] | null {
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < values.length; i++) {
    const v = values[i] ?? NaN;
    if (!Number.isFinite(v)) continue;
    if (v < low) low = v;
    if (v > high) high = v;
  }
  return low <= high ? [low, high] : null;
}

const medians = new WeakMap<Float64Array, number | null>();

/** Middle of the finite values, remembered for the array; null where there is none. */
export function median(values: Float64Array): number | null {
  const known = medians.get(values);
  if (known !== undefined) return known;
  const found = middleOf(values);
  medians.set(values, found);
  return found;
}

function middleOf(values: Float64Array): number | null {
  const finite = new Float64Array(values.length);
  let n = 0;
  for (let i = 0; i < values.length; i++) {
    const v = values[i] as number;
    if (v - v === 0) finite[n++] = v;
  }
  if (n === 0) return null;
  const middle = n >> 1;
  const upper = place(finite, n, middle);
  if (n % 2 === 1) return upper;
  // What stands before the middle is not in order, but all of it is smaller.
  let lower = -Infinity;
  for (let i = 0; i < middle; i++) lower = Math.max(lower, finite[i] as number);
  return (upper + lower) / 2;
}

/**
 * The value that would stand at `k` if the first `n` were in order, by Hoare's selection (1961): a hundred thousand values need not
 * be sorted for the one in their middle. Everything before `k` is then no greater.
 */
function place(values: Float64Array, n: number, k: number): number {
  let low = 0;
  let high = n - 1;
  while (low < high) {
    const pivot = values[(low + high) >> 1] as number;
    let i = low;
    let j = high;
    while (i <= j) {
      while ((values[i] as number) < pivot) i++;
      while ((values[j] as number) > pivot) j--;
      if (i > j) break;
      const swapped = values[i] as number;
      values[i++] = values[j] as number;
      values[j--] = swapped;
    }
    if (k <= j) high = j;
    else if (k >= i) low = i;
    else break;
  }
  return values[k] as number;
}

/** A fraction as per cent: whole from 1 %, one decimal below; `under 0.1 %` for what would round to nothing. */
export function percent(fraction: number): string {
  const p = fraction * 100;
  if (p > 0 && p < 0.1) return "under 0.1 %";
  return p > 0 && p < 1 ? `${p.toFixed(1)} %` : `${p.toFixed(0)} %`;
}
