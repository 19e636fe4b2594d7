import { CellError } from "../errors";
import type { TrendBlock } from "../page/schema";
import type { FittedLine } from "./fitLine";
import { widenedPoints } from "./intrinsicScatter";
import type { FitPoints } from "./lineFit";
import { ordinaryLeastSquares } from "./ordinaryLeastSquares";
import { reducedMajorAxis } from "./reducedMajorAxis";
import { theilSen } from "./theilSen";
import { york, yorkNear } from "./york";

/** With more points than this a draw is taken not to carry the line from one minimum of S to another, and is followed from the line alone. */
const MANY = 100;

/** The line through the same points at other places; undefined where there is none. */
export type Refit = (x: Float64Array, y: Float64Array) => { readonly slope: number; readonly intercept: number } | undefined;

/**
 * Fits a line again, by its own method and with the weights it has: σ and correlations of the points, and the scatter in y that
 * was found beyond them, stay what they are. York's iteration starts at the line itself.
 */
export function refitOf(method: TrendBlock["method"], points: FitPoints, line: FittedLine): Refit {
  const { extraY, from } = line.errors;
  const weighed = method === "york" && from === "errors" && extraY > 0 ? widenedPoints(points, extraY * extraY) : points;
  const isLarge = points.x.length > MANY;
  const fit = (moved: FitPoints): { readonly slope: number; readonly intercept: number } | undefined => {
    switch (method) {
      case "york": {
        const found = isLarge ? yorkNear(moved, line.slope) : york(moved, line.slope);
        return found.converged ? found : undefined;
      }
      case "ordinary least squares":
        return ordinaryLeastSquares(moved);
      case "reduced major axis":
        return reducedMajorAxis(moved);
      case "theil-sen":
        return theilSen(moved);
    }
  };
  return (x, y) => {
    try {
      const found = fit({ ...weighed, x, y });
      return found !== undefined && Number.isFinite(found.slope) && Number.isFinite(found.intercept) ? found : undefined;
    } catch (error) {
      if (error instanceof CellError) return undefined;
      throw error;
    }
  };
}
