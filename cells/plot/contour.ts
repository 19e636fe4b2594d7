import { CHI2_95_TWO } from "../numeric";
import type { Curve } from "../page/results";
import type { Ellipses } from "../page/schema";
import { ellipseCurve } from "../trend";

/** Mahalanobis radius of an ellipse as it is asked for; 0 for none. In two dimensions 1σ holds 39 %, 2σ 86 %; 95 % is √5.9915. */
export function radiusOf(ellipses: Ellipses): number {
  switch (ellipses) {
    case "none":
      return 0;
    case "1 sigma":
      return 1;
    case "2 sigma":
      return 2;
    case "95 %":
      return Math.sqrt(CHI2_95_TWO);
  }
}

/**
 * Contour of a bivariate normal at a Mahalanobis radius, as a run of points that ends where it began.
 *
 * @returns undefined where a σ is unknown, or both are 0
 */
export function contour(x: number, y: number, sigmaX: number, sigmaY: number, correlation: number, radius: number): Curve | undefined {
  if (!(sigmaX >= 0 && sigmaY >= 0) || (sigmaX === 0 && sigmaY === 0) || !(radius > 0)) return undefined;
  const rho = Number.isFinite(correlation) ? Math.max(-1, Math.min(1, correlation)) : 0;
  return closed(ellipseCurve(x, y, { xx: sigmaX * sigmaX, xy: rho * sigmaX * sigmaY, yy: sigmaY * sigmaY }, radius));
}

/** A curve with its first point again at the end, where it is not there already. */
export function closed(curve: Curve): Curve {
  const { x, y } = curve;
  const last = x.length - 1;
  if (last > 0 && x[0] === x[last] && y[0] === y[last]) return curve;
  return { x: Float64Array.from([...x, x[0] ?? Number.NaN]), y: Float64Array.from([...y, y[0] ?? Number.NaN]) };
}
