/**
 * What became of one value. Stored as one byte a row; the order is the order of badness: a result takes the worst state
 * of what it used.
 */
export const State = { present: 0, missing: 1, belowDetection: 2, outOfDomain: 3, setAside: 4 } as const;
export type StateCode = (typeof State)[keyof typeof State];

/** The words for the states, by code, as screens, the API and files write them. */
export const stateNames = ["present", "missing", "below detection", "out of domain", "set aside"] as const;
export type StateName = (typeof stateNames)[number];

/** Name of a state code; a code out of range is a fault of ours. */
export function stateName(code: number): StateName {
  const name = stateNames[code];
  if (name === undefined) throw new RangeError(`expected a state code from 0 to ${stateNames.length - 1}, got ${code}`);
  return name;
}

/** Counts of the states other than present, by name, for showing beside a result. */
export function countStates(state: Uint8Array): Partial<Record<StateName, number>> {
  const counts = new Array<number>(stateNames.length).fill(0);
  for (const code of state) counts[code] = (counts[code] ?? 0) + 1;
  const named: Partial<Record<StateName, number>> = {};
  for (let code = 1; code < stateNames.length; code++) if (counts[code]) named[stateName(code)] = counts[code] ?? 0;
  return named;
}
