import type { Measurement } from "./measure";
import { covarianceOfParts, declaredCorrelation } from "./uncertainty";

const made = new WeakMap<Measurement, WeakMap<Measurement, Float64Array>>();

/**
 * Covariance, row by row, that two results have because they use the same measured values (or ones whose error correlation
 * is declared): Σ ∂a/∂xᵢ ∂b/∂xⱼ ρᵢⱼ σᵢ σⱼ. NaN where either has no value; a value without σ adds nothing. Kept, since fits ask again.
 */
export function perSampleCovariance(a: Measurement, b: Measurement): Float64Array {
  const known = made.get(a)?.get(b);
  if (known !== undefined) return known;
  const found = new Float64Array(Math.max(a.length, b.length));
  for (const x of a.columns) {
    for (const y of b.columns) {
      const same = x.column === y.column;
      const rho = same ? undefined : declaredCorrelation(x, y);
      if (!same && rho === undefined) continue;
      addProducts(found, a.partial(x), b.partial(y), x.column.sigma, y.column.sigma, rho);
    }
  }
  blank(found, a.state, b.state);
  const inner = made.get(a) ?? new WeakMap<Measurement, Float64Array>();
  inner.set(b, found);
  made.set(a, inner);
  return found;
}

/** Adds p s · q t · ρ, entry by entry, where it is a number. */
function addProducts(to: Float64Array, p: Float64Array, q: Float64Array, s: Float64Array, t: Float64Array, rho: Float64Array | undefined): void {
  for (let i = 0; i < to.length; i++) {
    const product = (p[i] as number) * (s[i] as number) * ((q[i] as number) * (t[i] as number));
    if (product === product) to[i] = (to[i] as number) + (rho === undefined ? product : product * (rho[i] as number));
  }
}

/** Covariance, row by row, through bodies, fits and aggregates. */
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
  blank(found, a.state, b.state);
  return found;
}

/** Entry of a column that may hold one number for all rows. */
export function valueAt(column: Float64Array, i: number): number {
  return (column.length === 1 ? column[0] : column[i]) as number;
}

function blank(found: Float64Array, a: Uint8Array, b: Uint8Array): void {
  for (let i = 0; i < found.length; i++) if ((a.length === 1 ? a[0] : a[i]) !== 0 || (b.length === 1 ? b[0] : b[i]) !== 0) found[i] = Number.NaN;
}
