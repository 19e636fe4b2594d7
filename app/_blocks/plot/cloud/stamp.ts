import { markerPath, type MarkerShape } from "@/app/_ui/classStyle";

/** A marker as pixels: places around its middle, and how much of each it covers, of 256. */
export interface Stamp {
  readonly dx: Int16Array;
  readonly dy: Int16Array;
  readonly cover: Uint16Array;
}

export type StampShape = MarkerShape | "cross";

/** So many probes across and upwards in each pixel tell how much of it a marker covers. */
const probes = 4;
const made = new Map<string, Stamp>();

/**
 * @param shape of the marker; `cross` is the thin × of what is set aside
 * @param radius in pixels of the painting
 * @param alpha opacity, 0 to 1
 */
export function stampOf(shape: StampShape, radius: number, alpha: number): Stamp {
  const key = `${shape} ${radius} ${alpha}`;
  let stamp = made.get(key);
  if (stamp === undefined) made.set(key, (stamp = make(insideOf(shape, radius), Math.ceil(radius * 1.5), alpha)));
  return stamp;
}

function make(isInside: (x: number, y: number) => boolean, reach: number, alpha: number): Stamp {
  const dx: number[] = [];
  const dy: number[] = [];
  const cover: number[] = [];
  for (let y = -reach; y <= reach; y++) {
    for (let x = -reach; x <= reach; x++) {
      let hits = 0;
      for (let i = 0; i < probes; i++) for (let j = 0; j < probes; j++) if (isInside(x - 0.5 + (i + 0.5) / probes, y - 0.5 + (j + 0.5) / probes)) hits++;
      const covered = Math.round((256 * alpha * hits) / (probes * probes));
      if (covered === 0) continue;
      dx.push(x);
      dy.push(y);
      cover.push(covered);
    }
  }
  return { dx: Int16Array.from(dx), dy: Int16Array.from(dy), cover: Uint16Array.from(cover) };
}

function insideOf(shape: StampShape, radius: number): (x: number, y: number) => boolean {
  if (shape === "circle") return (x, y) => x * x + y * y <= radius * radius;
  if (shape === "cross") return (x, y) => Math.abs(x) <= radius && Math.abs(y) <= radius && (Math.abs(x - y) <= 0.8 || Math.abs(x + y) <= 0.8);
  const corners = cornersOf(markerPath(shape, 0, 0, radius));
  return (x, y) => isInPolygon(corners, x, y);
}

/** Corners of a path of straight lines, as x, y, x, y … */
function cornersOf(path: string): number[] {
  return (path.match(/-?\d+(?:\.\d+)?/gu) ?? []).map(Number);
}

/** Whether a place lies in a polygon given as x, y, x, y …: a ray to the right crosses its outline an odd number of times. */
export function isInPolygon(corners: ArrayLike<number>, x: number, y: number): boolean {
  let inside = false;
  for (let i = 0, j = corners.length - 2; i < corners.length; j = i, i += 2) {
    const [xi, yi, xj, yj] = [corners[i] ?? 0, corners[i + 1] ?? 0, corners[j] ?? 0, corners[j + 1] ?? 0];
    if (yi > y !== yj > y && x < ((xj - xi) * (y - yi)) / (yj - yi) + xi) inside = !inside;
  }
  return inside;
}
