import type { Problem, Span } from "../errors";
import type { SimulatedBudget, SimulatedLine, SimulatedNumber, SimulatedTrend } from "../simulate/simulated";
import type { Simulation } from "../simulate/simulation";
import type { StateName } from "../quantity/state";
import type { Table } from "../table/table";
import type { Basis, BlockKind, RowId, TrendBlock } from "./schema";

/** Version of the engine; raised whenever a change may move a number. */
export const ENGINE_VERSION = "1.1.0";
export const RESULTS_FORMAT = "cotectic-results/1";

/** What one evaluation of a page gives, by handle, in the page's order. */
export interface PageResults {
  readonly engine: string;
  /** Every alias the page uses and the compilation it means, and every compilation used by its own id. */
  readonly bodies: Readonly<Record<string, string>>;
  readonly blocks: ReadonlyMap<string, BlockResult>;
  /** Handles that each block reads from, for the rail. */
  readonly readsFrom: ReadonlyMap<string, readonly string[]>;
  /** By handle: simulations that were put off and are not done, whose blocks stand here with what first order says. */
  readonly simulations?: ReadonlyMap<string, Simulation>;
}

export type BlockResult = DataResult | FormulaResult | TrendResult | BudgetResult | PlotResult | NoteResult;

interface AnyResult {
  readonly kind: BlockKind;
  readonly problems: readonly Problem[];
  /** Bodies this block's numbers lean on: alias or id as written → compilation. */
  readonly bodiesUsed: Readonly<Record<string, string>>;
}

export interface DataResult extends AnyResult {
  readonly kind: "data";
  /** Rows in use and rows set aside. */
  readonly samples: number;
  readonly setAside: number;
  readonly valuesSetAside: number;
  readonly amended: number;
  readonly columns: readonly ColumnSummary[];
  readonly screening: readonly ScreeningFlag[];
  /** Total of each row's oxides, wt%; NaN where a row has none that means anything, left out where the table has none. */
  readonly totals?: Float64Array;
  /** True where `columns` was left out and the importer's proposal was used. */
  readonly proposed: boolean;
  /** Undefined when the table could not be read. */
  readonly table?: Table;
}

export interface ColumnSummary {
  readonly name: string;
  readonly role: string;
  readonly unit: string;
  readonly n: number;
  readonly missing: number;
  readonly belowDetection: number;
  readonly setAside: number;
  readonly assumed: number;
  /** Values without any σ. */
  readonly withoutSigma: number;
}

/** Something screening noticed; it never removes anything. */
export interface ScreeningFlag {
  readonly code: "total" | "negative" | "duplicate" | "far from class" | "unit magnitude" | "reference material" | "species disagree";
  readonly row: RowId;
  readonly sample: string;
  readonly column?: string;
  readonly text: string;
}

export interface FormulaResult extends AnyResult {
  readonly kind: "formula";
  readonly lines: readonly LineResult[];
  readonly correlation: readonly LineCorrelation[];
}

/** One line of a formula block. A line that failed has `ok: false` and its sentence among the block's problems. */
export interface LineResult {
  readonly name: string;
  /** The whole line and its expression, in the block's text. */
  readonly span: Span;
  readonly expressionSpan: Span;
  readonly ok: boolean;
  readonly unit: string;
  /** `mass`, `atoms`, `formula units`, or null for what has no basis. */
  readonly basis: Basis | "formula units" | null;
  /** Says what a basis-free number is: "normalised to CI", "logarithm" … ; null where nothing needs saying. */
  readonly remark: string | null;
  /** False where the line has one value for the table (an aggregate, a body's ratio): its arrays then have one entry. */
  readonly perSample: boolean;
  readonly n: number;
  readonly states: Partial<Record<StateName, number>>;
  /** In `unit`; NaN where there is none. */
  readonly value: Float64Array;
  /** 1σ in `unit`, per-sample and common parts together; NaN where unknown. */
  readonly sigma: Float64Array;
  /** The common part alone (bodies, fits, assumed constants). */
  readonly sigmaCommon: Float64Array;
  readonly state: Uint8Array;
  /** 1 where the σ is a lower bound, since an input's σ is unknown. */
  readonly lowerBound: Uint8Array;
  /** How many values lean on an assumed σ. */
  readonly assumed: number;
  /** For lines that give one value a class: the classes, in order of appearance; arrays then have one entry a class. */
  readonly byClass?: readonly string[];
  /** Quantiles of draws, where the block simulates or first order cannot be trusted. */
  readonly simulated?: SimulatedLine;
}

export interface LineCorrelation {
  readonly of: readonly [string, string];
  readonly value: Float64Array;
}

export interface Uncertain {
  readonly value: number;
  /** null where unknown. */
  readonly sigma: number | null;
  readonly sigmaIs?: "lower bound";
}

/** Slope or intercept of the line in use. `sigma` is from the errors of its points alone. */
/** `value` is that of the line in use. `sigma` belongs to the line by the errors alone, `sigmaWithScatter` to the one with scatter. */
export interface FitParameter extends Uncertain {
  readonly sigmaWithScatter: number | null;
  /** Value by the errors alone, where the line in use is fitted with scatter and therefore another one. */
  readonly byErrorsAlone?: number;
}

/** One sample in a fit. */
export interface TrendPoint {
  readonly index: number;
  readonly row: RowId;
  readonly sample: string;
  readonly class: string;
  readonly x: number;
  readonly y: number;
  readonly sigmaX: number;
  readonly sigmaY: number;
  readonly correlation: number;
  /** Residual over its own 1σ (with scatter where scatter is in use). */
  readonly residual: number;
  readonly outlier: boolean;
}

export interface TrendResult extends AnyResult {
  readonly kind: "trend";
  readonly method: TrendBlock["method"];
  readonly ok: boolean;
  readonly n: number;
  /** How many samples were left out of this fit, by why. */
  readonly leftOut: Readonly<Record<string, number>>;
  readonly x: AxisInfo;
  readonly y: AxisInfo;
  readonly slope?: FitParameter;
  readonly intercept?: FitParameter;
  /** Covariance of slope and intercept, without and with scatter. */
  readonly covariance?: number;
  readonly covarianceWithScatter?: number;
  readonly S?: number;
  readonly mswd?: number;
  /** Range that MSWD takes in 95 % of fits when the errors explain the scatter. */
  readonly mswdExpected?: readonly [number, number];
  readonly p?: number;
  /** Intrinsic scatter, 1σ in y. */
  readonly scatter?: number;
  /** True where p < 0.05 and therefore bands, crossings and distances use the σ with scatter. */
  readonly usesScatter?: boolean;
  readonly converged?: boolean;
  readonly points: readonly TrendPoint[];
  readonly crossing?: Crossing;
  /** Distance of each body of the page from the line. */
  readonly fromBodies: readonly BodyDistance[];
  /** Quantiles of draws, where the block simulates. */
  readonly simulated?: SimulatedTrend;
}

export interface AxisInfo {
  readonly expression: string;
  readonly label: string;
  readonly unit: string;
  readonly basis: Basis | "formula units" | null;
}

export interface Crossing {
  readonly with: string;
  readonly x: Uncertain;
  readonly y: Uncertain;
  readonly covariance: number;
  readonly region: "ellipse" | "simulated";
  readonly fromBodies: readonly BodyDistance[];
}

export interface BodyDistance {
  readonly body: string;
  /** Mahalanobis distance, dimensionless. */
  readonly distance: number;
  /** Where a σ of the body is unknown, and so not in the distance. */
  readonly distanceIs?: "upper bound";
  readonly p: number;
}

export interface BudgetResult extends AnyResult {
  readonly kind: "budget";
  readonly ok: boolean;
  readonly solved?: Uncertain & { readonly unit: string; readonly of: string };
  readonly roots: readonly number[];
  readonly report: readonly BudgetReport[];
  readonly left?: { readonly what: string; readonly mass: number; readonly composition: Readonly<Record<string, number>> };
  readonly path: readonly BudgetPathPoint[];
  /** Where the mass and each element of the reported expressions lie at the end; left out where that cannot be said. */
  readonly balance?: readonly BudgetPart[];
  /** Each input's share of the solved amount's variance, largest first, summing to 1. */
  readonly shares: readonly { readonly input: string; readonly share: number }[];
  /** Solved amount for each pair of compilations at hand. */
  readonly byCompilation: readonly {
    readonly bodies: Readonly<Record<string, string>>;
    readonly solved: number | null;
    readonly sigma: number | null;
    readonly sigmaIs?: "lower bound";
  }[];
  /** Mass at start and end, kg per kg of the start, and the difference that must be zero where closure can hold. */
  readonly closure?: { readonly start: number; readonly end: number; readonly error: number };
  /** Quantiles of draws, where the block simulates or first order cannot be trusted. */
  readonly simulated?: SimulatedBudget;
}

/** How one thing is divided between what the budget ends with and what it left behind: fractions of both together, summing to 1. */
export interface BudgetPart {
  /** `mass`, or an element's symbol. */
  readonly of: string;
  readonly kept: number;
  readonly left: number;
  /** Part of `left` that is the solved or swept species itself, where there is one. */
  readonly moved?: number;
}

export interface BudgetReport {
  readonly expression: string;
  readonly basis: Basis | "formula units" | null;
  readonly unit: string;
  readonly start: number | null;
  /** null where unknown, and where it would be a lower bound only. */
  readonly startSigma: number | null;
  readonly end: number | null;
  readonly sigma: number | null;
  readonly sigmaIs?: "lower bound";
  readonly target: number | null;
  /** null where unknown, and where it would be a lower bound only. */
  readonly targetSigma: number | null;
  /** (end − target) over its σ; null where there is no target or no σ. Where that σ is a lower bound, `note` says that the miss is at most this. */
  readonly miss: number | null;
  /** Why a value is null, or what is to be known of the miss. */
  readonly note?: string;
}

export interface BudgetPathPoint {
  readonly amount: number;
  /** Values of the reported expressions, in the report's order; null where there is none. */
  readonly values: readonly (number | null)[];
}

export interface PlotResult extends AnyResult {
  readonly kind: "plot";
  readonly plot: "scatter" | "ternary" | "pattern" | "distribution";
  readonly x: AxisInfo;
  readonly y: AxisInfo;
  /** Ternaries: what stands at the corners. x and y are the shares of the first two in the sum of the three. */
  readonly corners?: { readonly x: string; readonly y: string; readonly z: string };
  /** Patterns: what stands across, from the left. */
  readonly columns?: readonly PatternColumn[];
  /** In the order of the block's list. */
  readonly layers: readonly PlotLayer[];
  /** How many samples are drawn and, by state, are not. */
  readonly drawn: number;
  readonly notDrawn: Partial<Record<StateName, number>>;
}

/** An element, or another value, of a pattern. */
export interface PatternColumn {
  readonly of: string;
  /** Where it stands across: its 50 % condensation temperature in K, or its place in the order from 1. */
  readonly x: number;
  /** K; null where none is listed. */
  readonly temperature: number | null;
}

/** What one line of a plot's list comes to: numbers ready to be drawn. `drawn` is its place in the block's list. */
export type PlotLayer =
  | {
      readonly what: "samples";
      readonly drawn: number;
      readonly data: string;
      readonly ellipses: number;
      /** Patterns have one layer for each value: which. */
      readonly of?: string;
      /** Patterns: whether a sample's points are joined by a line. */
      readonly joined?: boolean;
      readonly points: PlotPoints;
      readonly classes: readonly string[];
      readonly samples: readonly string[];
      readonly rows: readonly RowId[];
      /** Reference of each row; empty where the table has no column of references. */
      readonly references: readonly string[];
    }
  | {
      /** Patterns: the means of classes, a line for each. */
      readonly what: "means";
      readonly drawn: number;
      readonly data: string;
      readonly classes: readonly ClassMeans[];
    }
  | {
      readonly what: "trend";
      readonly drawn: number;
      readonly trend: string;
      readonly line: Curve;
      readonly range: readonly [number, number];
      readonly band?: Band;
      readonly usesScatter: boolean;
    }
  | {
      readonly what: "crossing";
      readonly drawn: number;
      readonly trends: readonly [string, string];
      readonly x: number;
      readonly y: number;
      readonly sigmaX: number;
      readonly sigmaY: number;
      readonly ellipse: Curve;
    }
  | {
      readonly what: "path";
      readonly drawn: number;
      readonly budget: string;
      readonly line: Curve;
      readonly ticks: readonly { readonly x: number; readonly y: number; readonly label: string }[];
      readonly end?: { readonly x: number; readonly y: number; readonly label: string };
    }
  | {
      readonly what: "bodies";
      readonly drawn: number;
      readonly bodies: readonly {
        readonly name: string;
        /** Patterns have one mark for each value of a body: the body's name, and which value. */
        readonly body?: string;
        readonly of?: string;
        readonly compilation: string;
        readonly x: number;
        readonly y: number;
        readonly sigmaX: number | null;
        readonly sigmaY: number | null;
        readonly correlation: number;
        readonly ellipse?: Curve;
      }[];
    }
  | { readonly what: "annotation"; readonly drawn: number; readonly text: string; readonly x: number; readonly y: number };

export interface ClassMeans {
  readonly name: string;
  /** Samples that have at least one of the values. */
  readonly samples: number;
  readonly points: readonly { readonly of: string; readonly x: number; readonly y: number; readonly sigmaY: number | null; readonly n: number }[];
}

export interface PlotPoints {
  /** All rows in table order; NaN where a row has no point. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly sigmaX: Float64Array;
  readonly sigmaY: Float64Array;
  readonly correlation: Float64Array;
  readonly state: Uint8Array;
}

export interface Curve {
  readonly x: Float64Array;
  readonly y: Float64Array;
}

export interface Band {
  readonly x: Float64Array;
  readonly lower: Float64Array;
  readonly upper: Float64Array;
}

export interface NoteResult extends AnyResult {
  readonly kind: "note";
  /** The values a note quotes, in order: what stands between the braces, and what it comes to. */
  readonly values: readonly NoteValue[];
}

export interface NoteValue {
  /** Braces included, in the note's text. */
  readonly span: Span;
  readonly name: string;
  /** The value as text, its σ in concise form; null where there is none, with a problem that says why. */
  readonly shown: string | null;
  readonly unit: string;
  /** The number itself, for other ways of writing it; null for ranges and words. */
  readonly value: number | null;
  readonly sigma: number | null;
  /** What to trace when the value is asked where it comes from. */
  readonly trace?: TraceRequest;
}

/** Where a number comes from: a tree from the asked number down to source cells. */
export interface TraceNode {
  readonly kind: "result" | "conversion" | "cell" | "body" | "constant" | "fit" | "amount" | "aggregate";
  /** "mg_si", "Mg", "MgO × 0.60304" … */
  readonly label: string;
  readonly value: number | null;
  readonly sigma: number | null;
  readonly unit: string;
  readonly basis?: Basis | "formula units" | null;
  /** Share of the asked number's variance that comes through this branch, 0 to 1; null where no σ is known. */
  readonly share: number | null;
  /** Sentences: conversion used, amendment and its reason, assumed σ and its reason, source and checked state of a body. */
  readonly notes: readonly string[];
  /** Of the asked number: what draws of its inputs say of it. */
  readonly simulated?: SimulatedNumber & { readonly draws: number; readonly seed: number };
  /** For cells: where it stands. */
  readonly cell?: {
    readonly block: string;
    readonly row: RowId;
    /** Name of the sample, "" where it has none. */
    readonly sample: string;
    readonly column: string;
    readonly raw: string;
    readonly rawSigma: string;
    readonly sigmaHeader?: string;
  };
  readonly from: readonly TraceNode[];
}

/** Which number is asked about: a line of a formula, a column of a table, a result of a trend or budget, or a drawn point. */
export interface TraceRequest {
  readonly block: string;
  /**
   * Name of line or column; of a trend `slope`, `intercept`, `covariance`, `mswd`, `p`, `scatter`, `crossing.x`, `crossing.y`,
   * `from_BODY`, `crossing.from_BODY`; of a budget `solved`, a reported expression, alone or with `.start`, `.target`, `.miss`,
   * `left.mass`, `left.Fe`; of a plot what cells/trace/plot.ts says.
   */
  readonly name: string;
  /** Index into the table's rows (not the row id); left out for single values. */
  readonly index?: number;
}
