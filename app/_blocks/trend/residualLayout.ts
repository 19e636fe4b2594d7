import type { TrendPoint } from "@/cells";

/** Pixels of one σ. */
const perSigma = 11.2;
const left = 28;

export interface ResidualMark {
  readonly point: TrendPoint;
  readonly x: number;
  readonly y: number;
  /** Where the outlier's name stands; null for points that are none. */
  readonly name: { readonly x: number; readonly y: number; readonly anchor: "start" | "end" } | null;
}

export interface ResidualLayout {
  readonly height: number;
  readonly middle: number;
  readonly two: number;
  readonly left: number;
  readonly marks: readonly ResidualMark[];
  /** True where points lie beyond the strip and are drawn at its edge. */
  readonly clipped: number;
}

/** Furthest residual that is drawn at its own place; a single wild point must not flatten all others. */
const furthest = 8;

/**
 * Places of the residuals on their strip, in the order of the points along x, so that curvature shows as a run of one sign.
 *
 * @param width of the strip in pixels
 */
export function residualLayout(points: readonly TrendPoint[], width: number): ResidualLayout {
  const inOrder = [...points].sort((a, b) => a.x - b.x || a.index - b.index);
  let most = 2.6;
  let clipped = 0;
  for (const p of inOrder) {
    const size = Math.abs(p.residual);
    if (size > furthest) clipped++;
    most = Math.max(most, Math.min(size, furthest));
  }
  const middle = Math.round(most * perSigma + 12);
  const step = inOrder.length === 0 ? 0 : (width - left) / inOrder.length;
  const marks = inOrder.map((point, i): ResidualMark => {
    const x = left + (i + 0.5) * step;
    const y = middle - Math.min(furthest, Math.max(-furthest, point.residual)) * perSigma;
    const anchor = x > width - 64 ? ("end" as const) : ("start" as const);
    return { point, x, y, name: point.outlier ? { x: x + (anchor === "start" ? 8 : -8), y: y + 4, anchor } : null };
  });
  return { height: middle * 2, middle, two: 2 * perSigma, left, marks, clipped };
}
