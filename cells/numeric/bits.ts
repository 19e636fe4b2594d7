/**
 * The 64 bits of a double as two 32-bit words, the same on machines of either byte order.
 *
 * The arrays are shared by every caller: read what was written before calling anything else.
 */
const double = new Float64Array(1);
const words = new Int32Array(double.buffer);
const littleEndian = new Uint8Array(new Uint32Array([1]).buffer)[0] === 1;
const HIGH = littleEndian ? 1 : 0;
const LOW = littleEndian ? 0 : 1;

const LEAST_EXPONENT = -1074;
/** 2ᵏ from the least subnormal up. A look-up is quicker than building a double from words and reading it back. */
const powers = new Float64Array(1024 - LEAST_EXPONENT);
for (let k = -1022, power = 2.2250738585072014e-308; k <= 1023; k++, power *= 2) powers[k - LEAST_EXPONENT] = power;
for (let k = -1023, power = 1.1125369292536007e-308; k >= LEAST_EXPONENT; k--, power /= 2) powers[k - LEAST_EXPONENT] = power;

/** Sign, exponent and upper 20 bits of the significand, as a signed integer. */
export function highWord(x: number): number {
  double[0] = x;
  return words[HIGH] ?? 0;
}

/** `x` with the lower half of its significand cleared, so that products of two such numbers are exact. */
export function clearLow(x: number): number {
  double[0] = x;
  words[LOW] = 0;
  return double[0] ?? 0;
}

/** 2ᵏ for −1074 ≤ k ≤ 1023. */
export function powerOfTwo(k: number): number {
  return powers[k - LEAST_EXPONENT] ?? 0;
}

/** x·2ᵏ with at most one rounding, for x near 1 and −1100 ≤ k ≤ 1100. */
export function scaleByTwo(x: number, k: number): number {
  if (k > 1023) return x * powerOfTwo(1023) * powerOfTwo(k - 1023);
  if (k >= -1022) return x * powerOfTwo(k);
  // A subnormal result is reached in the last of two steps, so that it is rounded once.
  return x * powerOfTwo(-900) * powerOfTwo(k + 900);
}
