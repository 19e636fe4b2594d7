import { generateKeyBetween, generateNKeysBetween } from "fractional-indexing";

/** Longest order key that is accepted; a thousand insertions at one spot stay far below it. */
export const LONGEST_ORDER_KEY = 400;

/** True for a string that the order of blocks or entries can be built on. */
export function isOrderKey(value: unknown): value is string {
  if (typeof value !== "string" || value.length === 0 || value.length > LONGEST_ORDER_KEY) return false;
  try {
    generateKeyBetween(value, null);
    return true;
  } catch {
    return false;
  }
}

/** `count` order keys, ascending, for something that is filled at once. */
export const firstOrderKeys = (count: number): readonly string[] => generateNKeysBetween(null, null, count);

/** What must be given a new order key so that something stands where it is wanted. */
export interface Placement {
  /** Key of order for the thing placed. */
  readonly place: string;
  /** Neighbours that stood on the same key and must make room: their index in the list, and their new key. */
  readonly moved: readonly { readonly index: number; readonly place: string }[];
}

/**
 * Order key between two neighbours of a list sorted by place.
 *
 * Two people who insert at one spot at once get the same key. Nothing fits between equals, so the equal ones behind the
 * new one move up with it.
 *
 * @param places order keys of the list, ascending, without the thing to be placed
 * @param index how many of them stand before it
 */
export function placeAt(places: readonly string[], index: number): Placement {
  const before = places[index - 1] ?? null;
  let end = index;
  while (before !== null && end < places.length && (places[end] ?? "") <= before) end++;
  const keys = generateNKeysBetween(before, places[end] ?? null, end - index + 1);
  const moved = keys.slice(1).map((place, n) => ({ index: index + n, place }));
  return { place: keys[0] ?? generateKeyBetween(before, null), moved };
}
