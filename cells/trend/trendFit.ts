import type { Evaluated } from "../language";
import type { CommonVariable } from "../language/scope";
import type { TrendResult } from "../page/results";
import type { Table } from "../table/table";
import type { LineForms } from "./crossing";
import type { Influence } from "./lineFit";
import type { LinearForm } from "./linearForm";

/** What a fitted trend knows beside its numbers: how it depends on samples and bodies. Never leaves the engine. */
export interface TrendFit {
  readonly handle: string;
  readonly table: Table;
  readonly x: Evaluated;
  readonly y: Evaluated;
  /** Rows of the table in the fit, in the order of the influences. */
  readonly rows: Int32Array;
  readonly influence: Influence;
  /** True where the line's σ come from the errors of the samples, so that a covariance with another such line is known. */
  readonly fromErrors: boolean;
  /** The line in display units, σ with scatter where that is in use. */
  readonly line: LineForms;
}

/** Under this key a trend's result carries its fit; neither JSON nor a message between threads takes it along. */
const fitKey = Symbol("fit");

export function withFit(result: TrendResult, fit: TrendFit): TrendResult {
  return { ...result, [fitKey]: fit };
}

/** The fit behind a trend's result; undefined where it has no line. */
export function fitOf(result: TrendResult): TrendFit | undefined {
  return (result as TrendResult & { readonly [fitKey]?: TrendFit })[fitKey];
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
  readonly rows: Int32Array;
  readonly influence: Influence;
  readonly fromErrors: boolean;
  readonly covariance: readonly [slope: number, both: number, intercept: number];
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
  return [make(0, slope, source.covariance[0]), make(1, intercept, source.covariance[2])];
}

function covarianceOfParts(source: SampleSource, which: 0 | 1, other: CommonVariable): number {
  if (!isSampleVariable(other)) return 0;
  if (other.of === source) return source.covariance[1];
  return sharedCovariance(source, other.of)[which][other.which];
}

function isSampleVariable(variable: CommonVariable): variable is SampleVariable {
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
 * J₁ · cov((x₁, y₁), (x₂, y₂)) · J₂ᵀ. Zero where they share none, or where one does not rest on the errors of its samples.
 */
function sharedCovariance(a: SampleSource, b: SampleSource): Shared {
  const found = known.get(a)?.get(b);
  if (found !== undefined) return found;
  const made = a.table === b.table && a.fromErrors && b.fromErrors ? calculateShared(a, b) : nothing;
  const inner = known.get(a) ?? new WeakMap<SampleSource, Shared>();
  inner.set(b, made);
  known.set(a, inner);
  return made;
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
  const [xx, xy, yx, yy] = [a.x.covariance(b.x), a.x.covariance(b.y), a.y.covariance(b.x), a.y.covariance(b.y)];
  const entry = (p: 0 | 1, q: 0 | 1): number => {
    const [ax, ay] = p === 0 ? [a.influence.slopeX, a.influence.slopeY] : [a.influence.interceptX, a.influence.interceptY];
    const [bx, by] = q === 0 ? [b.influence.slopeX, b.influence.slopeY] : [b.influence.interceptX, b.influence.interceptY];
    let sum = 0;
    for (const [row, i, j] of pairs) {
      sum += (ax[i] ?? 0) * ((xx[row] ?? 0) * (bx[j] ?? 0) + (xy[row] ?? 0) * (by[j] ?? 0));
      sum += (ay[i] ?? 0) * ((yx[row] ?? 0) * (bx[j] ?? 0) + (yy[row] ?? 0) * (by[j] ?? 0));
    }
    return Number.isFinite(sum) ? sum : 0;
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
