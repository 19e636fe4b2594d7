import { condensationRows } from "./reference/condensationTemperatures";
import type { CondensationRow } from "./reference/rows";

const byElement: ReadonlyMap<string, CondensationRow> = new Map(condensationRows.map((row) => [row.element, row]));

/** 50 % condensation temperature of an element with its source and whether it was checked; undefined where none is listed. */
export function condensationTemperature(element: string): CondensationRow | undefined {
  return byElement.get(element);
}

/** Elements from the most refractory to the most volatile; equal temperatures keep the reference table's order. */
export function elementsByCondensation(): readonly string[] {
  return [...condensationRows].sort((a, b) => b.t50 - a.t50).map((row) => row.element);
}
