/** The few parts of WebAssembly's binary format that are needed (WebAssembly Core Specification 2.0, 5). */

/** Unsigned number, LEB128. */
export function unsigned(value: number): number[] {
  const bytes: number[] = [];
  let rest = value;
  do {
    const low = rest & 0x7f;
    rest >>>= 7;
    bytes.push(rest === 0 ? low : low | 0x80);
  } while (rest !== 0);
  return bytes;
}

/** Signed 32-bit number, LEB128. */
export function signed(value: number): number[] {
  const bytes: number[] = [];
  let rest = value | 0;
  for (;;) {
    const low = rest & 0x7f;
    rest >>= 7;
    const done = (rest === 0 && (low & 0x40) === 0) || (rest === -1 && (low & 0x40) !== 0);
    bytes.push(done ? low : low | 0x80);
    if (done) return bytes;
  }
}

const scratch = new DataView(new ArrayBuffer(8));

/** The eight bytes of a double, least significant first. */
export function double(value: number): number[] {
  scratch.setFloat64(0, value, true);
  return Array.from({ length: 8 }, (_, i) => scratch.getUint8(i));
}

export function text(value: string): number[] {
  return [...unsigned(value.length), ...Array.from(value, (character) => character.charCodeAt(0))];
}

export function section(id: number, content: readonly number[]): number[] {
  return [id, ...unsigned(content.length), ...content];
}

export function list(items: readonly (readonly number[])[]): number[] {
  return [...unsigned(items.length), ...items.flat()];
}

export const I32 = 0x7f;
export const F64 = 0x7c;
export const V128 = 0x7b;
export const FUNCTION = 0x60;

export const header: readonly number[] = [0x00, 0x61, 0x73, 0x6d, 0x01, 0x00, 0x00, 0x00];

/** A vector instruction. */
export function simd(code: number, ...immediates: number[]): number[] {
  return [0xfd, ...unsigned(code), ...immediates];
}

/** A vector of two doubles of one value. */
export function both(value: number): number[] {
  return simd(0x0c, ...double(value), ...double(value));
}

/** A vector of two 64-bit words of one value, given as its upper and lower halves. */
export function bothWords(high: number, low: number): number[] {
  scratch.setInt32(0, low, true);
  scratch.setInt32(4, high, true);
  const bytes = Array.from({ length: 8 }, (_, i) => scratch.getUint8(i));
  return simd(0x0c, ...bytes, ...bytes);
}

/** Codes of the vector instructions in use. */
export const V = {
  load: 0x00,
  load64Splat: 0x0a,
  store: 0x0b,
  i32Splat: 0x11,
  f64Splat: 0x14,
  i32Extract: 0x1b,
  f64Extract: 0x21,
  f64Replace: 0x22,
  eq: 0x47,
  ne: 0x48,
  lt: 0x49,
  gt: 0x4a,
  le: 0x4b,
  ge: 0x4c,
  and: 0x4e,
  bitselect: 0x52,
  i16ExtendLowU8: 0x89,
  i32ExtendLowU16: 0xa9,
  abs: 0xec,
  sqrt: 0xef,
  add: 0xf0,
  sub: 0xf1,
  mul: 0xf2,
  div: 0xf3,
  i32TruncateU: 0xfd,
  f64ConvertU32: 0xff,
  i64AllTrue: 0xc3,
  i64Shl: 0xcb,
  i64ShrS: 0xcc,
  i64Add: 0xce,
  i64Sub: 0xd1,
} as const;
