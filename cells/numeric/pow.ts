import { highWord, powerOfTwo } from "./bits";
import { expOfSum } from "./exp";
import { LN2_HIGH, LN2_LOW } from "./log";

const SPLIT = 134217729;
const TWO_54 = 18014398509481984;
const LEAST_NORMAL = 2.2250738585072014e-308;
const TWO_53 = 9007199254740992;
const SQRT_HALF_WORD = 0x3fe6a09e;
const THIRD_LOW = 1.850371707708594e-17;
/** ln 2 − LN2_HIGH − LN2_LOW, for logarithms to 100 bits. */
const LN2_LOWEST = 1.1612227229362532e-26;

/** A sum of two doubles, high first. One object, reused: numbers are read off it at once. */
const pair = { high: 0, low: 0 };

/** Error of the product p = a·b (Dekker 1971): a·b = p + productError(a, b, p) exactly. */
function productError(a: number, b: number, p: number): number {
  const ca = SPLIT * a;
  const ah = ca - (ca - a);
  const al = a - ah;
  const cb = SPLIT * b;
  const bh = cb - (cb - b);
  const bl = b - bh;
  return ah * bh - p + ah * bl + al * bh + al * bl;
}

/** ln x of a positive finite x to about 65 bits, into {@link pair}. */
function logPair(x: number): void {
  let k = 0;
  if (x < LEAST_NORMAL) {
    k = -54;
    x *= TWO_54;
  }
  const shift = (highWord(x) - SQRT_HALF_WORD) >> 20;
  k += shift;
  const f = x * powerOfTwo(-shift) - 1;

  // s = f / (2 + f) in two parts.
  const d = 2 + f;
  const dLow = 2 - d + f;
  const s = f / d;
  const back = s * d;
  const sLow = (f - back - productError(s, d, back) - s * dLow) / d;

  // z = s² in two parts, then artanh(s)/s = 1 + z·(1/3 + z·(1/5 + …)), the first two terms in two parts.
  const z = s * s;
  const zLow = productError(s, s, z) + 2 * s * sLow;
  const q =
    0.2 +
    z *
      (0.14285714285714285 +
        z *
          (0.1111111111111111 +
            z *
              (0.09090909090909091 +
                z *
                  (0.07692307692307693 +
                    z *
                      (0.06666666666666667 +
                        z * (0.058823529411764705 + z * (0.05263157894736842 + z * (0.047619047619047616 + z * 0.043478260869565216))))))));
  const zq = z * q;
  const inner = 0.3333333333333333 + zq;
  const innerLow = 0.3333333333333333 - inner + zq + productError(z, q, zq) + zLow * q + THIRD_LOW;
  const t = z * inner;
  const tLow = productError(z, inner, t) + z * innerLow + zLow * inner;

  // 2s·(1 + t) + k·ln 2
  const st = s * t;
  const stLow = productError(s, t, st) + s * tLow + sLow * t;
  const m = s + st;
  const mLow = s - m + st + stLow + sLow;
  const base = k * LN2_HIGH;
  const middle = k * LN2_LOW;
  const middleLow = productError(k, LN2_LOW, middle) + k * LN2_LOWEST;
  const m2 = 2 * m;
  const a = base + m2;
  const aLow = k === 0 ? 0 : base - a + m2;
  const b = a + middle;
  const bLow = a === 0 ? 0 : a - b + middle;
  const rest = aLow + bLow + middleLow + 2 * mLow;
  pair.high = b + rest;
  pair.low = b - pair.high + rest;
}

function isInteger(y: number): boolean {
  return Math.trunc(y) === y;
}

function isOdd(y: number): boolean {
  return Math.abs(y) < TWO_53 && isInteger(y) && y - 2 * Math.floor(y / 2) === 1;
}

/** Everything that is 0, 1, infinite or no number; undefined where the general way is needed. */
function special(x: number, y: number): number | undefined {
  if (y === 0) return 1;
  if (x !== x || y !== y) return NaN;
  if (y === 1) return x;
  const size = Math.abs(x);
  if (y === Infinity || y === -Infinity) {
    if (size === 1) return NaN;
    return size > 1 === y > 0 ? Infinity : 0;
  }
  if (x === 1) return 1;
  if (x === 0 || size === Infinity) {
    const magnitude = (x === 0) === y > 0 ? 0 : Infinity;
    const negative = (x < 0 || 1 / x < 0) && isOdd(y);
    return negative ? -magnitude : magnitude;
  }
  if (y === 2) return x * x;
  if (y === -1) return 1 / x;
  if (x < 0 && !isInteger(y)) return NaN;
  if (y === 0.5) return Math.sqrt(x);
  return undefined;
}

/**
 * x raised to y, the same bits on every machine, special cases as IEEE 754 `pow` except that 1^±∞ and (−1)^±∞ are NaN
 * (as in JavaScript). Error below 1 ulp: the logarithm is carried in two doubles.
 */
export function pow(x: number, y: number): number {
  const known = special(x, y);
  if (known !== undefined) return known;
  const sign = x < 0 && isOdd(y) ? -1 : 1;
  logPair(Math.abs(x));
  const { high, low } = pair;
  const p = y * high;
  if (!(Math.abs(p) < 760)) return p > 0 ? sign * Infinity : sign * 0;
  // |y| may be too large to split; it is then harmless, since |p| < 760 leaves ln x below 760/|y|.
  const error = Math.abs(y) > 1e290 ? 0 : productError(y, high, p);
  return sign * expOfSum(p, error + y * low);
}
