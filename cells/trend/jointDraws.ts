import type { Random } from "../numeric";
import { covariance, type LinearForm } from "./linearForm";

/**
 * Draws of some numbers that depend on variables with errors, jointly normal with their covariances; variables without a
 * known σ stand still.
 *
 * @returns one array a form, `draws` entries each
 */
export function jointDraws(forms: readonly LinearForm[], draws: number, random: Random): readonly Float64Array[] {
  const root = lowerRoot(forms.map((a) => Float64Array.from(forms, (b) => covariance(a, b))));
  const made = forms.map(() => new Float64Array(draws));
  const z = new Float64Array(forms.length);
  for (let k = 0; k < draws; k++) {
    for (let i = 0; i < z.length; i++) z[i] = random.normal();
    for (let i = 0; i < forms.length; i++) {
      let value = forms[i]?.value ?? NaN;
      for (let j = 0; j <= i; j++) value += (root[i]?.[j] ?? 0) * (z[j] ?? 0);
      const into = made[i];
      if (into !== undefined) into[k] = value;
    }
  }
  return made;
}

/** Lower triangular L with L Lᵀ = M (Cholesky); a direction without variance, or with one lost to rounding, gets none. */
export function lowerRoot(m: readonly Float64Array[]): readonly Float64Array[] {
  const n = m.length;
  const root = m.map(() => new Float64Array(n));
  for (let j = 0; j < n; j++) {
    const own = root[j];
    const diagonal = m[j]?.[j] ?? 0;
    if (own === undefined) continue;
    let left = diagonal;
    for (let k = 0; k < j; k++) left -= (own[k] ?? 0) * (own[k] ?? 0);
    if (!(left > 1e-14 * diagonal)) continue;
    const pivot = Math.sqrt(left);
    own[j] = pivot;
    for (let i = j + 1; i < n; i++) {
      const row = root[i];
      if (row === undefined) continue;
      let sum = m[i]?.[j] ?? 0;
      for (let k = 0; k < j; k++) sum -= (row[k] ?? 0) * (own[k] ?? 0);
      row[j] = sum / pivot;
    }
  }
  return root;
}
