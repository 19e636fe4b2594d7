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

/** Sign, exponent and upper 20 bits of the significand, as a signed integer. */
export function highWord(x: number): number {
  double[0] = x;
  return words[HIGH] ?? 0;
}

/** Lower 32 bits of the significand, as a signed integer. */
export function lowWord(x: number): number {
  double[0] = x;
  return words[LOW] ?? 0;
}

/** The double made of two words. */
export function fromWords(high: number, low: number): number {
  words[HIGH] = high;
  words[LOW] = low;
  return double[0] ?? 0;
}

/** `x` with the lower half of its significand cleared, so that products of two such numbers are exact. */
export function clearLow(x: number): number {
  double[0] = x;
  words[LOW] = 0;
  return double[0] ?? 0;
}

/** 2ᵏ for −1022 ≤ k ≤ 1023. */
export function powerOfTwo(k: number): number {
  return fromWords((k + 1023) << 20, 0);
}

/** x·2ᵏ with at most one rounding, for −2098 ≤ k ≤ 2046. */
export function scaleByTwo(x: number, k: number): number {
  if (k > 1023) return x * powerOfTwo(1023) * powerOfTwo(k - 1023 > 1023 ? 1023 : k - 1023);
  if (k >= -1022) return x * powerOfTwo(k);
  // A subnormal result is reached in one last step, so that it is rounded once; k − (−969) keeps the first step normal.
  const rest = k + 969;
  return rest >= -1022 ? x * powerOfTwo(-969) * powerOfTwo(rest) : 0 * x;
}
