import type { Evaluated } from "../language";
import type { CommonVariable } from "../language/scope";
import type { TrendResult } from "../page/results";
import type { Unit } from "../quantity/unit";
import type { Table } from "../table/table";
import { valueAt } from "./choosePoints";
import type { LineForms } from "./crossing";
import type { ErrorModel, LineCovariance } from "./fitLine";
import type { Influence } from "./lineFit";
import type { LinearForm } from "./linearForm";

/** What a fitted trend knows beside its numbers: how it depends on samples and bodies. Never leaves the engine. */
export interface TrendFit extends AxesOfFit {
  readonly handle: string;
  /** The line in display units, with the σ that is in use: with scatter where the points scatter more than their errors say. */
  readonly line: LineForms;
  readonly source: SampleSource;
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

/** Slope or intercept of a fit, as far as it depends on the samples alone. */
export interface SampleVariable extends CommonVariable {
  readonly of: SampleSource;
  readonly which: 0 | 1;
}

/** The samples' part of a fit's covariance: slope (0) and intercept (1). */
export interface SampleSource {
  readonly handle: string;
  readonly table: Table;
  readonly x: Evaluated;
  readonly y: Evaluated;
  /** What stands on y, to know whether the scatter of a sample is the same in another fit. */
  readonly yMeaning: string;
  /** Rows of the table in the fit, in the order of the influences. */
  readonly rows: Int32Array;
  readonly influence: Influence;
  readonly errors: ErrorModel;
  readonly covariance: LineCovariance;
}

/** Slope and intercept as variables that know what they share with each other and with those of other fits. */
export function sampleVariables(source: SampleSource, slope: number, intercept: number): [SampleVariable, SampleVariable] {
  const make = (which: 0 | 1, value: number, variance: number): SampleVariable => ({
    key: `trend:${source.handle}:${which === 0 ? "slope" : "intercept"}:samples`,
    label: `${which === 0 ? "slope" : "intercept"} of ${source.handle}, from its samples`,
    value,
    sigma: Math.sqrt(variance),
    of: source,
    which,
    covarianceWith: (other) => covarianceOfParts(source, which, other),
  });
  return [make(0, slope, source.covariance.slopeVariance), make(1, intercept, source.covariance.interceptVariance)];
}

function covarianceOfParts(source: SampleSource, which: 0 | 1, other: CommonVariable): number {
  if (!isSampleVariable(other)) return 0;
  if (other.of === source) return source.covariance.covariance;
  return sharedCovariance(source, other.of)[which][other.which];
}

export function isSampleVariable(variable: CommonVariable): variable is SampleVariable {
  return "of" in variable && "which" in variable;
}

type Shared = readonly [readonly [number, number], readonly [number, number]];
const nothing: Shared = [
  [0, 0],
  [0, 0],
];
const known = new WeakMap<SampleSource, WeakMap<SampleSource, Shared>>();

/**
 * Covariance that two fits have because they use the same samples of one table: Σ over the shared rows of
 * J₁ · cov((x₁, y₁), (x₂, y₂)) · J₂ᵀ. Zero where they share none, or where that is not known: {@link sharedUnknown}.
 */
function sharedCovariance(a: SampleSource, b: SampleSource): Shared {
  const found = known.get(a)?.get(b);
  if (found !== undefined) return found;
  const made = sharedIsKnown(a, b) ? calculateShared(a, b) : nothing;
  const inner = known.get(a) ?? new WeakMap<SampleSource, Shared>();
  inner.set(b, made);
  known.set(a, inner);
  return made;
}

function sharedIsKnown(a: SampleSource, b: SampleSource): boolean {
  return a.table === b.table && a.errors.from === b.errors.from && a.errors.from !== "unknown";
}

/** How many samples two fits share in a way that this engine cannot turn into a covariance; 0 where all is known. */
export function sharedUnknown(a: SampleSource, b: SampleSource): number {
  if (sharedIsKnown(a, b)) return 0;
  const originsOf = (source: SampleSource, row: number): string[] => (source.table.origins[row] ?? []).map((origin) => `${origin.table}\n${origin.row}`);
  const inB = new Set([...b.rows].flatMap((row) => originsOf(b, row)));
  let count = 0;
  for (const row of a.rows) if (originsOf(a, row).some((origin) => inB.has(origin))) count++;
  return count;
}

function calculateShared(a: SampleSource, b: SampleSource): Shared {
  const placeInB = new Map<number, number>();
  b.rows.forEach((row, j) => placeInB.set(row, j));
  const pairs: [number, number, number][] = [];
  a.rows.forEach((row, i) => {
    const j = placeInB.get(row);
    if (j !== undefined) pairs.push([row, i, j]);
  });
  if (pairs.length === 0) return nothing;
  const none = new Float64Array(1);
  const measured = (first: Evaluated, second: Evaluated): Float64Array => (a.errors.from === "errors" ? first.covariance(second) : none);
  const [xx, xy, yx, yy] = [measured(a.x, b.x), measured(a.x, b.y), measured(a.y, b.x), measured(a.y, b.y)];
  // A sample that lies off one line lies off the other by the same, where both have the same thing on y.
  const scatter = a.yMeaning === b.yMeaning ? a.errors.extraY * b.errors.extraY : 0;
  const factor = a.errors.factor * b.errors.factor;
  const entry = (p: 0 | 1, q: 0 | 1): number => {
    const [ax, ay] = p === 0 ? [a.influence.slopeX, a.influence.slopeY] : [a.influence.interceptX, a.influence.interceptY];
    const [bx, by] = q === 0 ? [b.influence.slopeX, b.influence.slopeY] : [b.influence.interceptX, b.influence.interceptY];
    let sum = 0;
    for (const [row, i, j] of pairs) {
      sum += (ax[i] ?? 0) * (valueAt(xx, row) * (bx[j] ?? 0) + valueAt(xy, row) * (by[j] ?? 0));
      sum += (ay[i] ?? 0) * (valueAt(yx, row) * (bx[j] ?? 0) + (valueAt(yy, row) + scatter) * (by[j] ?? 0));
    }
    return Number.isFinite(sum) ? factor * sum : 0;
  };
  return [
    [entry(0, 0), entry(0, 1)],
    [entry(1, 0), entry(1, 1)],
  ];
}

/** How a fit's slope and intercept move with what is common to all its samples: bodies, other fits. */
export function commonTerms(
  rows: Int32Array,
  influence: Influence,
  x: Evaluated,
  y: Evaluated,
): { readonly slope: LinearForm["terms"]; readonly intercept: LinearForm["terms"] } {
  const gathered = new Map<string, { variable: CommonVariable; slope: number; intercept: number }>();
  const gather = (evaluated: Evaluated, onSlope: Float64Array, onIntercept: Float64Array): void => {
    for (const { variable, partial } of evaluated.common) {
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
