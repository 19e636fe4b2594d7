import type { CommonVariable, Evaluated } from "../language";
import type { Table } from "../table/table";
import type { ErrorModel, LineCovariance } from "./fitLine";
import type { Influence } from "./lineFit";
import type { Term } from "./linearForm";
import type { Pulls } from "./pulls";

/** The samples' part of a fit's covariance: slope (0) and intercept (1). */
export interface SampleSource {
  readonly handle: string;
  readonly table: Table;
  readonly x: Evaluated;
  readonly y: Evaluated;
  /** What stands on y, to know whether the scatter of a sample is the same in another fit. */
  readonly yMeaning: string;
  /** Rows of the table in the fit, or places of its classes, in the order of the influences. */
  readonly rows: Int32Array;
  readonly influence: Influence;
  readonly errors: ErrorModel;
  readonly covariance: LineCovariance;
  /** Where the line goes through means of classes: what each point is made of, in the order of the influences. */
  readonly classes?: readonly ClassPoint[];
  /** Each sample's pull on the line, scaled to `covariance`; made when first asked for. */
  pulls(): Pulls;
}

/** One point made of a class's samples: how it depends on the means of that class. */
export interface ClassPoint {
  readonly name: string;
  readonly x: readonly Term[];
  readonly y: readonly Term[];
}

/** Slope or intercept of a fit, as far as it depends on the samples alone. */
export interface SampleVariable extends CommonVariable {
  readonly of: SampleSource;
  readonly which: 0 | 1;
  /** What the fit's own number is multiplied by, where it is used in another unit. */
  readonly scale: number;
}

export function isSampleVariable(variable: CommonVariable): variable is SampleVariable {
  return "of" in variable && "which" in variable;
}
