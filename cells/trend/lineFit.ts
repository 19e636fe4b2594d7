/** Points of a fit: arrays of one length. σ and correlation are the per-sample part alone. */
export interface FitPoints {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** 1σ; NaN where unknown, which only methods that do not weigh accept. */
  readonly sigmaX: Float64Array;
  readonly sigmaY: Float64Array;
  readonly correlation: Float64Array;
}

/** A straight line y = intercept + slope · x with its covariance. */
export interface LineFit {
  readonly slope: number;
  readonly intercept: number;
  readonly slopeVariance: number;
  readonly interceptVariance: number;
  readonly covariance: number;
}

/**
 * How a line answers a small change of its points: partial derivatives of slope and intercept to each x and y. With these
 * an error that is common to all points, and a covariance between two lines, are carried through.
 */
export interface Influence {
  readonly slopeX: Float64Array;
  readonly slopeY: Float64Array;
  readonly interceptX: Float64Array;
  readonly interceptY: Float64Array;
}
