import { INV_SQRT_2PI, SQRT_2 } from "./constants";
import { erfc } from "./erf";
import { exp } from "./exp";
import { log } from "./log";

/** Chance that a standard normal value is below z. */
export function normalCdf(z: number): number {
  return 0.5 * erfc(-z / SQRT_2);
}

/** Chance that a standard normal value lies beyond ±z. */
export function normalTwoSided(z: number): number {
  return erfc(Math.abs(z) / SQRT_2);
}

/**
 * The z below which a standard normal value lies with chance p. A first guess (Abramowitz & Stegun 1964, 26.2.23,
 * error 4.5·10⁻⁴) is refined by Halley's method; relative error about 10⁻¹⁵.
 *
 * @returns −∞ for 0, ∞ for 1, NaN outside [0, 1]
 */
export function normalQuantile(p: number): number {
  if (!(p >= 0 && p <= 1)) return NaN;
  if (p === 0.5) return 0;
  if (p > 0.5) return p === 1 ? Infinity : -lowerQuantile(1 - p);
  return p === 0 ? -Infinity : lowerQuantile(p);
}

function lowerQuantile(p: number): number {
  const t = Math.sqrt(-2 * log(p));
  let z = -(t - (2.515517 + t * (0.802853 + t * 0.010328)) / (1 + t * (1.432788 + t * (0.189269 + t * 0.001308))));
  for (let pass = 0; pass < 3; pass++) {
    const step = (normalCdf(z) - p) / (INV_SQRT_2PI * exp(-0.5 * z * z));
    z -= step / (1 + 0.5 * z * step);
  }
  return z;
}
