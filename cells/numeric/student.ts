import { EPSILON } from "./constants";
import { exp } from "./exp";
import { logGamma } from "./gamma";
import { log } from "./log";
import { normalQuantile } from "./normal";

/** The continued fraction of the incomplete beta function (DLMF 8.17.22), evaluated after Lentz 1976. */
function betaFraction(a: number, b: number, x: number): number {
  const tiny = 1e-300;
  let c = 1;
  let d = 1 - ((a + b) * x) / (a + 1);
  d = 1 / (Math.abs(d) < tiny ? tiny : d);
  let h = d;
  for (let m = 1; m < 100_000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 + even * d;
    d = 1 / (Math.abs(d) < tiny ? tiny : d);
    c = 1 + even / c;
    if (Math.abs(c) < tiny) c = tiny;
    h *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 + odd * d;
    d = 1 / (Math.abs(d) < tiny ? tiny : d);
    c = 1 + odd / c;
    if (Math.abs(c) < tiny) c = tiny;
    const step = d * c;
    h *= step;
    if (Math.abs(step - 1) <= EPSILON) break;
  }
  return h;
}

/**
 * The regularised incomplete beta function Iₓ(a, b).
 *
 * @returns NaN for a ≤ 0, b ≤ 0 or x outside [0, 1]
 */
export function incompleteBeta(a: number, b: number, x: number): number {
  if (!(a > 0 && b > 0 && x >= 0 && x <= 1)) return NaN;
  if (x === 0 || x === 1) return x;
  const front = exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * log(x) + b * log(1 - x));
  return x < (a + 1) / (a + b + 2) ? (front * betaFraction(a, b, x)) / a : 1 - (front * betaFraction(b, a, 1 - x)) / b;
}

/** Chance that Student's t of `degrees` degrees of freedom lies beyond ±t. */
export function studentTwoSided(t: number, degrees: number): number {
  const square = t * t;
  // From whichever end keeps its digits: close to t = 0 the other argument is 1 to working precision.
  if (square < degrees) return 1 - incompleteBeta(0.5, degrees / 2, square / (degrees + square));
  return incompleteBeta(degrees / 2, 0.5, degrees / (degrees + square));
}

/**
 * The t beyond which (on either side) Student's distribution of `degrees` degrees of freedom holds the chance
 * 1 − `inside`: 12.706 for 95 % and one degree of freedom. Bisection on ln t; the normal value for 10⁷ degrees and more.
 */
export function studentTwoSidedQuantile(inside: number, degrees: number): number {
  if (!(inside > 0 && inside < 1 && degrees > 0)) return NaN;
  const outside = 1 - inside;
  const normal = -normalQuantile(outside / 2);
  if (degrees >= 1e7) return normal;
  let low = 0;
  let high = Math.max(normal, 1e-8) * 1.5;
  while (studentTwoSided(high, degrees) > outside) {
    low = high;
    high *= 2;
  }
  for (let pass = 0; pass < 200; pass++) {
    const middle = 0.5 * (low + high);
    if (middle <= low || middle >= high) break;
    if (studentTwoSided(middle, degrees) > outside) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}
