import { State } from "../../quantity/state";
import type { Column } from "../graph";
import type { Instruction, Program } from "../program";
import { both, F64, FUNCTION, header, I32, list, section, signed, simd, text, unsigned, V, V128 } from "./encode";
import { LOG_LOCALS, logarithmCode } from "./logarithm";

/** Rows handled by one call of the generated function; even, since two are handled at once. */
export const ROWS = 2048;
/** Where the fixed numbers stand in memory, and where the first column does. Every column has room for `ROWS` doubles. */
export const FIXED_AT = 0;
export const COLUMNS_AT = 65_536;
/** Columns start five cache lines apart from a power of two, or the same row of all of them would compete for one set of the cache. */
export const COLUMN_BYTES = ROWS * 8 + 320;

export type Width = 1 | 2 | 8;

export function widthOf(column: Column): Width {
  return column instanceof Float64Array ? 8 : column instanceof Uint8Array ? 1 : 2;
}

/** What the generated code depends on: all but the fixed numbers and the columns themselves. */
export function shapeOf(program: Program, columns: readonly Column[], widths: readonly Width[]): string {
  const place = new Map(columns.map((column, i) => [column, i]));
  const steps = program.instructions.map(
    ({ op, target, a, b, c, column }) => `${op} ${target} ${a} ${b} ${c} ${column === undefined ? "" : `${place.get(column) ?? ""}:${widthOf(column)}`}`,
  );
  return `${steps.join(";")}|${program.fixed.map((f) => f.register).join()}|${program.results.join()}|${widths.join()}`;
}

/**
 * Machine code for a program: a function `r(bytes)` that runs over the columns in memory two rows at a time, operation by
 * operation as the interpreter does, without fused operations. Exponentials and powers are called row by row.
 *
 * @param columns distinct columns that are loaded, in the order of their places in memory; results stand after them
 * @param widths bytes of each result's entries
 */
export function generate(program: Program, columns: readonly Column[], widths: readonly Width[]): Uint8Array<ArrayBuffer> {
  // Locals: the byte count, the offset of the row in a column of doubles, then one vector for each register.
  const offset = 1;
  const local = (register: number): number[] => unsigned(register + 2);
  const get = (register: number): number[] => [0x20, ...local(register)];
  const set = (register: number): number[] => [0x21, ...local(register)];
  const memory = (place: number): number => COLUMNS_AT + place * COLUMN_BYTES;
  const placeOf = new Map(columns.map((column, i) => [column, i]));

  const before = program.fixed.flatMap(({ register }, i) => [0x41, 0x00, ...simd(V.load64Splat, 3, ...unsigned(FIXED_AT + i * 8)), ...set(register)]);
  const body = program.instructions.flatMap((step) => {
    const code =
      step.op === "load"
        ? loadCode(step.column, memory(placeOf.get(step.column ?? new Uint8Array(0)) ?? 0), offset)
        : operationCode(step, get, (i) => local(program.registers + i));
    return [...code, ...set(step.target)];
  });
  const stores = program.results.flatMap((register, k) => storeCode(get(register), memory(columns.length + k), widths[k] ?? 8, offset));
  const loop = [0x03, 0x40, ...body, ...stores, 0x20, offset, 0x41, 16, 0x6a, 0x22, offset, 0x20, 0, 0x49, 0x0d, 0, 0x0b];
  const locals = list([
    [...unsigned(1), I32],
    [...unsigned(program.registers + LOG_LOCALS), V128],
  ]);
  const code = [...locals, ...before, ...loop, 0x0b];
  return new Uint8Array([
    ...header,
    ...section(
      1,
      list([
        [FUNCTION, 1, I32, 0],
        [FUNCTION, 1, F64, 1, F64],
        [FUNCTION, 2, F64, F64, 1, F64],
      ]),
    ),
    ...section(2, list([...called.map((name) => [...text("n"), ...text(name), 0, name === "pow" ? 2 : 1]), [...text("n"), ...text("memory"), 2, 0, 1]])),
    ...section(3, list([[0]])),
    ...section(7, list([[...text("r"), 0, called.length]])),
    ...section(10, list([[...unsigned(code.length), ...code]])),
  ]);
}

/** Functions that are called for each row, in the order of their imports. */
export const called = ["log", "log10", "exp", "pow"] as const;

function loadCode(column: Column | undefined, at: number, offset: number): number[] {
  const width = column === undefined ? 8 : widthOf(column);
  if (width === 8) return [0x20, offset, ...simd(V.load, 3, ...unsigned(at))];
  // Two bytes, or two shorts, widened to two doubles.
  const start = [0x20, offset, 0x41, ...signed(width === 1 ? 3 : 2), 0x76];
  const load = width === 1 ? [0x2f, 0, ...unsigned(at), ...simd(V.i32Splat), ...simd(V.i16ExtendLowU8)] : [0x28, 1, ...unsigned(at), ...simd(V.i32Splat)];
  return [...start, ...load, ...simd(V.i32ExtendLowU16), ...simd(V.f64ConvertU32)];
}

function storeCode(value: readonly number[], at: number, width: Width, offset: number): number[] {
  if (width === 8) return [0x20, offset, ...value, ...simd(V.store, 3, ...unsigned(at))];
  const lane = (i: number): number[] => [
    0x20,
    offset,
    0x41,
    3,
    0x76,
    ...value,
    ...simd(V.i32TruncateU),
    ...simd(V.i32Extract, i),
    0x3a,
    0,
    ...unsigned(at + i),
  ];
  return [...lane(0), ...lane(1)];
}

const plain: Partial<Record<Instruction["op"], number>> = { add: V.add, sub: V.sub, mul: V.mul, div: V.div, sqrt: V.sqrt, abs: V.abs };
const comparisons: Partial<Record<Instruction["op"], number>> = { eq: V.eq, ne: V.ne, lt: V.lt, le: V.le };

/** Code that leaves the operation's result on the stack; each case mirrors the interpreter's kernel of the name. */
function operationCode({ op, a, b, c }: Instruction, get: (register: number) => number[], spare: (i: number) => number[]): number[] {
  const binary = plain[op];
  if (binary !== undefined) return [...get(a), ...(b < 0 ? [] : get(b)), ...simd(binary)];
  const comparison = comparisons[op];
  if (comparison !== undefined) return [...get(a), ...get(b), ...simd(comparison), ...both(1), ...simd(V.and)];
  switch (op) {
    case "max":
      return [...get(a), ...get(b), ...get(a), ...get(b), ...simd(V.gt), ...simd(V.bitselect)];
    case "select":
      return [...get(b), ...get(c), ...get(a), ...both(0), ...simd(V.ne), ...simd(V.bitselect)];
    case "guard": {
      const finite = [...get(b), ...get(b), ...simd(V.sub), ...both(0), ...simd(V.eq)];
      const ifPresent = [...both(State.present), ...both(State.outOfDomain), ...finite, ...simd(V.bitselect)];
      return [...get(a), ...ifPresent, ...get(a), ...both(0), ...simd(V.ne), ...simd(V.bitselect)];
    }
    case "known":
      return [...get(a), ...get(a), ...simd(V.eq), ...both(1), ...simd(V.and)];
    case "orZero":
      return [...get(a), ...get(a), ...get(a), ...simd(V.eq), ...simd(V.and)];
    case "sign": {
      const above = [...get(a), ...both(0), ...simd(V.gt), ...both(1), ...simd(V.and)];
      const below = [...get(a), ...both(0), ...simd(V.lt), ...both(1), ...simd(V.and)];
      return [...above, ...below, ...simd(V.sub)];
    }
    case "log":
    case "log10":
      return logarithmCode(op, get(a), callCode(op, [get(a)]), spare);
    case "exp":
      return callCode(op, [get(a)]);
    case "pow":
      return callCode(op, [get(a), get(b)]);
    default:
      throw new RangeError(`expected an operation with machine code, got ${op}`);
  }
}

/** Calls a function of cells/numeric for each of the two rows. */
function callCode(name: (typeof called)[number], operands: readonly (readonly number[])[]): number[] {
  const lane = (i: number): number[] => [...operands.flatMap((operand) => [...operand, ...simd(V.f64Extract, i)]), 0x10, called.indexOf(name)];
  return [...lane(0), ...simd(V.f64Splat), ...lane(1), ...simd(V.f64Replace, 1)];
}
