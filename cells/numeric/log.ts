import { clearLow, highWord, powerOfTwo } from "./bits";

/**
 * ln 2 in two parts: the first has 21 low bits clear, so that its product with an exponent is exact.
 */
export const LN2_HIGH = 0.6931471803691238;
export const LN2_LOW = 1.9082149292705877e-10;

const LOG10_2_HIGH = 0.3010299955494702;
const LOG10_2_LOW = 1.1451100898021838e-10;
const INV_LN10_HIGH = 0.4342944622039795;
const INV_LN10_LOW = 1.9699272335463627e-8;

const TWO_54 = 18014398509481984;
const LEAST_NORMAL = 2.2250738585072014e-308;
/** High word of √½, where the significand's range [√½, √2) begins. */
const SQRT_HALF_WORD = 0x3fe6a09e;

const O0 = 0.40000000000000880105;
const O1 = 0.22222222392147034197;
const O2 = 0.15386242218879391352;
const O3 = 0.13087330476603717432;
const E0 = 0.66666666666666666464;
const E1 = 0.28571428570801700871;
const E2 = 0.18181795593863209294;
const E3 = 0.13268705772970070268;

/** What machine code made at run time needs to take logarithms as {@link log} and {@link log10} do, to the bit. */
export const logConstants = {
  odd: [O0, O1, O2, O3],
  even: [E0, E1, E2, E3],
  ln2: [LN2_HIGH, LN2_LOW],
  log10of2: [LOG10_2_HIGH, LOG10_2_LOW],
  inverseLn10: [INV_LN10_HIGH, INV_LN10_LOW],
  leastNormal: LEAST_NORMAL,
  sqrtHalfWord: SQRT_HALF_WORD,
} as const;

/**
 * (ln((1+s)/(1−s)) − 2s) / s³ as a polynomial in z = s², for z ≤ 0.02945: a Chebyshev fit of ours, made with mpmath at
 * 60 digits, largest error 2.1·10⁻¹⁸.
 */
function tail(z: number): number {
  const w = z * z;
  const odd = O0 + w * (O1 + w * (O2 + w * O3));
  const even = E0 + w * (E1 + w * (E2 + w * E3));
  return w * odd + z * even;
}

/** What log and log10 do with 0, negatives, infinity and NaN. */
function outside(x: number): number {
  if (x === 0) return -Infinity;
  return x > 0 ? x : NaN;
}

/**
 * Natural logarithm, the same bits on every machine. Error below 1 ulp.
 *
 * x = 2ᵏ·m with m in [√½, √2); ln m = 2·artanh(s), s = (m−1)/(m+1).
 *
 * @returns −∞ for 0, NaN for negatives and NaN
 */
export function log(x: number): number {
  if (!(x > 0) || x === Infinity) return outside(x);
  let k = 0;
  if (x < LEAST_NORMAL) {
    k = -54;
    x *= TWO_54;
  }
  const shift = (highWord(x) - SQRT_HALF_WORD) >> 20;
  k += shift;
  const f = x * powerOfTwo(-shift) - 1;
  const s = f / (2 + f);
  const halfSquare = 0.5 * f * f;
  // 2s = f − s·f, and s·f = f²/2 − s·f²/2: the large part f stays exact.
  return s * (halfSquare + tail(s * s)) + k * LN2_LOW - halfSquare + f + k * LN2_HIGH;
}

/**
 * Logarithm to base 10, the same bits on every machine. Error below 1 ulp; exact for powers of ten.
 *
 * @returns −∞ for 0, NaN for negatives and NaN
 */
export function log10(x: number): number {
  if (!(x > 0) || x === Infinity) return outside(x);
  let k = 0;
  if (x < LEAST_NORMAL) {
    k = -54;
    x *= TWO_54;
  }
  const shift = (highWord(x) - SQRT_HALF_WORD) >> 20;
  k += shift;
  const f = x * powerOfTwo(-shift) - 1;
  const s = f / (2 + f);
  const halfSquare = 0.5 * f * f;
  const head = clearLow(f - halfSquare);
  const rest = f - head - halfSquare + s * (halfSquare + tail(s * s));
  const product = head * INV_LN10_HIGH;
  const exponent = k * LOG10_2_HIGH;
  const sum = exponent + product;
  return k * LOG10_2_LOW + (rest + head) * INV_LN10_LOW + rest * INV_LN10_HIGH + (exponent - sum + product) + sum;
}
