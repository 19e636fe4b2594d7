import { fusedKernels, kernels, type Kernel } from "./kernels";
import type { Column } from "./graph";
import type { Instruction, Program } from "./program";

/** One step of the interpreter: a load of a column, or a kernel over registers. */
export interface Step {
  readonly kernel: Kernel | undefined;
  readonly column: Column | undefined;
  readonly target: number;
  /** Registers read; −1 for none. */
  readonly a: number;
  readonly b: number;
  readonly c: number;
}

/** A register as an operand, with the instruction that wrote it; −1 for a fixed number. */
interface Operand {
  readonly register: number;
  readonly from: number;
}

/** A program's instructions one by one, for few rows. */
export function stepsOf({ instructions }: Program): readonly Step[] {
  return instructions.map(({ op, column, target, a, b, c }) => ({ kernel: op === "load" ? undefined : kernels[op], column, target, a, b, c }));
}

/**
 * A program's instructions, some of them two or three in one step where what lies between is needed nowhere else: a step's way
 * through memory costs more than its arithmetic. The operations and their order are the same, and so are the bits.
 */
export function fusedSteps(program: Program): readonly Step[] {
  const { instructions, results } = program;
  const uses = usesOf(instructions);
  const steps: (Step | undefined)[] = [...stepsOf(program)];
  const operands: (readonly Operand[])[] = [];
  /** Who has written each register so far. */
  const writer = new Map<number, number>();
  const last = new Map(instructions.map(({ target }, i) => [target, i]));
  const asked = new Set(results.map((register) => last.get(register)));

  /** What a step of this kernel reads, where its result is wanted `times` here and nowhere else, and it can still be done now. */
  const inner = ({ from }: Operand, kernel: Kernel, times = 1): readonly [Operand, Operand] | undefined => {
    if (steps[from]?.kernel !== kernel || uses[from] !== times || asked.has(from)) return undefined;
    const [a, b] = operands[from] ?? [];
    const intact = (each: Operand): boolean => (writer.get(each.register) ?? -1) === each.from;
    if (a === undefined || !intact(a)) return undefined;
    const other = b ?? a;
    return intact(other) ? [a, other] : undefined;
  };

  for (const [i, { op, target, a, b, c }] of instructions.entries()) {
    const [x, y, z] = [a, b, c].map((register): Operand => ({ register, from: writer.get(register) ?? -1 })) as [Operand, Operand, Operand];
    operands[i] = [x, y, z].filter(({ register }) => register >= 0);
    const fuse = (kernel: Kernel, read: readonly Operand[], done: number): true => {
      const [p, q, r] = read.map(({ register }) => register);
      steps[done] = undefined;
      steps[i] = { kernel, column: undefined, target, a: p ?? -1, b: q ?? -1, c: r ?? -1 };
      operands[i] = read;
      return true;
    };
    /** The same with one operand looked into, then the other. */
    const either = (of: Kernel, into: (other: Operand, found: readonly [Operand, Operand], done: number) => true): boolean => {
      for (const [one, other] of [
        [y, x],
        [x, y],
      ] as const) {
        const found = inner(one, of);
        if (found !== undefined) return into(other, found, one.from);
      }
      return false;
    };
    if (op === "mul" && a === b) {
      const found = inner(x, kernels.mul, 2);
      if (found !== undefined) fuse(fusedKernels.squareOfProduct, found, x.from);
    } else if (op === "mul") {
      if (!either(kernels.orZero, (other, [p], done) => fuse(fusedKernels.mulOrZero, [other, p], done)))
        either(kernels.mul, (other, found, done) => fuse(fusedKernels.mulMul, [...found, other], done));
    } else if (op === "add" && a !== b) {
      if (!either(fusedKernels.squareOfProduct, (other, found, done) => fuse(fusedKernels.addSquareOfProduct, [other, ...found], done)))
        either(kernels.mul, (other, found, done) => fuse(fusedKernels.addProduct, [other, ...found], done));
    }
    writer.set(target, i);
  }
  return steps.filter((step) => step !== undefined);
}

/** How often each instruction's result is read. */
function usesOf(instructions: readonly Instruction[]): Int32Array {
  const uses = new Int32Array(instructions.length);
  const writer = new Map<number, number>();
  instructions.forEach(({ a, b, c, target }, i) => {
    for (const register of [a, b, c]) {
      const from = writer.get(register);
      if (from !== undefined) uses[from] = (uses[from] as number) + 1;
    }
    writer.set(target, i);
  });
  return uses;
}
