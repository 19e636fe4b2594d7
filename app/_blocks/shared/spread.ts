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
  const found = middleOf(values.filter((v) => Number.isFinite(v)).sort());
  medians.set(values, found);
  return found;
}

function middleOf(finite: Float64Array): number | null {
  if (finite.length === 0) return null;
  const middle = finite.length >> 1;
  const upper = finite[middle] ?? 0;
  return finite.length % 2 === 1 ? upper : (upper + (finite[middle - 1] ?? 0)) / 2;
}

/** A fraction as per cent: whole from 1 %, one decimal below; `under 0.1 %` for what would round to nothing. */
export function percent(fraction: number): string {
  const p = fraction * 100;
  if (p > 0 && p < 0.1) return "under 0.1 %";
  return p > 0 && p < 1 ? `${p.toFixed(1)} %` : `${p.toFixed(0)} %`;
}
