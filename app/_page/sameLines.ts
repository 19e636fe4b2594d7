import type { BlockResult, LineResult } from "@/cells";

const arrays = ["value", "sigma", "sigmaCommon", "state", "lowerBound"] as const;

function isSame(a: ArrayLike<number>, b: ArrayLike<number>): boolean {
  if (a.length !== b.length) return false;
  for (let i = 0; i < a.length; i++) if (!Object.is(a[i], b[i])) return false;
  return true;
}

/**
 * A fresh result of a formula block with the arrays of the one before wherever they hold the same numbers, so that typing in one
 * line draws that line and leaves the others alone.
 */
export function keepSameLines(before: BlockResult | undefined, fresh: BlockResult): BlockResult {
  if (fresh.kind !== "formula" || before?.kind !== "formula") return fresh;
  const known = new Map(before.lines.map((line) => [line.name, line]));
  return { ...fresh, lines: fresh.lines.map((line) => keepSame(known.get(line.name), line)) };
}

function keepSame(before: LineResult | undefined, line: LineResult): LineResult {
  if (before === undefined) return line;
  const kept: Partial<Record<(typeof arrays)[number], Float64Array | Uint8Array>> = {};
  for (const name of arrays) if (isSame(before[name], line[name])) kept[name] = before[name];
  return { ...line, ...(kept as Partial<LineResult>) };
}
