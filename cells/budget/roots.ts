/** Points a range is looked over at; two roots closer than 1/GRID of it are still found where |f| dips between points. */
const GRID = 200;

/** What looking for roots found. */
export interface Found {
  /** Ascending. */
  readonly roots: readonly number[];
  /** Least and largest f seen; NaN where f has no value anywhere. */
  readonly least: number;
  readonly most: number;
  /** True where f is one and the same all over. */
  readonly isFlat: boolean;
}

/**
 * Every root of f in [from, to], `to` possibly infinite. NaN is a gap: f has no value there. Deterministic, without
 * derivatives: signs on a grid, dips of |f| searched by golden section, brackets halved down to neighbouring numbers; a change
 * of sign across a pole or a gap is no root.
 *
 * @param scale size of the numbers f is the difference of: changes of f that are rounding beside it make no roots
 */
export function findRoots(f: (x: number) => number, from: number, to: number, scale = 0): Found {
  const place = to === Infinity ? (t: number): number => from + t / (1 - t) : (t: number): number => from + (to - from) * t;
  const at = (i: number): number => (i === GRID && to !== Infinity ? to : place(i / (to === Infinity ? GRID + 1 : GRID)));
  const xs: number[] = [];
  const ys: number[] = [];
  for (let i = 0; i <= GRID; i++) {
    const x = at(i);
    const y = f(x);
    const before = ys[ys.length - 1];
    const beforeX = xs[xs.length - 1];
    // Where a gap begins or ends between two points, its edge is a point too: a root may lie right before it.
    if (before !== undefined && beforeX !== undefined && Number.isNaN(before) !== Number.isNaN(y)) {
      const edge = edgeBetween(f, beforeX, x, Number.isNaN(before));
      if (edge !== beforeX && edge !== x) {
        xs.push(edge);
        ys.push(f(edge));
      }
    }
    xs.push(x);
    ys.push(y);
  }
  let [least, most] = [Number.NaN, Number.NaN];
  for (const y of ys) {
    if (Number.isNaN(y)) continue;
    least = least <= y ? least : y;
    most = most >= y ? most : y;
  }
  const isFlat = most - least <= 1e-13 * Math.max(Math.abs(least), Math.abs(most), scale, 1e-300);
  const roots = new Set<number>();
  if (!isFlat) gather(f, xs, ys, roots);
  return { roots: [...roots].sort((a, b) => a - b), least, most, isFlat };
}

function gather(f: (x: number) => number, xs: readonly number[], ys: readonly number[], roots: Set<number>): void {
  for (let i = 0; i < xs.length; i++) {
    const [x, y] = [xs[i] ?? Number.NaN, ys[i] ?? Number.NaN];
    if (y === 0) roots.add(x);
    const [nextX, next] = [xs[i + 1] ?? Number.NaN, ys[i + 1] ?? Number.NaN];
    if (y * next < 0) {
      const root = halve(f, x, nextX, y, next);
      if (root !== undefined) roots.add(root);
    }
    const [lastX, last] = [xs[i - 1] ?? Number.NaN, ys[i - 1] ?? Number.NaN];
    const dips = y * last > 0 && y * next > 0 && Math.abs(y) <= Math.abs(last) && Math.abs(y) <= Math.abs(next);
    if (!dips) continue;
    const bottom = lowest(f, lastX, nextX);
    const deep = f(bottom);
    if (deep === 0) roots.add(bottom);
    if (!(deep * y < 0)) continue;
    for (const [a, b, fa, fb] of [
      [lastX, bottom, last, deep],
      [bottom, nextX, deep, next],
    ] as const) {
      const root = halve(f, a, b, fa, fb);
      if (root !== undefined) roots.add(root);
    }
  }
}

/** The root between a and b, where f has different signs; undefined where the sign changes over a pole or a gap. */
function halve(f: (x: number) => number, a: number, b: number, fa: number, fb: number): number | undefined {
  const scale = Math.max(Math.abs(fa), Math.abs(fb));
  let [low, high, atLow, atHigh] = [a, b, fa, fb];
  for (let pass = 0; pass < 200; pass++) {
    const middle = low + (high - low) / 2;
    if (middle <= low || middle >= high) break;
    const value = f(middle);
    if (Number.isNaN(value)) return undefined;
    if (value === 0) return middle;
    if (value < 0 === atLow < 0) [low, atLow] = [middle, value];
    else [high, atHigh] = [middle, value];
  }
  const best = Math.abs(atLow) <= Math.abs(atHigh) ? low : high;
  return Math.min(Math.abs(atLow), Math.abs(atHigh)) <= 1e-6 * scale ? best : undefined;
}

/** The last number with a value between a and b, one of which has none. */
function edgeBetween(f: (x: number) => number, a: number, b: number, gapAtA: boolean): number {
  let [inside, outside] = gapAtA ? [b, a] : [a, b];
  for (let pass = 0; pass < 60; pass++) {
    const middle = inside + (outside - inside) / 2;
    if (middle === inside || middle === outside) break;
    if (Number.isNaN(f(middle))) outside = middle;
    else inside = middle;
  }
  return inside;
}

const GOLDEN = 0.3819660112501051;

/** Where |f| is least between a and b. */
function lowest(f: (x: number) => number, a: number, b: number): number {
  const size = (x: number): number => {
    const y = Math.abs(f(x));
    return Number.isNaN(y) ? Infinity : y;
  };
  let [low, high] = [a, b];
  let [x1, x2] = [low + GOLDEN * (high - low), high - GOLDEN * (high - low)];
  let [y1, y2] = [size(x1), size(x2)];
  const sign = f(x1) < 0;
  for (let pass = 0; pass < 60; pass++) {
    // Crossing zero is enough: the brackets on both sides do the rest.
    if (f(y1 < y2 ? x1 : x2) < 0 !== sign) break;
    if (y1 < y2) {
      [high, x2, y2] = [x2, x1, y1];
      x1 = low + GOLDEN * (high - low);
      y1 = size(x1);
    } else {
      [low, x1, y1] = [x1, x2, y2];
      x2 = high - GOLDEN * (high - low);
      y2 = size(x2);
    }
  }
  return y1 < y2 ? x1 : x2;
}
