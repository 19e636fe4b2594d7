import { decimalsOf, formatNumber, withUnit } from "@/app/_ui/concise";
import { rangeInWords, type LineResult, type Quantiles, type SimulationWish } from "@/cells";
import { median } from "./spread";

const thousands = (n: number): string => String(n).replace(/\B(?=(\d{3})+$)/gu, ",");

/** "2,000 draws, seed 1" */
export function wishInWords({ draws, seed }: SimulationWish): string {
  return `${thousands(draws)} draws, seed ${seed}`;
}

/** "simulated: 68 % within 1.4 to 3.4, 95 % within 1.1 to 5.2 wt%, median 2.1" */
export function quantilesInWords({ median: middle, from68, to68, from95, to95 }: Quantiles, unit: string): string {
  const range = rangeInWords(from68, to68);
  return `simulated: 68 % within ${range}, 95 % within ${withUnit(rangeInWords(from95, to95), unit)}, median ${asFineAs(range, middle)}`;
}

/** A number with as many decimals as the ends of a range have. */
function asFineAs(range: string, value: number): string {
  const ends = range.split(" to ");
  if (!ends.every((end) => /^[-−]?\d+(?:\.\d+)?$/u.test(end))) return formatNumber(value, 3);
  return value.toFixed(Math.max(...ends.map(decimalsOf))).replace("-", "−");
}

/** What the simulation says of a line, beside what first order says; "" where it says nothing. */
export function lineSimulated(line: LineResult): string {
  const { simulated } = line;
  if (!line.ok || simulated === undefined) return "";
  const at = (column: Float64Array, i: number): number => column[i] ?? NaN;
  if (!line.perSample && line.byClass === undefined) {
    const [middle, from68, to68, from95, to95] = [simulated.median, simulated.from68, simulated.to68, simulated.from95, simulated.to95].map((c) => at(c, 0));
    if (!Number.isFinite(middle)) return "";
    return quantilesInWords({ median: middle ?? NaN, from68: from68 ?? NaN, to68: to68 ?? NaN, from95: from95 ?? NaN, to95: to95 ?? NaN }, line.unit);
  }
  const widths = simulated.to68.map((to, i) => (to - at(simulated.from68, i)) / 2);
  const typical = median(widths);
  if (typical === null) return "";
  const n = widths.reduce((count, width) => (Number.isFinite(width) ? count + 1 : count), 0);
  const part = simulated.asked ? "" : `, for ${n} where first order cannot be trusted`;
  return `simulated: median half-width ${formatNumber(typical, 2)} (68 %)${part}`;
}
