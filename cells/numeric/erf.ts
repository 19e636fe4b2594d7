import { clearLow } from "./bits";
import { EPSILON, INV_SQRT_PI } from "./constants";
import { expOfSum } from "./exp";

/** Where the series gives way to the continued fraction: beyond it, 1 − erf would lose digits. */
const SWITCH = 1.25;

/** e^(−x²), with the rounding of the square carried along, so that large x keep their digits. */
function gauss(x: number): number {
  const high = clearLow(x);
  return expOfSum(-high * high, -(x - high) * (x + high));
}

/** erf of 0 ≤ x ≤ SWITCH: e^(−x²) Σ 2ⁿ x^(2n+1) / (2n+1)!!, all terms positive (Abramowitz & Stegun 1964, 7.1.6). */
function series(x: number): number {
  const square = x * x;
  let term = x;
  let sum = 0;
  for (let n = 1; term > sum * EPSILON * 0.1; n++) {
    sum += term;
    term *= (2 * square) / (2 * n + 1);
  }
  return 2 * INV_SQRT_PI * gauss(x) * sum;
}

/** erfc of x > SWITCH by its continued fraction (Abramowitz & Stegun 1964, 7.1.14), from the tail up. */
function fraction(x: number): number {
  const depth = Math.ceil(12 + 190 / (x * x));
  let tail = x;
  for (let n = depth; n > 0; n--) tail = x + n / (2 * tail);
  return (INV_SQRT_PI * gauss(x)) / tail;
}

/** The error function. Relative error below 5·10⁻¹⁶. */
export function erf(x: number): number {
  const size = Math.abs(x);
  if (size !== size) return NaN;
  const value = size <= SWITCH ? series(size) : size > 6 ? 1 : 1 - fraction(size);
  return x < 0 ? -value : value;
}

/** 1 − erf(x) without loss for large x. Relative error below 2·10⁻¹⁵. */
export function erfc(x: number): number {
  if (x !== x) return NaN;
  if (x < 0) return 1 + erf(-x);
  if (x <= SWITCH) return 1 - series(x);
  return x > 27.3 ? 0 : fraction(x);
}
