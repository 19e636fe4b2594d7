import { kernels, loadChunk, STEP, type Kernel } from "./kernels";
import type { Program } from "./program";

/** Rows handled at once, a multiple of {@link STEP}: all registers of a usual program then fit into the processor's second cache. */
export const CHUNK = 512;

/** Registers are kept between runs; a run needs no allocation but its results. */
const pool: Float64Array[] = [];
const none = new Float64Array(0);

/**
 * Runs a program over `rows` rows and writes result k to `to[k]`. Deterministic to the bit.
 *
 * @param to one column of at least `rows` entries for each result of the program
 */
export function interpret(program: Program, rows: number, to: readonly (Float64Array | Uint8Array)[]): void {
  while (pool.length < program.registers) pool.push(new Float64Array(CHUNK));
  for (const { register, value } of program.fixed) pool[register]?.fill(value, 0, Math.min(CHUNK, rows + STEP));
  const steps = program.instructions.map(({ op, target, a, b, c, column }) => ({
    kernel: op === "load" ? undefined : kernels[op],
    column,
    to: pool[target] ?? none,
    a: pool[a] ?? none,
    b: pool[b] ?? none,
    c: pool[c] ?? none,
  }));
  for (let start = 0; start < rows; start += CHUNK) {
    const n = Math.min(CHUNK, rows - start);
    for (const step of steps) {
      const kernel: Kernel | undefined = step.kernel;
      if (kernel !== undefined) kernel(step.to, step.a, step.b, step.c, n);
      else if (step.column !== undefined) loadChunk(step.to, step.column, start, n);
    }
    program.results.forEach((register, k) => {
      const result = to[k];
      if (result !== undefined) store(result, start, pool[register] ?? none, n);
    });
  }
}

function store(to: Float64Array | Uint8Array, start: number, from: Float64Array, n: number): void {
  if (to instanceof Float64Array) to.set(n === from.length ? from : from.subarray(0, n), start);
  else for (let i = 0; i < n; i++) to[start + i] = from[i] as number;
}
