import { classCodes } from "@/app/_blocks/shared/classCodes";

/** Ticks of one class on a strip, as places in thousandths of its width. */
export interface StripClass {
  readonly class: string;
  readonly slots: readonly number[];
}

export interface Strip {
  readonly from: number;
  readonly to: number;
  readonly classes: readonly StripClass[];
}

const slotsAcross = 1000;

/** Place of a value on a strip in thousandths of its width; ends are kept off the very edge. */
export function stripSlot(value: number, from: number, to: number): number {
  return to === from ? slotsAcross / 2 : Math.round(((value - from) / (to - from)) * slotsAcross);
}

/**
 * One tick a sample at its value, in its class; samples of one class that fall on one place share a tick, so that a strip of
 * twenty thousand samples stays as light as one of thirty.
 *
 * @param values all rows; NaN where there is no value
 * @param classes class of each row, `""` where none; may be shorter than `values`
 */
export function buildStrip(values: ArrayLike<number>, classes: readonly string[]): Strip | null {
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < values.length; i++) {
    const v = values[i] ?? NaN;
    if (!Number.isFinite(v)) continue;
    if (v < low) low = v;
    if (v > high) high = v;
  }
  if (low > high) return null;
  const pad = high === low ? Math.abs(high) * 0.1 || 1 : (high - low) * 0.04;
  const from = low - pad;
  const to = high + pad;
  const { names, codes } = classCodes(classes);
  // Rows past the end of `classes` have none; so have those whose class is "".
  const none = names.indexOf("") < 0 ? names.length : names.indexOf("");
  const stands = Array.from({ length: Math.max(names.length, none + 1) }, () => new Uint8Array(slotsAcross + 1));
  for (let i = 0; i < values.length; i++) {
    const v = values[i] ?? NaN;
    if (!Number.isFinite(v)) continue;
    const slots = stands[i < codes.length ? (codes[i] ?? none) : none];
    if (slots !== undefined) slots[stripSlot(v, from, to)] = 1;
  }
  const found = stands.map((slots, place) => ({ class: names[place] ?? "", slots: placesOf(slots) }));
  return { from, to, classes: found.filter(({ slots }) => slots.length > 0) };
}

function placesOf(marks: Uint8Array): number[] {
  const places: number[] = [];
  for (let slot = 0; slot < marks.length; slot++) if (marks[slot] === 1) places.push(slot);
  return places;
}

/** SVG path of ticks that stand on the base line of a strip 1000 × 20. */
export function tickPath(slots: readonly number[], top: number): string {
  return slots.map((x) => `M${x} ${top}V20`).join("");
}

/** Row whose value lies nearest to a place; −1 where there is no value. */
export function nearestRow(values: ArrayLike<number>, value: number): number {
  let best = -1;
  let distance = Infinity;
  for (let i = 0; i < values.length; i++) {
    const d = Math.abs((values[i] ?? NaN) - value);
    if (d < distance) {
      distance = d;
      best = i;
    }
  }
  return best;
}

/** How many rows have a value. */
export function countFinite(values: ArrayLike<number>): number {
  let count = 0;
  for (let i = 0; i < values.length; i++) if (Number.isFinite(values[i] ?? NaN)) count++;
  return count;
}

/** Row of the least value, the first of equal ones; −1 where there is none. */
export function leastRow(values: ArrayLike<number>): number {
  let best = -1;
  let least = Infinity;
  for (let i = 0; i < values.length; i++) {
    const v = values[i] ?? NaN;
    if (v < least && v > -Infinity) {
      least = v;
      best = i;
    }
  }
  return best;
}

/** Place of a row in the walk of {@link rowsByValue}, counted without walking. */
export function placeInWalk(values: ArrayLike<number>, row: number): number {
  const value = values[row] ?? NaN;
  let place = 0;
  for (let i = 0; i < values.length; i++) {
    const v = values[i] ?? NaN;
    if (Number.isFinite(v) && (v < value || (v === value && i < row))) place++;
  }
  return place;
}

/** Rows that have a value, from the least to the greatest, ties in table order: the walk of the arrow keys. */
export function rowsByValue(values: ArrayLike<number>): number[] {
  const rows: number[] = [];
  for (let i = 0; i < values.length; i++) if (Number.isFinite(values[i] ?? NaN)) rows.push(i);
  return rows.sort((a, b) => (values[a] ?? 0) - (values[b] ?? 0) || a - b);
}
