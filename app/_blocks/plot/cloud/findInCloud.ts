import type { PointRef } from "../traces";
import { nowhere, type Cloud } from "./cloud";
import type { Painting } from "./paintCloud";
import { isInPolygon } from "./stamp";

/** So far from the pointer, in pixels, a sample still counts as pointed at. */
const reach = 8;

export interface Found {
  readonly ref: PointRef;
  /** Middle of the sample, in pixels of the page. */
  readonly x: number;
  readonly y: number;
}

/** The sample nearest to a place of the drawing; null where none is near. */
export function nearestInCloud(painting: Painting, clouds: readonly Cloud[], x: number, y: number): Found | null {
  const { middles, across } = painting;
  const rows = middles.length / across;
  let best: { readonly entry: number; readonly x: number; readonly y: number } | null = null;
  let least = reach * reach + 1;
  for (let py = Math.max(0, Math.floor(y) - reach); py <= Math.min(rows - 1, Math.floor(y) + reach); py++) {
    for (let px = Math.max(0, Math.floor(x) - reach); px <= Math.min(across - 1, Math.floor(x) + reach); px++) {
      const entry = middles[py * across + px] ?? 0;
      if (entry === 0) continue;
      const distance = (px + 0.5 - x) ** 2 + (py + 0.5 - y) ** 2;
      if (distance >= least) continue;
      least = distance;
      best = { entry, x: px + 0.5, y: py + 0.5 };
    }
  }
  const ref = best === null ? null : refOf(clouds, best.entry - 1);
  return best === null || ref === null ? null : { ref, x: best.x, y: best.y };
}

function refOf(clouds: readonly Cloud[], place: number): PointRef | null {
  let rest = place;
  for (const cloud of clouds) {
    if (rest < cloud.x.length) return { data: cloud.data, index: rest };
    rest -= cloud.x.length;
  }
  return null;
}

/** Part of the drawing that was dragged over, in the data's own numbers. */
export type Outline =
  | { readonly box: { readonly x: readonly [number, number]; readonly y: readonly [number, number] } }
  | { readonly corners: { readonly x: readonly number[]; readonly y: readonly number[] } };

/** All samples of clouds inside of an outline. */
export function insideOutline(clouds: readonly Cloud[], outline: Outline): PointRef[] {
  const found: PointRef[] = [];
  const holds = "box" in outline ? inBox(outline.box) : inCorners(outline.corners);
  for (const { data, x, y, lookOf } of clouds)
    for (let index = 0; index < x.length; index++) if (lookOf[index] !== nowhere && holds(x[index] as number, y[index] as number)) found.push({ data, index });
  return found;
}

function inBox({ x, y }: { readonly x: readonly [number, number]; readonly y: readonly [number, number] }): (px: number, py: number) => boolean {
  const [x0, x1, y0, y1] = [Math.min(...x), Math.max(...x), Math.min(...y), Math.max(...y)];
  return (px, py) => px >= x0 && px <= x1 && py >= y0 && py <= y1;
}

function inCorners({ x, y }: { readonly x: readonly number[]; readonly y: readonly number[] }): (px: number, py: number) => boolean {
  const corners = x.flatMap((one, i) => [one, y[i] ?? Number.NaN]);
  return (px, py) => isInPolygon(corners, px, py);
}
