import { createRandom, type Random } from "../numeric";

/**
 * A source of chance of its own for one variable. It follows from the seed and the variable's name alone, so that what else
 * is calculated, and in which order, cannot move its draws.
 */
export function streamOf(seed: number, name: string): Random {
  const text = `${seed}|${name}`;
  // Two hashes of 32 bits (Fowler, Noll & Vo 1991, FNV-1a), from different beginnings, make one seed of 53.
  const upper = hash(text, 0x811c9dc5) >>> 11;
  const lower = hash(text, 0x2b7e1516);
  return createRandom(upper * 4294967296 + lower);
}

function hash(text: string, begin: number): number {
  let h = begin | 0;
  const take = (byte: number): void => {
    h ^= byte;
    // Times the prime 2²⁴ + 2⁸ + 2⁷ + 2⁴ + 2 + 1, modulo 2³².
    h = (h + (h << 1) + (h << 4) + (h << 7) + (h << 8) + (h << 24)) | 0;
  };
  for (let i = 0; i < text.length; i++) {
    const unit = text.charCodeAt(i);
    take(unit & 255);
    take(unit >>> 8);
  }
  return h >>> 0;
}

/** The first `draws` standard normal values of a variable's stream. */
export function normalsOf(seed: number, name: string, draws: number): Float64Array {
  const random = streamOf(seed, name);
  const made = new Float64Array(draws);
  for (let i = 0; i < draws; i++) made[i] = random.normal();
  return made;
}
