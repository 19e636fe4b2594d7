import { tickDecimals, tickStep } from "@/app/_blocks/shared/scale";
import type { Range } from "./frame";

/** Ticks as Plotly takes them: places and figures. Minor ones have no figure. */
export interface Ticks {
  readonly major: readonly { readonly at: number; readonly text: string }[];
  readonly minor: readonly number[];
}

const tens = (power: number): number => Number(`1e${power}`);

/**
 * Ticks of a logarithmic axis between two decimal logarithms: every 1 … 9 of each power while they have room, else 1, 2 and 5,
 * else powers alone. Within less than half a power they are evenly spaced, since one or two figures would say nothing.
 */
export function logTicks(range: Range, count: number): Ticks {
  const [low, high] = range[0] < range[1] ? range : [range[1], range[0]];
  if (high - low < 0.5) return evenTicks(10 ** low, 10 ** high, count);
  const powers = Array.from({ length: Math.floor(high) - Math.floor(low) + 1 }, (_, i) => Math.floor(low) + i);
  const inside = (value: number): boolean => Math.log10(value) >= low - 1e-9 && Math.log10(value) <= high + 1e-9;
  const all = powers.flatMap((power) => [1, 2, 3, 4, 5, 6, 7, 8, 9].map((digit) => Number(`${digit}e${power}`))).filter(inside);
  const leading = (value: number): number => Number(value.toExponential().slice(0, 1));
  const sets = [all.filter((value) => [1, 2, 3, 5, 7].includes(leading(value))), all.filter((value) => [1, 2, 5].includes(leading(value)))];
  const every = Math.max(1, Math.ceil(powers.length / Math.max(1, count)));
  const whole = powers
    .filter((power) => power % every === 0)
    .map(tens)
    .filter(inside);
  const major = sets.find((set) => set.length >= 2 && set.length <= count) ?? whole;
  return { major: major.map((at) => ({ at, text: figure(at) })), minor: powers.length > 8 ? [] : all.filter((value) => !major.includes(value)) };
}

function evenTicks(low: number, high: number, count: number): Ticks {
  const step = tickStep(high - low, count);
  const decimals = tickDecimals(step);
  const major: { at: number; text: string }[] = [];
  for (let k = Math.ceil(low / step - 1e-9); k * step <= high * (1 + 1e-12); k++) {
    const at = Number((k * step).toPrecision(12));
    if (at > 0) major.push({ at, text: at.toFixed(decimals) });
  }
  return { major, minor: [] };
}

function figure(value: number): string {
  if (value >= 1e-4 && value < 1e5) return String(value);
  const [digits, power = "0"] = value.toExponential().split("e");
  const times = digits === "1" ? "" : `${digits} × `;
  return `${times}10<sup>${power.replace("+", "").replace("-", "−")}</sup>`;
}

/**
 * Labels of fixed width kept apart along a line, each as near to its own place as the others allow, in their order.
 *
 * @param places ascending, in pixels
 * @returns the middles of the labels; where they do not fit between `from` and `to`, evenly spaced
 */
export function spreadLabels(places: readonly number[], apart: number, from: number, to: number): number[] {
  const n = places.length;
  if (n === 0) return [];
  if ((n - 1) * apart >= to - from) return places.map((_, i) => (n === 1 ? (from + to) / 2 : from + ((to - from) * i) / (n - 1)));
  // Labels that touch form a group that stands over the middle of its places; groups that touch become one.
  const groups: { sum: number; size: number }[] = [];
  const start = ({ sum, size }: { sum: number; size: number }): number =>
    Math.min(to - (size - 1) * apart, Math.max(from, sum / size - ((size - 1) * apart) / 2));
  for (const place of places) {
    groups.push({ sum: place, size: 1 });
    for (;;) {
      const last = groups.at(-1);
      const before = groups.at(-2);
      if (last === undefined || before === undefined || start(before) + before.size * apart <= start(last)) break;
      groups.splice(-2, 2, { sum: before.sum + last.sum, size: before.size + last.size });
    }
  }
  return groups.flatMap((group) => Array.from({ length: group.size }, (_, i) => start(group) + i * apart));
}
