import { logConstants } from "../../numeric";
import { both, bothWords, simd, V } from "./encode";

/** Vectors the code needs for its intermediate values. */
export const LOG_LOCALS = 7;

/** 1.5 · 2⁵²: an integer added to its bits appears in the low bits of a double, exactly. */
const MAGIC = 6755399441055744;
const MAGIC_WORD = 0x43380000;

type Code = readonly number[];

function add(a: Code, b: Code): number[] {
  return [...a, ...b, ...simd(V.add)];
}
function sub(a: Code, b: Code): number[] {
  return [...a, ...b, ...simd(V.sub)];
}
function mul(a: Code, b: Code): number[] {
  return [...a, ...b, ...simd(V.mul)];
}
function polynomial(w: Code, [c0, c1, c2, c3]: readonly [number, number, number, number]): number[] {
  return add(both(c0), mul(w, add(both(c1), mul(w, add(both(c2), mul(w, both(c3)))))));
}

/**
 * Logarithms of two rows at once, by the operations of `log` and `log10` of cells/numeric in their order. Rows that are not
 * positive, normal and finite, and their neighbours, are left to those functions themselves.
 *
 * @param x code that puts the two numbers on the stack
 * @param perRow code that puts the two logarithms on the stack by calls
 * @param local index of the first of {@link LOG_LOCALS} vector locals that are free
 */
export function logarithmCode(kind: "log" | "log10", x: Code, perRow: Code, local: (i: number) => Code): number[] {
  const get = (i: number): number[] => [0x20, ...local(i)];
  const set = (i: number): number[] => [0x21, ...local(i)];
  const [k, f, s, h, t, head, result] = [0, 1, 2, 3, 4, 5, 6] as const;
  const { odd, even, ln2, log10of2, inverseLn10, leastNormal, sqrtHalfWord } = logConstants;
  // The exponent that leaves a significand in [√½, √2), and that significand.
  const exponent = [...x, ...bothWords(sqrtHalfWord, 0), ...simd(V.i64Sub), 0x41, 52, ...simd(V.i64ShrS), ...set(k)];
  const significand = [...x, ...get(k), 0x41, 52, ...simd(V.i64Shl), ...simd(V.i64Sub)];
  const reduced = [
    ...exponent,
    ...sub(significand, both(1)),
    ...set(f),
    ...get(k),
    ...bothWords(MAGIC_WORD, 0),
    ...simd(V.i64Add),
    ...both(MAGIC),
    ...simd(V.sub),
    ...set(k),
  ];
  const ratio = [...get(f), ...add(both(2), get(f)), ...simd(V.div), ...set(s)];
  const halfSquare = [...mul(mul(both(0.5), get(f)), get(f)), ...set(h)];
  // z in t, then w = z² in head, then the tail of the series in t.
  const tail = [
    ...mul(get(s), get(s)),
    ...set(t),
    ...mul(get(t), get(t)),
    ...set(head),
    ...add(mul(get(head), polynomial(get(head), odd)), mul(get(t), polynomial(get(head), even))),
    ...set(t),
  ];
  const series = mul(get(s), add(get(h), get(t)));
  const natural = add(add(sub(add(series, mul(get(k), both(ln2[1]))), get(h)), get(f)), mul(get(k), both(ln2[0])));
  const decadic = ((): number[] => {
    const clear = [...sub(get(f), get(h)), ...bothWords(-1, 0), ...simd(V.and), ...set(head)];
    const rest = [...add(sub(sub(get(f), get(head)), get(h)), series), ...set(t)];
    const product = [...mul(get(head), both(inverseLn10[0])), ...set(s)];
    const power = [...mul(get(k), both(log10of2[0])), ...set(h)];
    const sum = [...add(get(h), get(s)), ...set(f)];
    const low = add(mul(get(k), both(log10of2[1])), mul(add(get(t), get(head)), both(inverseLn10[1])));
    const lost = add(sub(get(h), get(f)), get(s));
    return [...clear, ...rest, ...product, ...power, ...sum, ...add(add(add(low, mul(get(t), both(inverseLn10[0]))), lost), get(f))];
  })();
  const usual = [...x, ...both(leastNormal), ...simd(V.ge), ...x, ...both(Infinity), ...simd(V.lt), ...simd(V.and), ...simd(V.i64AllTrue)];
  const quick = [...reduced, ...ratio, ...halfSquare, ...tail, ...(kind === "log" ? natural : decadic), ...set(result)];
  return [...usual, 0x04, 0x40, ...quick, 0x05, ...perRow, ...set(result), 0x0b, ...get(result)];
}
