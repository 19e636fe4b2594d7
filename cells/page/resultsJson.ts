import type { Problem } from "../errors";
import { State, stateName } from "../quantity/state";
import type { SimulatedLine } from "../simulate/simulated";
import {
  RESULTS_FORMAT,
  type BlockResult,
  type BudgetResult,
  type Crossing,
  type DataResult,
  type FitParameter,
  type FormulaResult,
  type LineResult,
  type NoteResult,
  type PageResults,
  type PlotLayer,
  type PlotResult,
  type TrendResult,
} from "./results";

/**
 * Results as JSON, for the command line, the API and examples (`cotectic-results/1`).
 *
 * Arrays hold every row in table order, at full double precision. What does not exist is `null`, never NaN, 0 or "", and an
 * unknown σ is `null`, never 0.
 */
export function resultsJson(results: PageResults): object {
  const blocks: Record<string, object> = {};
  for (const [handle, result] of results.blocks) blocks[handle] = blockJson(result);
  return { format: RESULTS_FORMAT, engine: results.engine, bodies: results.bodies, blocks };
}

/** True where some block has a problem of severity `error`: the command line's exit code 1. */
export function hasErrors(results: PageResults): boolean {
  for (const result of results.blocks.values()) if (result.problems.some((problem) => problem.severity === "error")) return true;
  return false;
}

function blockJson(result: BlockResult): object {
  switch (result.kind) {
    case "data":
      return dataJson(result);
    case "formula":
      return formulaJson(result);
    case "trend":
      return trendJson(result);
    case "budget":
      return budgetJson(result);
    case "plot":
      return plotJson(result);
    case "note":
      return noteJson(result);
  }
}

function dataJson(result: DataResult): object {
  return {
    kind: "data",
    samples: result.samples,
    setAside: result.setAside,
    valuesSetAside: result.valuesSetAside,
    amended: result.amended,
    ...(result.proposed ? { proposed: true } : {}),
    columns: result.columns
      .filter((column) => column.role === "quantity")
      .map(({ name, unit, n, missing, belowDetection, setAside, assumed, withoutSigma }) => ({
        name,
        unit,
        n,
        missing,
        belowDetection,
        setAside,
        assumed,
        withoutSigma,
      })),
    screening: result.screening,
    problems: result.problems.map(problemJson),
  };
}

function formulaJson(result: FormulaResult): object {
  return {
    kind: "formula",
    lines: result.lines.map(lineJson),
    correlation: result.correlation.map((pair) => ({ of: pair.of, value: numbers(pair.value) })),
    ...tail(result),
  };
}

function lineJson(line: LineResult): object {
  if (!line.ok) return { name: line.name, unit: null, basis: null, n: 0, states: {}, value: [], sigma: [], state: [] };
  return {
    name: line.name,
    unit: line.unit,
    basis: line.basis,
    ...(line.remark === null ? {} : { remark: line.remark }),
    ...(line.perSample ? {} : { perSample: false }),
    ...(line.byClass === undefined ? {} : { byClass: line.byClass }),
    n: line.n,
    states: line.states,
    ...(line.assumed > 0 ? { assumed: line.assumed } : {}),
    value: present(line.value, line.state),
    sigma: present(line.sigma, line.state),
    ...(line.lowerBound.includes(1) ? { sigmaIs: Array.from(line.lowerBound, (is) => (is === 1 ? "lower bound" : null)) } : {}),
    state: Array.from(line.state, stateName),
    ...(line.simulated === undefined ? {} : { simulated: simulatedJson(line.simulated) }),
  };
}

/** Quantiles of every value; null for those that were not simulated. */
function simulatedJson({ draws, seed, asked, median, from68, to68, from95, to95, withoutValue }: SimulatedLine): object {
  return {
    draws,
    seed,
    asked,
    median: numbers(median),
    from68: numbers(from68),
    to68: numbers(to68),
    from95: numbers(from95),
    to95: numbers(to95),
    ...(withoutValue.some((count) => count > 0) ? { withoutValue: Array.from(withoutValue) } : {}),
  };
}

function trendJson(result: TrendResult): object {
  return {
    kind: "trend",
    method: result.method,
    n: result.n,
    leftOut: result.leftOut,
    x: result.x,
    y: result.y,
    slope: parameter(result.slope),
    intercept: parameter(result.intercept),
    covariance: orNull(result.covariance),
    covarianceWithScatter: orNull(result.covarianceWithScatter),
    S: orNull(result.S),
    mswd: orNull(result.mswd),
    mswdExpected: result.mswdExpected ?? null,
    p: orNull(result.p),
    scatter: orNull(result.scatter),
    usesScatter: result.usesScatter ?? null,
    converged: result.converged ?? null,
    outliers: result.points.filter((point) => point.outlier).map(({ row, sample }) => ({ row, sample })),
    fromBodies: result.fromBodies,
    ...(result.crossing === undefined ? {} : { crossing: crossingJson(result.crossing) }),
    ...(result.simulated === undefined ? {} : { simulated: result.simulated }),
    ...tail(result),
  };
}

function crossingJson(crossing: Crossing): object {
  return { with: crossing.with, x: crossing.x, y: crossing.y, covariance: crossing.covariance, region: crossing.region, fromBodies: crossing.fromBodies };
}

function budgetJson(result: BudgetResult): object {
  return {
    kind: "budget",
    solved: result.solved ?? null,
    roots: result.roots,
    report: result.report,
    left: result.left ?? null,
    path: result.path,
    shares: result.shares,
    byCompilation: result.byCompilation,
    closure: result.closure ?? null,
    ...(result.simulated === undefined ? {} : { simulated: result.simulated }),
    ...tail(result),
  };
}

function plotJson(result: PlotResult): object {
  return {
    kind: "plot",
    plot: result.plot,
    x: result.x,
    y: result.y,
    ...(result.corners === undefined ? {} : { corners: result.corners }),
    ...(result.columns === undefined ? {} : { columns: result.columns }),
    drawn: result.drawn,
    notDrawn: result.notDrawn,
    layers: result.layers.map(layerJson),
    ...tail(result),
  };
}

/** What a layer shows, without the points: those are the formula's or the table's own numbers. */
function layerJson(layer: PlotLayer): object {
  switch (layer.what) {
    case "samples": {
      const n = layer.points.x.reduce((count, x) => (Number.isFinite(x) ? count + 1 : count), 0);
      return { what: layer.what, data: layer.data, ...(layer.of === undefined ? {} : { of: layer.of }), n, ellipses: layer.ellipses };
    }
    case "means":
      return {
        what: layer.what,
        data: layer.data,
        classes: layer.classes.map(({ points, ...one }) => ({ ...one, points: points.map((point) => ({ ...point, y: orNull(point.y) })) })),
      };
    case "trend":
      return { what: layer.what, trend: layer.trend, range: layer.range.map(orNull), usesScatter: layer.usesScatter };
    case "crossing":
      return { what: layer.what, trends: layer.trends, x: layer.x, y: layer.y, sigmaX: orNull(layer.sigmaX), sigmaY: orNull(layer.sigmaY) };
    case "path":
      return { what: layer.what, budget: layer.budget, points: layer.line.x.length, end: layer.end ?? null };
    case "bodies":
      return {
        what: layer.what,
        bodies: layer.bodies.map(({ name, compilation, x, y, sigmaX, sigmaY }) => ({
          name,
          compilation,
          x: orNull(x),
          y: orNull(y),
          sigmaX: orNull(sigmaX),
          sigmaY: orNull(sigmaY),
        })),
      };
    case "annotation":
      return { what: layer.what, text: layer.text, x: layer.x, y: layer.y };
  }
}

function noteJson(result: NoteResult): object {
  return {
    kind: "note",
    values: result.values.map(({ name, shown, unit, value, sigma }) => ({ name, shown, unit, value: orNull(value), sigma: orNull(sigma) })),
    ...tail(result),
  };
}

function tail(result: BlockResult): object {
  return { ...(Object.keys(result.bodiesUsed).length > 0 ? { bodies: result.bodiesUsed } : {}), problems: result.problems.map(problemJson) };
}

/** Keys in one fixed order, absent ones left out. */
function problemJson(problem: Problem): object {
  const { code, severity, block, span, field, row, column, text } = problem;
  return {
    code,
    severity,
    ...(block === undefined ? {} : { block }),
    ...(span === undefined ? {} : { span }),
    ...(field === undefined ? {} : { field }),
    ...(row === undefined ? {} : { row }),
    ...(column === undefined ? {} : { column }),
    text,
  };
}

/** Value and σ by the errors alone, and both with scatter where there is some: each σ beside the value it belongs to. */
function parameter(of: FitParameter | undefined): object | null {
  if (of === undefined) return null;
  return {
    value: orNull(of.byErrorsAlone ?? of.value),
    sigma: orNull(of.sigma),
    ...(of.byErrorsAlone === undefined ? {} : { valueWithScatter: orNull(of.value) }),
    sigmaWithScatter: orNull(of.sigmaWithScatter),
  };
}

function orNull(value: number | null | undefined): number | null {
  return value === undefined || value === null || !Number.isFinite(value) ? null : value;
}

function numbers(values: Float64Array): (number | null)[] {
  return Array.from(values, orNull);
}

/** A number only where the row is present: what stands beside another state is no result. */
function present(values: Float64Array, state: Uint8Array): (number | null)[] {
  return Array.from(values, (value, index) => (state[index] === State.present ? orNull(value) : null));
}
