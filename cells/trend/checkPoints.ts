import { CellError } from "../errors";
import type { FitPoints } from "./lineFit";

/**
 * Refuses in words what no line can be put through.
 *
 * @throws CellError `too-few-points`, `x-all-equal`, `no-errors`
 */
export function checkPoints(points: FitPoints, { needsErrors }: { readonly needsErrors: boolean }): void {
  const n = points.x.length;
  if (n < 3)
    throw new CellError(
      "too-few-points",
      `A line needs at least 3 points with all they need; there ${n === 1 ? "is 1" : `are ${n}`}. Choose more samples, or see why samples were left out.`,
    );
  const first = points.x[0];
  if (points.x.every((x) => x === first))
    throw new CellError("x-all-equal", `All ${n} points have the same x (${first}), so no slope exists. Choose another quantity for x, or exchange the axes.`);
  if (!needsErrors) return;
  for (let i = 0; i < n; i++) {
    if (points.sigmaX[i] === 0 && points.sigmaY[i] === 0)
      throw new CellError(
        "no-errors",
        "A point has σ = 0 on both axes, which would fix the line on it alone. Give it a σ on one axis, leave it out, or use ordinary least squares.",
        { row: i },
      );
  }
}
