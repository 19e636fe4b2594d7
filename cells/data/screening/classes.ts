import { State } from "../../quantity/state";
import type { QuantityColumn, Table } from "../../table/table";
import { isSubstituted } from "../draft";
import { shown, type Flags } from "./flags";

/** |modified z| beyond which a value is flagged (Iglewicz & Hoaglin 1993, How to Detect and Handle Outliers, ASQC). */
const LIMIT = 3.5;
/** Fewest values of a class from which a spread is taken; common practice, no source. */
const FEWEST = 5;

/**
 * Values far from the others of their class: modified z = 0.6745 (x − median) / MAD (Iglewicz & Hoaglin 1993). Where more than
 * half the values are equal the MAD is 0, and the mean absolute deviation takes its place, (x − median) / (1.2533 mean|x − median|);
 * where that is 0 too, all are equal. Samples without a class are compared with nobody.
 */
export function screenClasses(table: Table, flags: Flags): void {
  const classes = new Map<string, number[]>();
  for (let row = 0; row < table.rows; row++) {
    const name = table.classes[row] ?? "";
    if (name === "" || table.setAside[row] === 1) continue;
    const rows = classes.get(name);
    if (rows === undefined) classes.set(name, [row]);
    else rows.push(row);
  }
  for (const column of table.columns)
    if (column.kind === "quantity") for (const [name, rows] of classes) if (rows.length >= FEWEST) screenClass(column, name, rows, flags);
}

function screenClass(column: QuantityColumn, name: string, rows: readonly number[], flags: Flags): void {
  const values = new Float64Array(rows.length);
  const places = new Int32Array(rows.length);
  let n = 0;
  for (const row of rows) {
    if (column.state[row] !== State.present || isSubstituted(column, row)) continue;
    values[n] = column.value[row] ?? Number.NaN;
    places[n++] = row;
  }
  if (n < FEWEST) return;
  const given = values.subarray(0, n);
  const middle = medianOf(given.slice());
  const deviations = given.map((value) => Math.abs(value - middle));
  let mean = 0;
  for (const deviation of deviations) mean += deviation / n;
  const mad = medianOf(deviations.slice());
  const scale = mad > 1e-12 * Math.abs(middle) ? mad / 0.6745 : 1.253314 * mean;
  if (!(scale > 0)) return;
  for (let i = 0; i < n; i++) {
    const z = ((given[i] ?? Number.NaN) - middle) / scale;
    if (Math.abs(z) <= LIMIT) continue;
    const value = shown(given[i] ?? Number.NaN, column.unit);
    flags.flag(
      "far from class",
      places[i] ?? 0,
      column.name,
      `${column.name} ${value} is far from the ${n} of ${name}, median ${shown(middle, column.unit)} (modified z ${z.toFixed(1).replace("-", "−")})`,
    );
  }
}

/** Sorts in place. */
function medianOf(values: Float64Array): number {
  values.sort();
  const half = Math.floor(values.length / 2);
  const upper = values[half] ?? Number.NaN;
  return values.length % 2 === 1 ? upper : (upper + (values[half - 1] ?? Number.NaN)) / 2;
}
