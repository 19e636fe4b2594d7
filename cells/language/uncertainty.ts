import type { QuantityColumn } from "../table/table";
import { State } from "../quantity/state";
import type { ClassVariable, ColumnVariable, OneVariable, Variable } from "./compiled";
import type { Graph } from "./graph";

export type CommonPart = OneVariable | ClassVariable;

/** Nodes of a result's uncertainty, by first-order propagation (JCGM 100:2008, 5.2.2). */
export interface UncertaintyNodes {
  readonly sigma: number;
  readonly sigmaPerSample: number;
  readonly sigmaCommon: number;
  /** 1 where part of the inputs have a σ and part have none. */
  readonly lowerBound: number;
  /** 1 where an assumed σ counts. */
  readonly assumed: number;
}

/** Which rows of a column that have a value also have a σ. */
type Coverage = "all" | "some" | "none";
const coverages = new WeakMap<QuantityColumn, Coverage>();

function coverageOf(column: QuantityColumn): Coverage {
  const known = coverages.get(column);
  if (known !== undefined) return known;
  let withSigma = 0;
  let present = 0;
  for (let row = 0; row < column.value.length; row++) {
    if (column.state[row] !== State.present) continue;
    present++;
    const sigma = column.sigma[row] as number;
    if (sigma === sigma) withSigma++;
  }
  const coverage: Coverage = withSigma === present ? "all" : withSigma === 0 ? "none" : "some";
  coverages.set(column, coverage);
  return coverage;
}

const assumedAnywhere = new WeakMap<QuantityColumn, boolean>();

function hasAssumed(column: QuantityColumn): boolean {
  const known = assumedAnywhere.get(column);
  if (known !== undefined) return known;
  const found = column.assumed.includes(1);
  assumedAnywhere.set(column, found);
  return found;
}

/**
 * Builds the nodes of σ from partial derivatives. An input without σ adds nothing and makes the result a lower bound; where no
 * input has one, σ is unknown (NaN).
 *
 * @param partials partial derivative by variable, in order of first appearance; sums follow this order
 */
export function uncertaintyNodes(graph: Graph, partials: ReadonlyMap<number, number>, variables: ReadonlyMap<number, Variable>): UncertaintyNodes {
  const zero = graph.constant(0);
  const parts = [...partials].flatMap(([node, partial]) => {
    const variable = variables.get(node);
    return variable === undefined ? [] : [{ variable, partial }];
  });
  const columns = parts.flatMap(({ variable, partial }) => (variable.sort === "column" ? [{ variable, partial }] : []));
  const commons = parts.flatMap(({ variable, partial }) => (variable.sort === "column" ? [] : [{ variable, partial }]));
  const perSample = perSampleNodes(graph, columns);
  const common = commonNodes(graph, commons);
  let assumed = zero;
  for (const { variable, partial } of columns) {
    if (hasAssumed(variable.column))
      assumed = graph.max(assumed, graph.mul(graph.load(variable.column.assumed, `${labelOf(variable)}:assumed`), graph.compare("ne", partial, zero)));
  }
  const cross = crossCovariance(graph, columns, commons);
  const both: Variance = {
    variance: graph.add(graph.add(perSample.variance, common.variance), cross),
    lacks: graph.max(perSample.lacks, common.lacks),
    has: graph.max(perSample.has, common.has),
    mayCancel: perSample.mayCancel || common.mayCancel || graph.constantOf(cross) !== 0,
  };
  return {
    sigma: root(graph, both),
    sigmaPerSample: root(graph, perSample),
    sigmaCommon: root(graph, common),
    lowerBound: graph.mul(both.lacks, both.has),
    assumed,
  };
}

/** A variance, with flags for whether inputs that matter have and lack a σ. */
interface Variance {
  readonly variance: number;
  readonly has: number;
  readonly lacks: number;
  /** True where covariances are among its terms. */
  readonly mayCancel: boolean;
}

function root(graph: Graph, { variance, lacks, has, mayCancel }: Variance): number {
  const zero = graph.constant(0);
  // Rounding may take a variance whose terms cancel just below 0.
  const sigma = graph.apply("sqrt", mayCancel ? graph.select(graph.compare("lt", variance, zero), zero, variance) : variance);
  return graph.select(graph.mul(lacks, graph.not(has)), graph.constant(Number.NaN), sigma);
}

function labelOf(variable: ColumnVariable): string {
  return `${variable.table.handle}.${variable.column.name}`;
}

function perSampleNodes(graph: Graph, parts: readonly { variable: ColumnVariable; partial: number }[]): Variance {
  const zero = graph.constant(0);
  let variance = zero;
  let has = zero;
  let lacks = zero;
  const terms: number[] = [];
  for (const { variable, partial } of parts) {
    const coverage = coverageOf(variable.column);
    const counts = graph.compare("ne", partial, zero);
    if (coverage === "none") {
      lacks = graph.max(lacks, counts);
      terms.push(zero);
      continue;
    }
    const sigma = graph.load(variable.column.sigma, `${labelOf(variable)}:sigma`);
    const term = graph.mul(partial, graph.apply("orZero", sigma));
    terms.push(term);
    variance = graph.add(variance, graph.mul(term, term));
    if (coverage === "all") has = graph.max(has, counts);
    else {
      const known = graph.apply("known", sigma);
      has = graph.max(has, graph.mul(counts, known));
      lacks = graph.max(lacks, graph.mul(counts, graph.not(known)));
    }
  }
  const covariance = declaredCovariance(graph, parts, terms);
  return { variance: graph.add(variance, covariance), has, lacks, mayCancel: graph.constantOf(covariance) !== 0 };
}

/** 2 Σ ∂f/∂c ∂f/∂x cov(c, x) over common variables that share errors with single samples, as a slope with those it was fitted to. */
function crossCovariance(
  graph: Graph,
  columns: readonly { variable: ColumnVariable; partial: number }[],
  commons: readonly { variable: CommonPart; partial: number }[],
): number {
  let sum = graph.constant(0);
  for (const { variable: common, partial: onCommon } of commons) {
    if (common.sort !== "common") continue;
    for (const { variable, partial } of columns) {
      const covariance = common.variable.covarianceWithColumn?.(variable.column);
      if (covariance === undefined) continue;
      const both = graph.mul(graph.mul(onCommon, partial), graph.load(covariance, `${common.variable.key}~${labelOf(variable)}`));
      sum = graph.add(sum, graph.mul(graph.constant(2), both));
    }
  }
  return sum;
}

/** 2 Σ ρ t_i t_j over the pairs of columns for which the table declares an error correlation. */
function declaredCovariance(graph: Graph, parts: readonly { variable: ColumnVariable; partial: number }[], terms: readonly number[]): number {
  let sum = graph.constant(0);
  for (let i = 0; i < parts.length; i++) {
    for (let j = i + 1; j < parts.length; j++) {
      const a = parts[i]?.variable;
      const b = parts[j]?.variable;
      const rho = a === undefined || b === undefined ? undefined : declaredCorrelation(a, b);
      if (rho === undefined || a === undefined || b === undefined) continue;
      const both = graph.mul(terms[i] ?? 0, terms[j] ?? 0);
      const correlation = graph.apply("orZero", graph.load(rho, `${labelOf(a)}~${labelOf(b)}`));
      sum = graph.add(sum, graph.mul(graph.constant(2), graph.mul(correlation, both)));
    }
  }
  return sum;
}

/** The declared error correlation of two columns of one table, row by row; undefined where none is declared. */
export function declaredCorrelation(a: ColumnVariable, b: ColumnVariable): Float64Array | undefined {
  if (a.table !== b.table) return undefined;
  const [x, y] = [a.column.name, b.column.name];
  return a.table.correlations.find(({ of }) => (of[0] === x && of[1] === y) || (of[0] === y && of[1] === x))?.value;
}

function commonNodes(graph: Graph, parts: readonly { variable: CommonPart; partial: number }[]): Variance {
  const zero = graph.constant(0);
  let variance = zero;
  let has = zero;
  let lacks = zero;
  let mayCancel = false;
  for (const { variable, partial } of parts) {
    const counts = graph.compare("ne", partial, zero);
    const sigma = sigmaNode(graph, variable);
    const term = graph.mul(partial, graph.apply("orZero", sigma));
    variance = graph.add(variance, graph.mul(term, term));
    const known = graph.apply("known", sigma);
    has = graph.max(has, graph.mul(counts, known));
    lacks = graph.max(lacks, graph.mul(counts, graph.not(known)));
  }
  for (let i = 0; i < parts.length; i++) {
    for (let j = i + 1; j < parts.length; j++) {
      const a = parts[i];
      const b = parts[j];
      if (a === undefined || b === undefined) continue;
      const covariance = covarianceNode(graph, a.variable, b.variable);
      if (covariance === undefined) continue;
      mayCancel = true;
      variance = graph.add(variance, graph.mul(graph.constant(2), graph.mul(covariance, graph.mul(a.partial, b.partial))));
    }
  }
  return { variance, has, lacks, mayCancel };
}

/** An unknown σ is a constant, so that what depends on it alone folds away. */
function sigmaNode(graph: Graph, variable: CommonPart): number {
  if (variable.sort === "common") {
    const { key, sigma } = variable.variable;
    return sigma === sigma ? graph.param(`${key}:sigma`, sigma) : graph.constant(Number.NaN);
  }
  return graph.load(
    Float64Array.from(variable.variables, (v) => v.sigma),
    `${variable.variables[0]?.key ?? ""}:sigma`,
    variable.split,
  );
}

function covarianceNode(graph: Graph, a: CommonPart, b: CommonPart): number | undefined {
  const covariance = covarianceOfParts(a, b);
  if (typeof covariance === "number") return covariance === 0 ? undefined : graph.param(`${keyOf(a)}~${keyOf(b)}`, covariance);
  const split = a.sort === "class" ? a.split : b.sort === "class" ? b.split : null;
  return covariance.every((c) => c === 0) ? undefined : graph.load(covariance, `${keyOf(a)}~${keyOf(b)}`, split);
}

function keyOf(part: CommonPart): string {
  return part.sort === "common" ? part.variable.key : (part.variables[0]?.key ?? "");
}

/**
 * Covariance of two common variables: one number, or one for each class where either is taken class by class. Unknown σ count
 * as 0 here; that the result is a lower bound is said elsewhere.
 */
export function covarianceOfParts(a: CommonPart, b: CommonPart): number | Float64Array {
  if (a.sort === "common" && b.sort === "common") return covarianceOf(a.variable, b.variable);
  if (a.sort === "class" && b.sort === "class" && a.split !== b.split) return 0;
  const many = a.sort === "class" ? a.variables : b.sort === "class" ? b.variables : [];
  return Float64Array.from(many, (_, place) => {
    const x = a.sort === "class" ? a.variables[place] : a.variable;
    const y = b.sort === "class" ? b.variables[place] : b.variable;
    return x === undefined || y === undefined ? 0 : covarianceOf(x, y);
  });
}

function covarianceOf(a: OneVariable["variable"], b: OneVariable["variable"]): number {
  if (a.key === b.key) return a.sigma === a.sigma ? a.sigma * a.sigma : 0;
  return commonCovarianceOf(a, b);
}

/** Canonical covariance of two different common variables. Either may be the one that knows of the other; 0 where that is unknown. */
export function commonCovarianceOf(a: OneVariable["variable"], b: OneVariable["variable"]): number {
  const known = a.covarianceWith?.(b) ?? 0;
  const covariance = known !== 0 ? known : (b.covarianceWith?.(a) ?? 0);
  return covariance === covariance ? covariance : 0;
}
