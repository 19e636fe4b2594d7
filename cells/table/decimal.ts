import type { DecimalSign } from "./raw";

/** A number with one comma, alone, after `<`, or with its uncertainty. */
const withComma = /^[<≤]?\s*[-+−]?\d+,(\d+)(?:\s*(?:±|\+\/-|\(|[eE]|%|$))/u;
const withPoint = /^[<≤]?\s*[-+−]?\d*\.\d+(?:\s*(?:±|\+\/-|\(|[eE]|%|$))/u;
/** Three digits behind a comma may be thousands. */
const mayBeThousands = /^[<≤]?\s*[-+−]?[1-9]\d{0,2},\d{3}$/u;

/**
 * The decimal sign of a file. A comma only where the file uses it consistently: no number has a point, and at least one
 * has a comma that cannot part thousands. Otherwise a point, and cells with commas are refused one by one.
 */
export function settleDecimal(rows: readonly (readonly string[])[]): DecimalSign {
  let commas = 0;
  for (const row of rows)
    for (const cell of row) {
      // Nearly all cells have neither; looking for the signs first is cheap.
      if (cell.includes(",")) {
        const text = cell.trim();
        if (withComma.test(text) && !mayBeThousands.test(text)) commas++;
      } else if (cell.includes(".") && withPoint.test(cell.trim())) return ".";
    }
  return commas > 0 ? "," : ".";
}
