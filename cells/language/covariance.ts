import { Graph } from "./graph";
import { MAX_DERIVED_NODES } from "./limits";
import type { Measurement } from "./measure";
import { allPresent } from "./present";
import { lower } from "./program";
import { runRemembered } from "./remembered";
import { covarianceOfParts, declaredCorrelation } from "./uncertainty";

const made = new WeakMap<Measurement, WeakMap<Measurement, Float64Array>>();

/**
 * Covariance, row by row, that two results have because they use the same measured values (or ones whose error correlation
 * is declared): Σ ∂a/∂xᵢ ∂b/∂xⱼ ρᵢⱼ σᵢ σⱼ. NaN where either has no value; a value without σ adds nothing. Kept, since fits ask again.
 */
export function perSampleCovariance(a: Measurement, b: Measurement): Float64Array {
  const known = made.get(a)?.get(b);
  if (known !== undefined) return known;
  const length = Math.max(a.length, b.length);
  const graph = new Graph(MAX_DERIVED_NODES);
  let sum = graph.constant(0);
  for (const x of a.columns) {
    for (const y of b.columns) {
      const rho = x.column === y.column ? undefined : declaredCorrelation(x, y);
      if (x.column !== y.column && rho === undefined) continue;
      const first = graph.mul(graph.adopt(a.graph, a.partialNode(x), a.columnOf, "a "), graph.load(x.column.sigma, "σ"));
      const second = graph.mul(graph.adopt(b.graph, b.partialNode(y), b.columnOf, "b "), graph.load(y.column.sigma, "σ"));
      const product = graph.apply("orZero", graph.mul(first, second));
      sum = graph.add(sum, rho === undefined ? product : graph.mul(product, graph.apply("orZero", graph.load(rho, "ρ"))));
    }
  }
  // A copy: what is blanked depends on the two results and not on the covariance alone.
  const found =
    graph.constantOf(sum) === 0
      ? new Float64Array(length)
      : (
          runRemembered(
            lower(graph, [sum], (place) => graph.loads[place]?.column ?? new Float64Array(length)),
            length,
            [8],
          )[0] as Float64Array
        ).slice();
  blank(found, a.state, b.state);
  const inner = made.get(a) ?? new WeakMap<Measurement, Float64Array>();
  inner.set(b, found);
  made.set(a, inner);
  return found;
}

/** Covariance, row by row, through bodies, fits and aggregates, and through samples that a fit of the other was fitted to. */
export function commonCovariance(a: Measurement, b: Measurement): Float64Array {
  const found = new Float64Array(Math.max(a.length, b.length));
  for (const x of a.commons) {
    for (const y of b.commons) {
      const covariance = covarianceOfParts(x, y);
      if (covariance === 0) continue;
      const split = x.sort === "class" ? x.split : y.sort === "class" ? y.split : undefined;
      const [p, q] = [a.partial(x), b.partial(y)];
      for (let i = 0; i < found.length; i++) {
        const place = split !== undefined && found.length === split.classOf.length && found.length !== split.classes.length ? (split.classOf[i] ?? -1) : i;
        const c = typeof covariance === "number" ? covariance : (covariance[place] ?? 0);
        const product = valueAt(p, i) * valueAt(q, i) * c;
        if (product === product) found[i] = (found[i] as number) + product;
      }
    }
  }
  crossParts(a, b, found);
  crossParts(b, a, found);
  blank(found, a.state, b.state);
  return found;
}

/** Adds what a's common variables share with b's measured values: a fitted slope with the samples it was fitted to. */
function crossParts(a: Measurement, b: Measurement, found: Float64Array): void {
  for (const x of a.commons) {
    if (x.sort !== "common") continue;
    for (const y of b.columns) {
      const covariance = x.variable.covarianceWithColumn?.(y.column);
      if (covariance === undefined) continue;
      const [p, q] = [a.partial(x), b.partial(y)];
      for (let i = 0; i < found.length; i++) {
        const product = valueAt(p, i) * valueAt(q, i) * valueAt(covariance, i);
        if (product === product) found[i] = (found[i] as number) + product;
      }
    }
  }
}

/** Entry of a column that may hold one number for all rows. */
export function valueAt(column: Float64Array, i: number): number {
  return (column.length === 1 ? column[0] : column[i]) as number;
}

function blank(found: Float64Array, a: Uint8Array, b: Uint8Array): void {
  if (allPresent(a) && allPresent(b)) return;
  for (let i = 0; i < found.length; i++) if ((a.length === 1 ? a[0] : a[i]) !== 0 || (b.length === 1 ? b[0] : b[i]) !== 0) found[i] = Number.NaN;
}
