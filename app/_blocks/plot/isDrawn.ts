import { State, type PlotPoints, type PlotResult } from "@/cells";

/** Whether a row stands on the drawing as a sample in use. A distribution needs a value across only. */
export function isDrawn(points: PlotPoints, index: number, plot: PlotResult["plot"]): boolean {
  return points.state[index] === State.present && hasPlace(points, index, plot);
}

/** Whether a row has a place on the drawing, in use or set aside. */
export function hasPlace(points: PlotPoints, index: number, plot: PlotResult["plot"]): boolean {
  return Number.isFinite(points.x[index] ?? NaN) && (plot === "distribution" || Number.isFinite(points.y[index] ?? NaN));
}
