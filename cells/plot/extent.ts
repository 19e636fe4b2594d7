import type { PlotLayer } from "../page/results";
import type { Axis } from "../page/schema";
import type { Extent } from "./trendLayers";

/** How far lines go on past everything else, so that they reach the drawing's edges. */
const BEYOND = 0.5;

/** The stretch of x that everything but the trends takes, and half as much again on both sides. */
export function extentOf(layers: readonly PlotLayer[], axis: Axis | undefined): Extent {
  let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  const add = (x: number | undefined): void => {
    if (x === undefined || !Number.isFinite(x)) return;
    if (x < low) low = x;
    if (x > high) high = x;
  };
  for (const layer of layers) {
    if (layer.what === "samples") layer.points.x.forEach(add);
    else if (layer.what === "bodies") for (const body of layer.bodies) add(body.x);
    else if (layer.what === "path") layer.line.x.forEach(add);
    else if (layer.what === "crossing" || layer.what === "annotation") add(layer.x);
  }
  add(axis?.from);
  add(axis?.to);
  if (low > high) return { from: Number.POSITIVE_INFINITY, to: Number.NEGATIVE_INFINITY };
  const more = (high - low) * BEYOND;
  // A logarithmic axis ends before zero.
  if (axis?.scale === "log" && low > 0) return { from: low / 2, to: high * 2 };
  return { from: low - more, to: high + more };
}
