import type { Curve } from "../page/results";
import { determinant2, type Symmetric2 } from "../numeric";

/** Corners of a unit circle, anticlockwise from (1, 0): a power of two of them, each arc halved again and again. */
export function unitCircle(corners = 64): Curve {
  let points: (readonly [number, number])[] = [
    [1, 0],
    [0, 1],
    [-1, 0],
    [0, -1],
  ];
  while (points.length < corners) {
    points = points.flatMap(([x, y], i) => {
      const [nextX, nextY] = points[(i + 1) % points.length] ?? [x, y];
      const length = Math.sqrt((x + nextX) * (x + nextX) + (y + nextY) * (y + nextY));
      return [[x, y] as const, [(x + nextX) / length, (y + nextY) / length] as const];
    });
  }
  return { x: Float64Array.from(points, ([x]) => x), y: Float64Array.from(points, ([, y]) => y) };
}

/**
 * The closed curve of an error ellipse.
 *
 * @param scale its size in σ: √(χ² of two degrees of freedom), 2.4477 for 95 %
 */
export function ellipseCurve(x: number, y: number, m: Symmetric2, scale: number): Curve {
  const circle = unitCircle();
  const [a, b, c] = rootOf(m);
  return {
    x: circle.x.map((u) => x + scale * a * u),
    y: circle.y.map((v, i) => y + scale * (b * (circle.x[i] ?? 0) + c * v)),
  };
}

/** Lower root of a 2×2 covariance: (a 0; b c). */
function rootOf(m: Symmetric2): [number, number, number] {
  const a = Math.sqrt(Math.max(0, m.xx));
  if (a === 0) return [0, 0, Math.sqrt(Math.max(0, m.yy))];
  return [a, m.xy / a, Math.sqrt(Math.max(0, determinant2(m))) / a];
}

/**
 * The region that holds a share of simulated points, seen from a centre: in each of 64 directions, the distance within which
 * that share of the points of this direction lies, directions and distances measured in the ellipse of `m`.
 */
export function simulatedRegion(xs: Float64Array, ys: Float64Array, centre: { readonly x: number; readonly y: number }, m: Symmetric2, share: number): Curve {
  const circle = unitCircle();
  const corners = circle.x.length;
  const [a, b, c] = rootOf(m);
  const lengths: number[][] = Array.from({ length: corners }, () => []);
  for (let k = 0; k < xs.length; k++) {
    const u = a > 0 ? ((xs[k] ?? 0) - centre.x) / a : 0;
    const v = c > 0 ? ((ys[k] ?? 0) - centre.y - b * u) / c : 0;
    const length = Math.sqrt(u * u + v * v);
    if (length === length) lengths[nearest(circle, u, v)]?.push(length);
  }
  const reach = lengths.map((of) => {
    const sorted = Float64Array.from(of).sort();
    return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? 0;
  });
  return {
    x: circle.x.map((u, i) => centre.x + (reach[i] ?? 0) * a * u),
    y: circle.y.map((v, i) => centre.y + (reach[i] ?? 0) * (b * (circle.x[i] ?? 0) + c * v)),
  };
}

/** The corner of the circle in whose direction (u, v) lies: the one with the largest projection, found quadrant first. */
function nearest(circle: Curve, u: number, v: number): number {
  const corners = circle.x.length;
  const quarter = corners / 4;
  const from = v >= 0 ? (u >= 0 ? 0 : quarter) : u < 0 ? 2 * quarter : 3 * quarter;
  let best = from;
  let most = -Infinity;
  for (let i = from; i <= from + quarter; i++) {
    const projection = u * (circle.x[i % corners] ?? 0) + v * (circle.y[i % corners] ?? 0);
    if (projection > most) {
      most = projection;
      best = i % corners;
    }
  }
  return best;
}
