import type { LineResult } from "@/cells";

/** One line of the form `name = expression`, as it stands in the text now; results may lag behind it. */
export interface FormulaLine {
  /** Its place among the block's formula lines, from 0. */
  readonly ordinal: number;
  /** Name without backticks. */
  readonly name: string;
  /** Which of several lines of this name it is, from 0. */
  readonly occurrence: number;
  /** First character of the line and one past its last, in the block's text. */
  readonly from: number;
  readonly to: number;
  readonly nameFrom: number;
  readonly nameTo: number;
}

const definition = /^(\s*)(`[^`]*`|[\p{L}_][\p{L}\p{N}_]*)\s*=(?!=)/u;

/** The lines of a formula block's text that define a name, in order. Blank lines and comments define none. */
export function formulaLines(text: string): FormulaLine[] {
  const found: FormulaLine[] = [];
  const times = new Map<string, number>();
  let from = 0;
  for (const line of text.split("\n")) {
    const match = definition.exec(line);
    const written = match?.[2];
    if (match !== null && written !== undefined) {
      const name = (written.startsWith("`") ? written.slice(1, -1) : written).normalize("NFC");
      const occurrence = times.get(name) ?? 0;
      times.set(name, occurrence + 1);
      const nameFrom = from + (match[1]?.length ?? 0);
      found.push({ ordinal: found.length, name, occurrence, from, to: from + line.length, nameFrom, nameTo: nameFrom + written.length });
    }
    from += line.length + 1;
  }
  return found;
}

/** The result that belongs to a line: that of its name, the nth of several; undefined for a line the engine has not seen yet. */
export function resultFor(line: FormulaLine, results: readonly LineResult[]): LineResult | undefined {
  let left = line.occurrence;
  for (const result of results) if (result.name === line.name && left-- === 0) return result;
  return undefined;
}

/**
 * Whether results were made from this text, as far as their lines tell: each stands where the text has a line of its name.
 * Results arrive later than typing; marks of an older text would stand under the wrong characters.
 */
export function fitsText(lines: readonly FormulaLine[], results: readonly LineResult[]): boolean {
  return results.every((result) =>
    lines.some((line) => line.name === result.name && result.span[0] >= line.from && result.span[0] <= line.to && result.span[1] <= line.to + 1),
  );
}
