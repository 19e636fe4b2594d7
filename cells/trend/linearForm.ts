import type { CommonVariable } from "../language/scope";

/** A number that depends on variables with errors, to first order. */
export interface LinearForm {
  readonly value: number;
  /** Partial derivative to each variable, each key once. */
  readonly terms: readonly Term[];
}

export interface Term {
  readonly variable: CommonVariable;
  readonly partial: number;
}

/** A number without error. */
export function exact(value: number): LinearForm {
  return { value, terms: [] };
}

/** Covariance of two variables; NaN where one variable's σ is unknown. */
export function variableCovariance(a: CommonVariable, b: CommonVariable): number {
  if (a.key === b.key) return a.sigma * a.sigma;
  const known = a.covarianceWith?.(b) ?? 0;
  return known !== 0 ? known : (b.covarianceWith?.(a) ?? 0);
}

/** Covariance of two forms. Variables whose σ is unknown contribute nothing: see {@link hasUnknown}. */
export function covariance(a: LinearForm, b: LinearForm): number {
  let sum = 0;
  for (const s of a.terms) {
    for (const t of b.terms) {
      const part = s.partial * t.partial * variableCovariance(s.variable, t.variable);
      if (part === part) sum += part;
    }
  }
  return sum;
}

/** Variance of a form, as far as its variables' σ are known. */
export function variance(form: LinearForm): number {
  return covariance(form, form);
}

/** True where a variable that the form depends on has no known σ, so that its variance is a lower bound. */
export function hasUnknown(form: LinearForm): boolean {
  return form.terms.some(({ variable, partial }) => partial !== 0 && !(variable.sigma >= 0));
}

/** The function value of some forms, given its partial derivative to each. */
export function combine(value: number, parts: readonly (readonly [form: LinearForm, partial: number])[]): LinearForm {
  const merged = new Map<string, { variable: CommonVariable; partial: number }>();
  for (const [form, outer] of parts) {
    if (outer === 0) continue;
    for (const { variable, partial } of form.terms) {
      const known = merged.get(variable.key);
      if (known === undefined) merged.set(variable.key, { variable, partial: outer * partial });
      else known.partial += outer * partial;
    }
  }
  return { value, terms: [...merged.values()] };
}
