import type { Evaluated } from "../language";
import type { CommonVariable } from "../language/scope";
import type { TrendResult } from "../page/results";
import type { Unit } from "../quantity/unit";
import type { LineForms } from "./crossing";
import type { FitPoints, Influence } from "./lineFit";
import type { LinearForm } from "./linearForm";
import type { Refit } from "./refit";
import { isSampleVariable, type SampleSource, type SampleVariable } from "./sampleSource";
import { aggregateCovariance, columnCovariance, sharedCovariance } from "./sharedSamples";

export { isSampleVariable } from "./sampleSource";
export type { SampleSource, SampleVariable } from "./sampleSource";

/** What a fitted trend knows beside its numbers: how it depends on samples and bodies. Never leaves the engine. */
export interface TrendFit extends AxesOfFit {
  readonly handle: string;
  /** The line in display units, with the σ that is in use: with scatter where the points scatter more than their errors say. */
  readonly line: LineForms;
  readonly source: SampleSource;
  readonly points: FitPoints;
  /** Fits the line again with its points elsewhere. */
  readonly refit: Refit;
  /** Half-width of a 95 % band over its 1σ: 1.96, or Student's t where σ comes from the spread of the points. */
  readonly quantile: number;
  /** True where some of the σ it rests on are unknown. */
  readonly partlyKnown: boolean;
}

/** What stands on the axes, as far as two trends must agree in it to be crossed. */
export interface AxesOfFit {
  readonly x: AxisOfFit;
  readonly y: AxisOfFit;
}

export interface AxisOfFit {
  readonly unit: Unit;
  readonly basis: Evaluated["basis"];
  readonly remark: string | null;
  /** The expression with the names of lines replaced by what they stand for. */
  readonly meaning: string;
}

/** Under this key a trend's result carries its fit; neither JSON nor a message between threads takes it along. */
const fitKey = Symbol("fit");

type Fitted = TrendResult & { readonly [fitKey]?: TrendFit };

export function withFit(result: TrendResult, fit: TrendFit): TrendResult {
  const made: Fitted = { ...result, [fitKey]: fit };
  return made;
}

/** The fit behind a trend's result; undefined where it has no line. */
export function fitOf(result: TrendResult): TrendFit | undefined {
  return (result as Fitted)[fitKey];
}

/** Slope and intercept as variables that know what they share with each other, with those of other fits, and with their samples. */
export function sampleVariables(source: SampleSource, slope: number, intercept: number): [SampleVariable, SampleVariable] {
  const make = (which: 0 | 1, value: number, variance: number): SampleVariable => {
    const name = which === 0 ? "slope" : "intercept";
    return variableOf(source, which, 1, {
      key: `trend:${source.handle}:${name}:samples`,
      label: `${name} of ${source.handle}, from its samples`,
      value,
      sigma: Math.sqrt(variance),
    });
  };
  return [make(0, slope, source.covariance.slopeVariance), make(1, intercept, source.covariance.interceptVariance)];
}

function variableOf(source: SampleSource, which: 0 | 1, scale: number, named: Pick<CommonVariable, "key" | "label" | "value" | "sigma">): SampleVariable {
  return {
    ...named,
    of: source,
    which,
    scale,
    covarianceWith: (other) => scale * covarianceOfParts(source, which, other),
    covarianceWithColumn: (column) => columnCovariance(source, which, column)?.map((value) => scale * value),
  };
}

/** The same parameter under another name and in another unit, for formulas. It goes on sharing what it shares. */
export function renamed({ of, which, scale }: SampleVariable, named: Pick<CommonVariable, "key" | "label" | "value" | "sigma">, by: number): SampleVariable {
  return variableOf(of, which, scale * by, named);
}

function covarianceOfParts(source: SampleSource, which: 0 | 1, other: CommonVariable): number {
  if (!isSampleVariable(other)) return aggregateCovariance(source, which, other);
  if (other.of !== source) return other.scale * sharedCovariance(source, other.of)[which][other.which];
  const { slopeVariance, interceptVariance, covariance } = source.covariance;
  return other.scale * (which !== other.which ? covariance : which === 0 ? slopeVariance : interceptVariance);
}

/** How a fit's slope and intercept move with what is common to all its samples: bodies, other fits. What belongs to one class alone is left out. */
export function commonTerms(
  rows: Int32Array,
  influence: Influence,
  x: Evaluated,
  y: Evaluated,
): { readonly slope: LinearForm["terms"]; readonly intercept: LinearForm["terms"] } {
  const gathered = new Map<string, { variable: CommonVariable; slope: number; intercept: number }>();
  const gather = (evaluated: Evaluated, onSlope: Float64Array, onIntercept: Float64Array): void => {
    for (const { variable, partial, place } of evaluated.common) {
      if (evaluated.byClass !== undefined && place !== undefined) continue;
      const entry = gathered.get(variable.key) ?? { variable, slope: 0, intercept: 0 };
      for (let i = 0; i < rows.length; i++) {
        const d = partial.length === 1 ? (partial[0] ?? 0) : (partial[rows[i] ?? 0] ?? 0);
        entry.slope += (onSlope[i] ?? 0) * d;
        entry.intercept += (onIntercept[i] ?? 0) * d;
      }
      gathered.set(variable.key, entry);
    }
  };
  gather(x, influence.slopeX, influence.interceptX);
  gather(y, influence.slopeY, influence.interceptY);
  const all = [...gathered.values()];
  return {
    slope: all.map(({ variable, slope }) => ({ variable, partial: slope })),
    intercept: all.map(({ variable, intercept }) => ({ variable, partial: intercept })),
  };
}
