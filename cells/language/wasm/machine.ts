import { exp, log, log10, pow } from "../../numeric";
import type { Column } from "../graph";
import type { Program } from "../program";
import { COLUMN_BYTES, COLUMNS_AT, FIXED_AT, generate, ROWS, shapeOf, type Width } from "./generate";

const PAGES = 128;
const MAX_COLUMNS = (PAGES * 65_536 - COLUMNS_AT) / COLUMN_BYTES;
const MAX_FIXED = COLUMNS_AT / 8;
/** Programs longer than this are not worth their compilation. */
const MAX_INSTRUCTIONS = 3000;
/** Compiled programs kept: the formulas of a large page. */
const MAX_KEPT = 256;

type Run = (bytes: number) => void;

interface Machine {
  readonly buffer: ArrayBuffer;
  /** Most recently used last. */
  readonly compiled: Map<string, Run>;
  readonly compile: (bytes: Uint8Array<ArrayBuffer>) => Run;
}

let machine: Machine | null | undefined;

/** One memory for all programs, of a size that never changes; null where WebAssembly or its vectors are not to be had. */
function theMachine(): Machine | null {
  if (machine !== undefined) return machine;
  try {
    const memory = new WebAssembly.Memory({ initial: PAGES, maximum: PAGES });
    const imports = { n: { log, log10, exp, pow, memory } };
    const compile = (bytes: Uint8Array<ArrayBuffer>): Run => {
      const { r } = new WebAssembly.Instance(new WebAssembly.Module(bytes), imports).exports;
      if (typeof r !== "function") throw new Error("the generated module exports no function");
      return r as Run;
    };
    machine = { buffer: memory.buffer, compiled: new Map(), compile };
  } catch {
    machine = null;
  }
  return machine;
}

/**
 * Runs a program as machine code, a block of rows at a time copied into the one memory and out of it. Same bits as the
 * interpreter.
 *
 * @returns false where it cannot (no WebAssembly here, or a program too large); nothing is written then
 */
export function runMachine(program: Program, rows: number, to: readonly (Float64Array | Uint8Array)[]): boolean {
  const columns: Column[] = [...new Set(program.instructions.flatMap(({ column }) => (column === undefined ? [] : [column])))];
  if (columns.length + to.length > MAX_COLUMNS || program.fixed.length > MAX_FIXED || program.instructions.length > MAX_INSTRUCTIONS) return false;
  const widths = to.map((result): Width => (result instanceof Float64Array ? 8 : 1));
  const found = theMachine();
  if (found === null) return false;
  const run = compiledOf(found, program, columns, widths);
  if (run === undefined) return false;
  new Float64Array(found.buffer, FIXED_AT, program.fixed.length).set(program.fixed.map((fixed) => fixed.value));
  const at = (place: number): number => COLUMNS_AT + place * COLUMN_BYTES;
  const inputs = columns.map((column, i) => viewOf(column, found.buffer, at(i)));
  const outputs = to.map((result, k) => viewOf(result, found.buffer, at(columns.length + k)));
  for (let start = 0; start < rows; start += ROWS) {
    const n = Math.min(ROWS, rows - start);
    for (let i = 0; i < columns.length; i++) {
      const column = columns[i] as Column;
      inputs[i]?.set(n === column.length ? column : column.subarray(start, start + n));
    }
    run(n * 8);
    for (let k = 0; k < to.length; k++) {
      const output = outputs[k] as Column;
      to[k]?.set(n === ROWS ? output : output.subarray(0, n), start);
    }
  }
  return true;
}

function compiledOf(of: Machine, program: Program, columns: readonly Column[], widths: readonly Width[]): Run | undefined {
  const shape = shapeKept(program, columns, widths);
  const known = of.compiled.get(shape);
  if (known !== undefined) {
    of.compiled.delete(shape);
    of.compiled.set(shape, known);
    return known;
  }
  try {
    const made = of.compile(generate(program, columns, widths));
    of.compiled.set(shape, made);
    const [oldest] = of.compiled.keys();
    if (of.compiled.size > MAX_KEPT && oldest !== undefined) of.compiled.delete(oldest);
    return made;
  } catch {
    // No vectors in this engine, or generating code is not allowed here: the interpreter does all of it.
    machine = null;
    return undefined;
  }
}

const shapes = new WeakMap<Program, { readonly widths: string; readonly shape: string }>();

/** The shape of a program, written once however often it is run. */
function shapeKept(program: Program, columns: readonly Column[], widths: readonly Width[]): string {
  const known = shapes.get(program);
  const written = widths.join();
  if (known?.widths === written) return known.shape;
  const shape = shapeOf(program, columns, widths);
  shapes.set(program, { widths: written, shape });
  return shape;
}

function viewOf(like: Column, buffer: ArrayBuffer, at: number): Column {
  if (like instanceof Float64Array) return new Float64Array(buffer, at, ROWS);
  return like instanceof Uint8Array ? new Uint8Array(buffer, at, ROWS) : new Uint16Array(buffer, at, ROWS);
}
