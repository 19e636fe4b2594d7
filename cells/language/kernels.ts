import { exp, log, log10, pow } from "../numeric";
import { State } from "../quantity/state";
import type { Column } from "./graph";
import type { Instruction } from "./program";

/**
 * One operation over the first `n` numbers of its registers. Registers are longer than that by up to {@link STEP} numbers, which
 * an operation may fill with what is never read.
 */
export type Kernel = (to: Float64Array, a: Float64Array, b: Float64Array, c: Float64Array, n: number) => void;

/** Rows that the most frequent operations handle in one turn of their loops. */
export const STEP = 4;

// Each loop is written out, because a loop around a passed-in function is not compiled to one; the most frequent ones four rows a
// turn, since the turn itself costs as much as an addition.
const add: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i += STEP) {
    to[i] = (a[i] as number) + (b[i] as number);
    to[i + 1] = (a[i + 1] as number) + (b[i + 1] as number);
    to[i + 2] = (a[i + 2] as number) + (b[i + 2] as number);
    to[i + 3] = (a[i + 3] as number) + (b[i + 3] as number);
  }
};
const sub: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i += STEP) {
    to[i] = (a[i] as number) - (b[i] as number);
    to[i + 1] = (a[i + 1] as number) - (b[i + 1] as number);
    to[i + 2] = (a[i + 2] as number) - (b[i + 2] as number);
    to[i + 3] = (a[i + 3] as number) - (b[i + 3] as number);
  }
};
const mul: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i += STEP) {
    to[i] = (a[i] as number) * (b[i] as number);
    to[i + 1] = (a[i + 1] as number) * (b[i + 1] as number);
    to[i + 2] = (a[i + 2] as number) * (b[i + 2] as number);
    to[i + 3] = (a[i + 3] as number) * (b[i + 3] as number);
  }
};
const div: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i += STEP) {
    to[i] = (a[i] as number) / (b[i] as number);
    to[i + 1] = (a[i + 1] as number) / (b[i + 1] as number);
    to[i + 2] = (a[i + 2] as number) / (b[i + 2] as number);
    to[i + 3] = (a[i + 3] as number) / (b[i + 3] as number);
  }
};
const logarithm: Kernel = (to, a, _b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = log(a[i] as number);
};
const decadic: Kernel = (to, a, _b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = log10(a[i] as number);
};
const exponential: Kernel = (to, a, _b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = exp(a[i] as number);
};
const root: Kernel = (to, a, _b, _c, n) => {
  for (let i = 0; i < n; i += STEP) {
    to[i] = Math.sqrt(a[i] as number);
    to[i + 1] = Math.sqrt(a[i + 1] as number);
    to[i + 2] = Math.sqrt(a[i + 2] as number);
    to[i + 3] = Math.sqrt(a[i + 3] as number);
  }
};
const absolute: Kernel = (to, a, _b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = Math.abs(a[i] as number);
};
const sign: Kernel = (to, a, _b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = (a[i] as number) > 0 ? 1 : (a[i] as number) < 0 ? -1 : 0;
};
const power: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = pow(a[i] as number, b[i] as number);
};
const eq: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = a[i] === b[i] ? 1 : 0;
};
const ne: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = a[i] !== b[i] ? 1 : 0;
};
const lt: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = (a[i] as number) < (b[i] as number) ? 1 : 0;
};
const le: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = (a[i] as number) <= (b[i] as number) ? 1 : 0;
};
const max: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = (a[i] as number) > (b[i] as number) ? (a[i] as number) : (b[i] as number);
};
const select: Kernel = (to, a, b, c, n) => {
  for (let i = 0; i < n; i++) to[i] = a[i] !== 0 ? (b[i] as number) : (c[i] as number);
};
const guard: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) {
    const value = b[i] as number;
    // A value minus itself is 0 only where it is finite.
    to[i] = a[i] !== 0 ? (a[i] as number) : value - value === 0 ? State.present : State.outOfDomain;
  }
};
const known: Kernel = (to, a, _b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = a[i] === a[i] ? 1 : 0;
};
const orZero: Kernel = (to, a, _b, _c, n) => {
  for (let i = 0; i < n; i += STEP) {
    const p = a[i] as number;
    const q = a[i + 1] as number;
    const r = a[i + 2] as number;
    const s = a[i + 3] as number;
    to[i] = p === p ? p : 0;
    to[i + 1] = q === q ? q : 0;
    to[i + 2] = r === r ? r : 0;
    to[i + 3] = s === s ? s : 0;
  }
};

export const kernels: Readonly<Record<Exclude<Instruction["op"], "load">, Kernel>> = {
  add,
  sub,
  mul,
  div,
  log: logarithm,
  log10: decadic,
  exp: exponential,
  sqrt: root,
  abs: absolute,
  sign,
  pow: power,
  eq,
  ne,
  lt,
  le,
  max,
  select,
  guard,
  known,
  orZero,
};

const mulMul: Kernel = (to, a, b, c, n) => {
  for (let i = 0; i < n; i += STEP) {
    to[i] = (a[i] as number) * (b[i] as number) * (c[i] as number);
    to[i + 1] = (a[i + 1] as number) * (b[i + 1] as number) * (c[i + 1] as number);
    to[i + 2] = (a[i + 2] as number) * (b[i + 2] as number) * (c[i + 2] as number);
    to[i + 3] = (a[i + 3] as number) * (b[i + 3] as number) * (c[i + 3] as number);
  }
};
const addProduct: Kernel = (to, a, b, c, n) => {
  for (let i = 0; i < n; i += STEP) {
    to[i] = (a[i] as number) + (b[i] as number) * (c[i] as number);
    to[i + 1] = (a[i + 1] as number) + (b[i + 1] as number) * (c[i + 1] as number);
    to[i + 2] = (a[i + 2] as number) + (b[i + 2] as number) * (c[i + 2] as number);
    to[i + 3] = (a[i + 3] as number) + (b[i + 3] as number) * (c[i + 3] as number);
  }
};
const squareOfProduct: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i += STEP) {
    const p = (a[i] as number) * (b[i] as number);
    const q = (a[i + 1] as number) * (b[i + 1] as number);
    const r = (a[i + 2] as number) * (b[i + 2] as number);
    const s = (a[i + 3] as number) * (b[i + 3] as number);
    to[i] = p * p;
    to[i + 1] = q * q;
    to[i + 2] = r * r;
    to[i + 3] = s * s;
  }
};
const addSquareOfProduct: Kernel = (to, a, b, c, n) => {
  for (let i = 0; i < n; i += STEP) {
    const p = (b[i] as number) * (c[i] as number);
    const q = (b[i + 1] as number) * (c[i + 1] as number);
    const r = (b[i + 2] as number) * (c[i + 2] as number);
    const s = (b[i + 3] as number) * (c[i + 3] as number);
    to[i] = (a[i] as number) + p * p;
    to[i + 1] = (a[i + 1] as number) + q * q;
    to[i + 2] = (a[i + 2] as number) + r * r;
    to[i + 3] = (a[i + 3] as number) + s * s;
  }
};
const mulOrZero: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i += STEP) {
    const p = b[i] as number;
    const q = b[i + 1] as number;
    const r = b[i + 2] as number;
    const s = b[i + 3] as number;
    to[i] = (a[i] as number) * (p === p ? p : 0);
    to[i + 1] = (a[i + 1] as number) * (q === q ? q : 0);
    to[i + 2] = (a[i + 2] as number) * (r === r ? r : 0);
    to[i + 3] = (a[i + 3] as number) * (s === s ? s : 0);
  }
};

/** Two or three operations in one, each rounded as it would be alone: (a b) c, a + b c, (a b)², a + (b c)², a × (b or 0). */
export const fusedKernels = { mulMul, addProduct, squareOfProduct, addSquareOfProduct, mulOrZero } as const;

/** Copies `n` numbers of a column, from `start`, into a register. */
export function loadChunk(to: Float64Array, column: Column, start: number, n: number): void {
  if (column instanceof Float64Array) to.set(column.subarray(start, start + n));
  else if (column instanceof Uint8Array) loadBytes(to, column, start, n);
  else loadShorts(to, column, start, n);
}

function loadBytes(to: Float64Array, column: Uint8Array, start: number, n: number): void {
  for (let i = 0; i < n; i++) to[i] = column[start + i] as number;
}

function loadShorts(to: Float64Array, column: Uint16Array, start: number, n: number): void {
  for (let i = 0; i < n; i++) to[i] = column[start + i] as number;
}
