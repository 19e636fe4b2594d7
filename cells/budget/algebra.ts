import { log, pow } from "../numeric";
import { combine, covariance, exact, type LinearForm, type Term } from "../trend/linearForm";

/**
 * Arithmetic on numbers that know how they depend on the inputs of a budget, to first order. Forms without terms cost next to
 * nothing, so one and the same model serves for the thousands of points a root is looked for at and for the 1σ of the answer.
 */
export function plus(a: LinearForm, b: LinearForm): LinearForm {
  return made(a.value + b.value, a, 1, b, 1);
}

export function minus(a: LinearForm, b: LinearForm): LinearForm {
  return made(a.value - b.value, a, 1, b, -1);
}

export function times(a: LinearForm, b: LinearForm): LinearForm {
  return made(a.value * b.value, a, b.value, b, a.value);
}

export function over(a: LinearForm, b: LinearForm): LinearForm {
  const value = a.value / b.value;
  return made(value, a, 1 / b.value, b, -value / b.value);
}

export function scaled(a: LinearForm, factor: number): LinearForm {
  return a.terms.length === 0 ? exact(a.value * factor) : combine(a.value * factor, [[a, factor]]);
}

/** base to the power exponent, for base > 0. */
export function raised(base: LinearForm, exponent: LinearForm): LinearForm {
  const value = pow(base.value, exponent.value);
  if (base.terms.length === 0 && exponent.terms.length === 0) return exact(value);
  return made(value, base, exponent.value * pow(base.value, exponent.value - 1), exponent, log(base.value) * value);
}

export const one = exact(1);

/** 1 − a. */
export function oneMinus(a: LinearForm): LinearForm {
  return minus(one, a);
}

function made(value: number, a: LinearForm, byA: number, b: LinearForm, byB: number): LinearForm {
  if (a.terms.length === 0 && b.terms.length === 0) return exact(value);
  return combine(value, [
    [a, byA],
    [b, byB],
  ]);
}

/** Partial derivatives this small beside the largest are rounding of terms that cancel. */
const ROUNDING = 1e-12;

/** The terms that count: those that only rounding kept from cancelling are left out. */
export function significantTerms(form: LinearForm): readonly Term[] {
  const weight = ({ variable, partial }: Term): number => Math.abs(partial) * Math.max(Math.abs(variable.value), variable.sigma > 0 ? variable.sigma : 0);
  let largest = 0;
  for (const term of form.terms) largest = Math.max(largest, weight(term));
  const least = ROUNDING * Math.max(largest, Math.abs(form.value));
  return form.terms.filter((term) => term.partial !== 0 && (weight(term) > least || term.variable.value === 0));
}

/** A 1σ as results give it. */
export interface Spread {
  /** null where no input that matters has a known σ. */
  readonly sigma: number | null;
  /** True where part of the inputs that matter have none. */
  readonly isLowerBound: boolean;
}

/** 1σ of a form, by first-order propagation (JCGM 100:2008, 5.2.2). A form that depends on nothing is exact: σ = 0. */
export function spreadOf(form: LinearForm): Spread {
  const terms = significantTerms(form);
  const significant = { value: form.value, terms };
  const variance = Math.max(0, covariance(significant, significant));
  const isUnknown = terms.some(({ variable }) => !(variable.sigma >= 0));
  if (isUnknown && !(variance > 0)) return { sigma: null, isLowerBound: false };
  return { sigma: Math.sqrt(variance), isLowerBound: isUnknown };
}

/** `form` as a plain number, without its dependence on the inputs. */
export function plain(form: LinearForm): LinearForm {
  return form.terms.length === 0 ? form : exact(form.value);
}

export { combine, covariance, exact };
export type { LinearForm, Term };
