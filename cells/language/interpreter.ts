import { fusedSteps, stepsOf, type Step } from "./fuse";
import { loadChunk, STEP } from "./kernels";
import type { Program } from "./program";

/** Rows handled at once, a multiple of {@link STEP}: all registers of a usual program then fit into the processor's second cache. */
export const CHUNK = 1024;

type Result = Float64Array | Uint8Array;

/** Registers are kept between runs; a run needs no allocation but its results. */
const pool: Float64Array[] = [];
const none = new Float64Array(0);

/** How a program is run, made once however often it is: one by one for few rows, fused for many. */
const plans = new WeakMap<Program, { few?: readonly Step[]; many?: readonly Step[] }>();

function planOf(program: Program, rows: number): readonly Step[] {
  let plan = plans.get(program);
  if (plan === undefined) plans.set(program, (plan = {}));
  return rows < CHUNK ? (plan.few ??= stepsOf(program)) : (plan.many ??= fusedSteps(program));
}

/**
 * Runs a program over `rows` rows and writes result k to `to[k]`. Deterministic to the bit.
 *
 * @param to one column of at least `rows` entries for each result of the program
 */
export function interpret(program: Program, rows: number, to: readonly Result[]): void {
  while (pool.length < program.registers) pool.push(new Float64Array(CHUNK));
  for (const { register, value } of program.fixed) pool[register]?.fill(value, 0, Math.min(CHUNK, rows + STEP));
  const steps = planOf(program, rows);
  const direct = directResults(program, steps, to);
  // What each register stands for at the moment: itself, or a part of a column that is read or written in its place.
  const at = pool.slice(0, program.registers);
  for (let start = 0; start < rows; start += CHUNK) {
    const n = Math.min(CHUNK, rows - start);
    const whole = n === CHUNK;
    for (let i = 0; i < steps.length; i++) {
      const { kernel, column, target, a, b, c } = steps[i] as Step;
      const own = pool[target] as Float64Array;
      const result = whole ? direct[i] : undefined;
      if (kernel !== undefined) {
        const written = result === undefined ? own : result.subarray(start, start + CHUNK);
        kernel(written, at[a] ?? none, at[b] ?? none, at[c] ?? none, n);
        at[target] = written;
      } else if (whole && column instanceof Float64Array) at[target] = column.subarray(start, start + CHUNK);
      else if (column !== undefined) {
        loadChunk(own, column, start, n);
        at[target] = own;
      }
    }
    for (let k = 0; k < to.length; k++) {
      const result = to[k] as Result;
      if (!(whole && direct.includes(result as Float64Array))) store(result, start, at[program.results[k] as number] ?? none, n);
    }
  }
}

/** By step, the result that it may write into at once: what stands in its register at the end, where no column is read from the same memory. */
function directResults(program: Program, steps: readonly Step[], to: readonly Result[]): (Float64Array | undefined)[] {
  const direct = new Array<Float64Array | undefined>(steps.length).fill(undefined);
  const read = new Set(steps.map(({ column }) => column?.buffer));
  const last = new Map(steps.map(({ target }, i) => [target, i]));
  program.results.forEach((register, k) => {
    const [result, i] = [to[k], last.get(register)];
    if (i === undefined || !(result instanceof Float64Array) || read.has(result.buffer)) return;
    if (steps[i]?.kernel !== undefined) direct[i] ??= result;
  });
  return direct;
}

function store(to: Result, start: number, from: Float64Array, n: number): void {
  if (to instanceof Float64Array) to.set(n === from.length ? from : from.subarray(0, n), start);
  else for (let i = 0; i < n; i++) to[start + i] = from[i] as number;
}
