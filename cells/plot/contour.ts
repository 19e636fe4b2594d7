import { CHI2_95_TWO } from "../numeric";
import type { Curve } from "../page/results";
import type { Ellipses } from "../page/schema";

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

const CORNERS = 64;
/** Cosine and sine of 2π/64. */
const COS_STEP = 0.9951847266721969;
const SIN_STEP = 0.0980171403295606;

/**
 * Contour of a bivariate normal at a Mahalanobis radius, as a closed run of 65 points: x = r·σx·cos θ,
 * y = r·σy·(ρ·cos θ + √(1−ρ²)·sin θ), the Cholesky factor of the covariance applied to a circle.
 *
 * @returns undefined where a σ is unknown, or both are 0
 */
export function contour(x: number, y: number, sigmaX: number, sigmaY: number, correlation: number, radius: number): Curve | undefined {
  if (!(sigmaX >= 0 && sigmaY >= 0) || (sigmaX === 0 && sigmaY === 0) || !(radius > 0)) return undefined;
  const rho = Number.isFinite(correlation) ? Math.max(-1, Math.min(1, correlation)) : 0;
  const rest = Math.sqrt(1 - rho * rho);
  const curve = { x: new Float64Array(CORNERS + 1), y: new Float64Array(CORNERS + 1) };
  let [cos, sin] = [1, 0];
  for (let i = 0; i < CORNERS; i++) {
    curve.x[i] = x + radius * sigmaX * cos;
    curve.y[i] = y + radius * sigmaY * (rho * cos + rest * sin);
    [cos, sin] = [cos * COS_STEP - sin * SIN_STEP, sin * COS_STEP + cos * SIN_STEP];
  }
  curve.x[CORNERS] = curve.x[0] ?? x;
  curve.y[CORNERS] = curve.y[0] ?? y;
  return curve;
}
