import type { PageResults } from "@/cells";

/** Everything that an evaluation gave, as one text in which every bit of every number shows. */
export function resultsText(results: PageResults): string {
  return JSON.stringify(results, (_, value: unknown) => {
    if (typeof value === "number") return bitsOf(value);
    if (value instanceof Float64Array) return Array.from(value, bitsOf).join(" ");
    if (ArrayBuffer.isView(value)) return Array.from(value as Uint8Array).join(" ");
    if (value instanceof Map) return [...(value as Map<unknown, unknown>)];
    return value;
  });
}

/** A decimal that only this double rounds to; 0 and −0 apart, NaN and the infinities by name. */
function bitsOf(value: number): string {
  return Object.is(value, -0) ? "-0" : String(value);
}
