import type { Ellipses } from "@/cells";

/** Corners of a drawn ellipse; 40 look round at any size that fits a screen. */
const corners = 40;

/**
 * Outline of a bivariate normal's contour at a Mahalanobis radius, tilted by its correlation, as a closed run of points.
 *
 * With x = σx·r·cos θ and y = σy·r·(ρ·cos θ + √(1−ρ²)·sin θ), every point lies at distance r (Cholesky factor of the covariance).
 *
 * @param push called with each point, the first one again at the end
 */
export function traceEllipse(
  x: number,
  y: number,
  sigmaX: number,
  sigmaY: number,
  correlation: number,
  radius: number,
  push: (x: number, y: number) => void,
): void {
  const rho = Math.min(1, Math.max(-1, Number.isFinite(correlation) ? correlation : 0));
  const rest = Math.sqrt(1 - rho * rho);
  for (let i = 0; i <= corners; i++) {
    const angle = (2 * Math.PI * (i % corners)) / corners;
    const c = Math.cos(angle);
    push(x + sigmaX * radius * c, y + sigmaY * radius * (rho * c + rest * Math.sin(angle)));
  }
}

/** Share of a bivariate normal inside a Mahalanobis radius: 1 − exp(−r²/2). */
export function heldBy(radius: number): number {
  return 1 - Math.exp((-radius * radius) / 2);
}

/** How large ellipses are, and what share of the truth they hold: in two dimensions 1σ holds only 39 %. */
export function ellipseInWords(radius: number): string {
  if (!(radius > 0)) return "no ellipses";
  const held = Math.round(heldBy(radius) * 100);
  const isWhole = Math.abs(radius - Math.round(radius)) < 1e-9;
  return isWhole ? `ellipses ${Math.round(radius)}σ, hold ${held} %` : `ellipses ${held} %`;
}

/** The sizes a person can choose. */
export const ellipseChoices: readonly { readonly value: Ellipses; readonly label: string }[] = [
  { value: "none", label: "none" },
  { value: "1 sigma", label: "1σ, hold 39 %" },
  { value: "2 sigma", label: "2σ, hold 86 %" },
  { value: "95 %", label: "95 %" },
];
