import { EPSILON, LN_SQRT_2PI, PI } from "./constants";
import { exp } from "./exp";
import { log } from "./log";
import { normalQuantile } from "./normal";

/**
 * What Stirling's formula leaves out: ln Γ(a+1) − [(a + ½) ln a − a + ln √(2π)], for a ≥ 15 from its asymptotic series
 * (DLMF 5.11.1), below that by recurrence from there.
 */
export function stirlingError(a: number): number {
  let correction = 0;
  let at = a;
  // error(a) = error(a+1) + (a + ½)·ln((a+1)/a) − 1, from ln Γ(a+2) = ln Γ(a+1) + ln(a+1)
  while (at < 15) {
    correction += (at + 0.5) * log1pRatio(at) - 1;
    at += 1;
  }
  const r = 1 / (at * at);
  return correction + (1 / 12 - r * (1 / 360 - r * (1 / 1260 - r * (1 / 1680 - r * (1 / 1188 - r * (691 / 360360)))))) / at;
}

/** ln((a+1)/a) = 2·artanh(1/(2a+1)), without cancellation. */
function log1pRatio(a: number): number {
  if (a < 2) return log((a + 1) / a);
  const s = 1 / (2 * a + 1);
  const z = s * s;
  let power = s;
  let sum = 0;
  for (let n = 1; power > sum * EPSILON * 0.1; n += 2, power *= z) sum += power / n;
  return 2 * sum;
}

/** ln Γ(x) for x > 0. */
export function logGamma(x: number): number {
  if (!(x > 0)) return NaN;
  if (x < 15) {
    let product = 1;
    let at = x;
    while (at < 15) product *= at++;
    return logGamma(at) - log(product);
  }
  const a = x - 1;
  return (a + 0.5) * log(a) - a + LN_SQRT_2PI + stirlingError(a);
}

/**
 * a·ln(a/m) + m − a, accurate when a and m are close (Loader 2000, "Fast and accurate computation of binomial
 * probabilities").
 */
export function deviance(a: number, m: number): number {
  const gap = a - m;
  if (Math.abs(gap) < 0.1 * (a + m)) {
    const v = gap / (a + m);
    let sum = gap * v;
    let term = 2 * a * v;
    const v2 = v * v;
    for (let n = 3; ; n += 2) {
      term *= v2;
      const next = sum + term / n;
      if (next === sum) return next;
      sum = next;
    }
  }
  return a * log(a / m) + m - a;
}

/** xᵃ e^(−x) / Γ(a+1), without the loss that large powers bring. */
function gammaFactor(a: number, x: number): number {
  if (a < 1) return exp(a * log(x) - x - logGamma(a + 1));
  return exp(-stirlingError(a) - deviance(a, x)) / Math.sqrt(2 * PI * a);
}

/**
 * The regularised incomplete gamma functions P(a, x) and Q(a, x) = 1 − P, each without cancellation: P by its series
 * (DLMF 8.7.1), Q by its continued fraction (DLMF 8.9.2, evaluated after Lentz 1976).
 *
 * @returns [P, Q]; NaN for a ≤ 0 or x < 0
 */
export function incompleteGamma(a: number, x: number): readonly [number, number] {
  if (!(a > 0 && x >= 0)) return [NaN, NaN];
  if (x === 0) return [0, 1];
  if (x === Infinity) return [1, 0];
  const factor = gammaFactor(a, x);
  if (x < a + 1) {
    let term = 1;
    let sum = 1;
    for (let n = 1; term > sum * EPSILON * 0.1; n++) {
      term *= x / (a + n);
      sum += term;
    }
    const p = factor * sum;
    return [p, 1 - p];
  }
  let b = x + 1 - a;
  let c = Infinity;
  let d = 1 / b;
  let h = d;
  for (let n = 1; n < 1_000_000; n++) {
    const numerator = n * (a - n);
    b += 2;
    d = 1 / (b + numerator * d);
    c = b + numerator / c;
    const step = c * d;
    h *= step;
    if (Math.abs(step - 1) <= EPSILON) break;
  }
  const q = factor * a * h;
  return [1 - q, q];
}

/**
 * Chance that χ² of `degrees` degrees of freedom exceeds `x`.
 */
export function chiSquareSurvival(x: number, degrees: number): number {
  return incompleteGamma(degrees / 2, x / 2)[1];
}

/**
 * The x below which χ² of `degrees` degrees of freedom lies with chance p: Wilson & Hilferty's 1931 guess, then Newton's
 * method kept between bounds.
 */
export function chiSquareQuantile(p: number, degrees: number): number {
  if (!(p >= 0 && p <= 1 && degrees > 0)) return NaN;
  if (p === 0) return 0;
  if (p === 1) return Infinity;
  const spread = 2 / (9 * degrees);
  const root = 1 - spread + normalQuantile(p) * Math.sqrt(spread);
  let x = root > 0.01 ? degrees * root * root * root : 1e-3 * degrees;
  let low = 0;
  let high = Infinity;
  for (let pass = 0; pass < 200; pass++) {
    const [below, above] = incompleteGamma(degrees / 2, x / 2);
    const excess = p > 0.5 ? 1 - p - above : below - p;
    if (excess === 0) return x;
    if (excess > 0) high = x;
    else low = x;
    const density = gammaFactor(degrees / 2, x / 2) * (degrees / 2 / x);
    let next = x - excess / density;
    if (!(next > low && next < high)) next = high === Infinity ? 2 * x : 0.5 * (low + high);
    if (Math.abs(next - x) <= 4 * EPSILON * x) return next;
    x = next;
  }
  return x;
}
