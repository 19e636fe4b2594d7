/** What simulated propagation draws: so many draws of every input, by chance that follows from the seed alone. */
export interface SimulationWish {
  readonly draws: number;
  readonly seed: number;
}

/** Draws and seed where nobody has asked for others. */
export const USUAL_WISH: SimulationWish = { draws: 2000, seed: 1 };

/** Where nobody asked, so many values of a line are simulated: the first in the table's order for which first order cannot be trusted. */
export const MOST_UNASKED = 200;

/** Quantiles of the draws: the middle, and the ranges that hold 68.27 % and 95 % of them. */
export interface Quantiles {
  readonly median: number;
  readonly from68: number;
  readonly to68: number;
  readonly from95: number;
  readonly to95: number;
}

/** A single number, simulated. Quantiles are those of the draws that have a value. */
export interface SimulatedNumber extends Quantiles {
  /** Draws that have no value: those that divide by 0 or leave the domain of a function. */
  readonly withoutValue: number;
}

/** A line's values, simulated: one entry for each of the line's, NaN where it was not simulated. */
export interface SimulatedLine extends SimulationWish {
  /** False where only those values were simulated for which first order cannot be trusted. */
  readonly asked: boolean;
  readonly median: Float64Array;
  readonly from68: Float64Array;
  readonly to68: Float64Array;
  readonly from95: Float64Array;
  readonly to95: Float64Array;
  /** Draws of each entry that have no value. */
  readonly withoutValue: Uint32Array;
}

/** A budget, simulated: solved anew with every draw of all its inputs. */
export interface SimulatedBudget extends SimulationWish {
  readonly asked: boolean;
  /** Draws for which no possible amount reaches the target, or a fixed amount is not possible. */
  readonly withoutSolution: number;
  /** The solved amount; null where none is solved for or no draw has a solution. */
  readonly solved: Quantiles | null;
  /** Reported expressions at the end, in the report's order; null where there is none. */
  readonly report: readonly (SimulatedNumber | null)[];
}

/** A trend, simulated: its line fitted again through the points of every draw. */
export interface SimulatedTrend extends SimulationWish {
  /** Draws through whose points no line was found. */
  readonly withoutLine: number;
  /** null where no draw has a line. */
  readonly slope: Quantiles | null;
  readonly intercept: Quantiles | null;
  /** Where the trend crosses another: where the two lines of a draw meet. */
  readonly crossing?: {
    /** Draws in which they do not. */
    readonly withoutCrossing: number;
    readonly x: Quantiles | null;
    readonly y: Quantiles | null;
  };
}
