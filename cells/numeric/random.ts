import { log } from "./log";

/** A reproducible source of chance: the same seed gives the same numbers on every machine. */
export interface Random {
  /** The next value, uniform in [0, 1) on a grid of 2⁻⁵³. */
  uniform(): number;
  /** The next standard normal value. */
  normal(): number;
}

/**
 * A seeded generator: sfc32 ("small fast counting", Chris Doty-Humphrey, PractRand), which needs nothing but additions
 * and shifts of 32-bit integers. Normal values by the polar method (Marsaglia & Bray 1964).
 *
 * @param seed any integer; its lower 32 bits and its upper bits both count
 */
export function createRandom(seed: number): Random {
  let a = Math.floor(seed / 4294967296) | 0;
  let b = seed | 0;
  let c = 0x9e3779b9 | 0;
  let counter = 1;
  let kept: number | undefined;

  function next(): number {
    const sum = (((a + b) | 0) + counter) | 0;
    counter = (counter + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = (((c << 21) | (c >>> 11)) + sum) | 0;
    return sum >>> 0;
  }
  for (let round = 0; round < 15; round++) next();

  function uniform(): number {
    return ((next() >>> 5) * 67108864 + (next() >>> 6)) / 9007199254740992;
  }

  function normal(): number {
    if (kept !== undefined) {
      const value = kept;
      kept = undefined;
      return value;
    }
    for (;;) {
      const u = 2 * uniform() - 1;
      const v = 2 * uniform() - 1;
      const square = u * u + v * v;
      if (square >= 1 || square === 0) continue;
      const scale = Math.sqrt((-2 * log(square)) / square);
      kept = v * scale;
      return u * scale;
    }
  }

  return { uniform, normal };
}
