import type { Quantiles } from "./simulated";

/** Chances of a normal value below −1σ and +1σ. */
const BELOW = 0.15865525393145705;
const ABOVE = 0.8413447460685429;

/**
 * Quantiles of the first `n` of some draws, which are sorted in place: order statistics with linear interpolation at
 * (n − 1)p (Hyndman & Fan 1996, definition 7).
 *
 * @returns NaN for each, where there are no draws
 */
export function quantilesOf(draws: Float64Array, n = draws.length): Quantiles {
  const sorted = draws.subarray(0, n).sort();
  const at = (p: number): number => {
    if (n === 0) return Number.NaN;
    const place = (n - 1) * p;
    const below = Math.floor(place);
    const low = sorted[below] as number;
    const high = sorted[Math.min(below + 1, n - 1)] as number;
    return low === high ? low : low + (place - below) * (high - low);
  };
  return { median: at(0.5), from68: at(BELOW), to68: at(ABOVE), from95: at(0.025), to95: at(0.975) };
}
