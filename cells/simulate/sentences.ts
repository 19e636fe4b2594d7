import type { Evaluated } from "../language";
import type { LineResult } from "../page/results";
import { formatNumber, formatUncertain } from "../quantity/format";
import { MOST_UNASKED, type Quantiles, type SimulatedLine, type SimulationWish } from "./simulated";

/** How first order and simulation differ, in the value where they differ most. */
export function comparison(line: Pick<LineResult, "name" | "byClass">, evaluated: Evaluated, simulated: SimulatedLine): string {
  const { value, sigma, nearEdge } = evaluated;
  let worst = -1;
  let most = -1;
  let watched = 0;
  for (let i = 0; i < nearEdge.length; i++) {
    if (nearEdge[i] !== 1) continue;
    watched++;
    if (!Number.isFinite(simulated.median[i])) continue;
    const apart = disagreement(value[i] as number, sigma[i] as number, entryOf(simulated, i));
    if (apart > most) [worst, most] = [i, apart];
  }
  if (worst < 0) return `Simulation (${wishWords(simulated)}) gives no value for any of them.`;
  const place = placeOf(line, evaluated, worst);
  const which = evaluated.rows === 1 ? "" : watched === 1 ? `For ${place} ` : `They differ most for ${place}: `;
  const sentence = which + differs(value[worst] as number, sigma[worst] as number, entryOf(simulated, worst), simulated, evaluated.unit.symbol);
  const lost = withoutWords(simulated.withoutValue[worst] ?? 0, simulated.draws);
  const rest =
    !simulated.asked && watched > MOST_UNASKED ? ` Only the first ${MOST_UNASKED} of the ${watched} are simulated; let the block simulate to have all.` : "";
  return `${capital(sentence)}${lost}${rest}`;
}

/** "first order says 2.1 ± 0.9; simulation (2,000 draws, seed 1) says 68 % within 1.4 to 3.4." */
export function differs(value: number, sigma: number | null, found: Quantiles, wish: SimulationWish, unit = "1"): string {
  const shown = unit === "1" || unit === "" ? "" : ` ${unit}`;
  const first = formatUncertain(value, sigma, "plus-minus");
  return `first order says ${first}${shown}; simulation (${wishWords(wish)}) says 68 % within ${range(found.from68, found.to68)}${shown}.`;
}

export function capital(sentence: string): string {
  return sentence.charAt(0).toUpperCase() + sentence.slice(1);
}

export function wishWords({ draws, seed }: SimulationWish): string {
  return `${count(draws)} draws, seed ${seed}`;
}

export function withoutWords(withoutValue: number, draws: number): string {
  return withoutValue === 0 ? "" : ` ${count(withoutValue)} of the ${count(draws)} draws have no value: they divide by 0 or leave the domain of a function.`;
}

/** Two ends, both rounded to the place of the second digit of what lies between them. */
export function range(from: number, to: number): string {
  const places = 1 - exponentOf(to - from);
  const short = (value: number): string => {
    if (!(to > from)) return formatNumber(value);
    const digits = exponentOf(value) + places + 1;
    return digits < 1 ? "0" : formatNumber(value, digits);
  };
  return `${short(from)} to ${short(to)}`;
}

function exponentOf(value: number): number {
  return value === 0 ? 0 : Number(value.toExponential().split("e")[1] ?? 0);
}

/** By how many σ an end of the range of 68 % lies off that of first order; the larger of the two. */
function disagreement(value: number, sigma: number, { from68, to68 }: Quantiles): number {
  return Math.max(Math.abs(from68 - (value - sigma)), Math.abs(to68 - (value + sigma))) / sigma;
}

function entryOf({ median, from68, to68, from95, to95 }: SimulatedLine, i: number): Quantiles {
  const at = (column: Float64Array): number => column[i] ?? Number.NaN;
  return { median: at(median), from68: at(from68), to68: at(to68), from95: at(from95), to95: at(to95) };
}

function placeOf({ name, byClass }: Pick<LineResult, "name" | "byClass">, { table, perSample }: Evaluated, index: number): string {
  if (byClass !== undefined) return `${name} of ${byClass[index] ?? ""}`;
  if (!perSample || table === null) return name;
  const sample = table.samples[index] ?? "";
  return `${name} of ${sample === "" ? `row ${String(table.rowIds[index])}` : sample}`;
}

/** 2000 as "2,000". */
export function count(n: number): string {
  return String(n).replace(/\B(?=(\d{3})+$)/gu, ",");
}
