import { interpret } from "./interpreter";
import type { Program } from "./program";
import { runMachine } from "./wasm/machine";

/** Below this many rows a program is interpreted: compiling it would take longer than running it. */
const MACHINE_FROM = 4096;

/**
 * Runs a program over `rows` rows and writes result k to `to[k]`: as machine code where there are many rows and the place
 * allows it, else by the interpreter. The bits are the same.
 */
export function run(program: Program, rows: number, to: readonly (Float64Array | Uint8Array)[]): void {
  if (rows < MACHINE_FROM || !runMachine(program, rows, to)) interpret(program, rows, to);
}
