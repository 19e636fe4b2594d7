import { exp, log, log10, pow } from "../numeric";
import { State } from "../quantity/state";
import type { Column } from "./graph";
import type { Instruction } from "./program";

/** One operation over the first `n` numbers of its registers. */
export type Kernel = (to: Float64Array, a: Float64Array, b: Float64Array, c: Float64Array, n: number) => void;

// Each loop is written out, because a loop around a passed-in function is not compiled to one.
const add: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = (a[i] as number) + (b[i] as number);
};
const sub: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = (a[i] as number) - (b[i] as number);
};
const mul: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = (a[i] as number) * (b[i] as number);
};
const div: Kernel = (to, a, b, _c, n) => {
  for (let i = 0; i < n; i++) to[i] = (a[i] as number) / (b[i] as number);
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
  for (let i = 0; i < n; i++) to[i] = Math.sqrt(a[i] as number);
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
  for (let i = 0; i < n; i++) to[i] = a[i] === a[i] ? (a[i] as number) : 0;
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

/** Copies `n` numbers of a column, from `start`, into a register. */
export function loadChunk(to: Float64Array, column: Column, start: number, n: number): void {
  if (column instanceof Float64Array) loadNumbers(to, column, start, n);
  else if (column instanceof Uint8Array) loadBytes(to, column, start, n);
  else loadShorts(to, column, start, n);
}

function loadNumbers(to: Float64Array, column: Float64Array, start: number, n: number): void {
  for (let i = 0; i < n; i++) to[i] = column[start + i] as number;
}

function loadBytes(to: Float64Array, column: Uint8Array, start: number, n: number): void {
  for (let i = 0; i < n; i++) to[i] = column[start + i] as number;
}

function loadShorts(to: Float64Array, column: Uint16Array, start: number, n: number): void {
  for (let i = 0; i < n; i++) to[i] = column[start + i] as number;
}
