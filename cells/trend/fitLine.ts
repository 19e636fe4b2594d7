import { chiSquareQuantile, chiSquareSurvival, studentTwoSidedQuantile, Z_95 } from "../numeric";
import type { TrendBlock } from "../page/schema";
import { propagate, yorkInfluence } from "./influence";
import { intrinsicScatter, widenedPoints } from "./intrinsicScatter";
import type { FitPoints, Influence, LineFit } from "./lineFit";
import { ordinaryLeastSquares, type ScatterLine } from "./ordinaryLeastSquares";
import { reducedMajorAxis } from "./reducedMajorAxis";
import { theilSen } from "./theilSen";
import { york } from "./york";

export type LineCovariance = Pick<LineFit, "slopeVariance" | "interceptVariance" | "covariance">;

/** How the errors of a line's points are made up, for what two lines over the same samples have in common. */
export interface ErrorModel {
  /** `errors`: those given with the points; `residuals`: the spread of the points in y; `unknown`: no linear answer to them. */
  readonly from: "errors" | "residuals" | "unknown";
  /** 1σ in y beside the errors of the points. */
  readonly extraY: number;
  /** All of it times this: √MSWD where that is chosen. */
  readonly factor: number;
}

/** How well the points keep to a line for their errors. */
export interface Goodness {
  readonly S: number;
  readonly mswd: number;
  readonly mswdExpected: readonly [number, number];
  readonly p: number;
}

/** A line through points by any of the methods, its covariances from the points alone, nothing common to them in it. */
export interface FittedLine {
  readonly slope: number;
  readonly intercept: number;
  readonly converged: boolean;
  readonly goodness?: Goodness;
  /** The line without scatter in its errors, where that is another one. */
  readonly byErrorsAlone?: { readonly slope: number; readonly intercept: number };
  /** Maximum-likelihood scatter beyond the errors, 1σ in y; left out where it was not asked for. */
  readonly scatter?: number;
  readonly usesScatter: boolean;
  readonly plain: LineCovariance;
  /** Undefined where no scatter is to enter. */
  readonly withScatter?: LineCovariance;
  /** Error of each point in y about the line, 1σ, as the line in use takes it. */
  readonly pointSigma: Float64Array;
  /** Share that each point has in the line's height at its own x. */
  readonly leverage: Float64Array;
  readonly ofErrors: Influence;
  readonly ofChanges: Influence;
  readonly errors: ErrorModel;
  /** Half-width of a 95 % band over its 1σ. */
  readonly quantile: number;
}

/** Below this the points scatter more than their errors say. */
const SIGNIFICANT = 0.05;

/** @throws CellError where no line can be put through the points by this method */
export function fitLine(method: TrendBlock["method"], scatter: NonNullable<TrendBlock["scatter"]>, points: FitPoints): FittedLine {
  switch (method) {
    case "york":
      return yorkLine(points, scatter);
    case "ordinary least squares":
      return residualLine(points, ordinaryLeastSquares(points), "residuals");
    case "reduced major axis":
      return residualLine(points, reducedMajorAxis(points), "unknown");
    case "theil-sen":
      // The median of slopes answers single errors in steps; on average over errors as least squares does.
      return { ...residualLine(points, theilSen(points), "unknown"), ofErrors: ordinaryLeastSquares(points).influence };
  }
}

/**
 * York's line. S, MSWD and p are those of the errors alone. Where they say that the points scatter more, and the scatter is
 * estimated, the line is fitted again with it in the errors: without, it would lean to where x and y err together. Both σ
 * belong to the one line that is given: from the errors of its points alone, and with the scatter.
 */
function yorkLine(points: FitPoints, rule: NonNullable<TrendBlock["scatter"]>): FittedLine {
  const alone = york(points);
  const n = points.x.length;
  const degrees = n - 2;
  const goodness: Goodness = {
    S: alone.S,
    mswd: alone.S / degrees,
    mswdExpected: [chiSquareQuantile(0.025, degrees) / degrees, chiSquareQuantile(0.975, degrees) / degrees],
    p: chiSquareSurvival(alone.S, degrees),
  };
  const usesScatter = rule !== "none" && goodness.p < SIGNIFICANT;
  const found = rule === "likelihood" && alone.converged ? intrinsicScatter(points, alone) : undefined;
  const scatter = found?.scatter;
  const refitted = usesScatter && found !== undefined && found.scatter > 0;
  const fit = refitted ? found.fit : alone;
  const extraY = refitted ? found.scatter : 0;
  const { ofErrors, ofChanges } = yorkInfluence(widenedPoints(points, extraY * extraY), fit);
  const own: LineCovariance = { slopeVariance: fit.slopeVariance, interceptVariance: fit.interceptVariance, covariance: fit.covariance };
  const plain = refitted ? propagate(ofErrors, points, 0) : own;
  const factor = rule === "root mswd" ? Math.sqrt(Math.max(1, goodness.mswd)) : 1;
  const withScatter = ((): LineCovariance | undefined => {
    if (rule === "none") return undefined;
    if (rule === "root mswd") return scaled(own, factor * factor);
    if (refitted || scatter === 0) return own;
    return propagate(ofErrors, points, scatter === undefined ? Number.NaN : scatter * scatter);
  })();
  const inUse = usesScatter ? factor : 1;
  const leverage = new Float64Array(n);
  for (let i = 0; i < n; i++) leverage[i] = leverageOf(ofErrors, points, i);
  return {
    slope: fit.slope,
    intercept: fit.intercept,
    converged: fit.converged,
    goodness,
    ...(refitted ? { byErrorsAlone: { slope: alone.slope, intercept: alone.intercept } } : {}),
    ...(scatter === undefined ? {} : { scatter }),
    usesScatter,
    plain,
    ...(withScatter === undefined ? {} : { withScatter }),
    pointSigma: fit.weight.map((w) => inUse / Math.sqrt(w)),
    leverage,
    ofErrors,
    ofChanges,
    errors: { from: "errors", extraY, factor: inUse },
    quantile: Z_95,
  };
}

function scaled({ slopeVariance, interceptVariance, covariance }: LineCovariance, by: number): LineCovariance {
  return { slopeVariance: slopeVariance * by, interceptVariance: interceptVariance * by, covariance: covariance * by };
}

/** A line whose σ come from the points' own distances to it: the σ of each point are not in it. */
function residualLine(points: FitPoints, line: ScatterLine, from: ErrorModel["from"]): FittedLine {
  const n = points.x.length;
  const leverage = new Float64Array(n);
  if (from === "residuals") for (let i = 0; i < n; i++) leverage[i] = leverageOf(line.influence, points, i);
  return {
    slope: line.slope,
    intercept: line.intercept,
    converged: true,
    usesScatter: false,
    plain: { slopeVariance: line.slopeVariance, interceptVariance: line.interceptVariance, covariance: line.covariance },
    pointSigma: new Float64Array(n).fill(line.residualSd),
    leverage,
    ofErrors: line.influence,
    ofChanges: line.influence,
    errors: { from, extraY: line.residualSd, factor: 1 },
    quantile: studentTwoSidedQuantile(0.95, n - 2),
  };
}

function leverageOf(influence: Influence, points: FitPoints, i: number): number {
  return (influence.interceptY[i] ?? 0) + (points.x[i] ?? 0) * (influence.slopeY[i] ?? 0);
}
