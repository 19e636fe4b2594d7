import { run } from "./execute";
import type { Column } from "./graph";
import type { Program } from "./program";

/** Shorter runs are over sooner than they are looked up. */
const FROM_ROWS = 1024;
/** Results kept, in bytes: those of a page of a dozen formulas over a hundred thousand samples. */
const MAX_BYTES = 96 * 1024 * 1024;

type Result = Float64Array | Uint8Array;

const kept = new Map<string, readonly Result[]>();
let bytes = 0;
const names = new WeakMap<Column, number>();
let named = 0;

function nameOf(column: Column): number {
  let name = names.get(column);
  if (name === undefined) names.set(column, (name = named++));
  return name;
}

/** All that the bits of a program's results depend on: its operations, its numbers, and which columns it reads. */
function identityOf(program: Program, rows: number, widths: readonly (1 | 8)[]): string {
  const steps = program.instructions.map(
    ({ op, target, a, b, c, column }) => `${op} ${target} ${a} ${b} ${c}${column === undefined ? "" : ` ${nameOf(column).toString()}`}`,
  );
  const fixed = program.fixed.map(({ register, value }) => `${register.toString()}=${Object.is(value, -0) ? "-0" : String(value)}`);
  return `${rows.toString()}|${widths.join("")}|${program.results.join()}|${fixed.join()}|${steps.join(";")}`;
}

/**
 * The results of a program, run now or remembered from before: a plot asks for what a formula has just calculated, and of a
 * block in which one line was typed the others did not change. Columns never change once made, so the same program over the
 * same columns gives the same bits.
 *
 * @param widths for each result 8 for numbers or 1 for bytes
 * @returns one array for each result, shared with whoever asked before: not to be written to
 */
export function runRemembered(program: Program, rows: number, widths: readonly (1 | 8)[]): readonly Result[] {
  const make = (): readonly Result[] => {
    const made = widths.map((width): Result => (width === 8 ? new Float64Array(rows) : new Uint8Array(rows)));
    run(program, rows, made);
    return made;
  };
  if (rows < FROM_ROWS) return make();
  const identity = identityOf(program, rows, widths);
  const known = kept.get(identity);
  if (known !== undefined) {
    // Last used goes last.
    kept.delete(identity);
    kept.set(identity, known);
    return known;
  }
  const made = make();
  kept.set(identity, made);
  bytes += sizeOf(made);
  for (const [oldest, results] of kept) {
    if (bytes <= MAX_BYTES) break;
    kept.delete(oldest);
    bytes -= sizeOf(results);
  }
  return made;
}

function sizeOf(results: readonly Result[]): number {
  return results.reduce((sum, { byteLength }) => sum + byteLength, 0);
}
