import { nodesUnder, operandsOf, type Column, type Graph, type Node } from "./graph";

/**
 * A graph lowered to a list of instructions over numbered registers, in a fixed order. Both ways of running it (chunked here,
 * or machine code made from the same list) do the same operations in the same order and so agree to the bit.
 */
export interface Program {
  readonly instructions: readonly Instruction[];
  /** Registers that hold one number throughout: constants and parameters. */
  readonly fixed: readonly { readonly register: number; readonly value: number }[];
  readonly registers: number;
  /** Register of each asked result, in the order asked. */
  readonly results: readonly number[];
}

export interface Instruction {
  readonly op: Exclude<Node["op"], "const" | "param">;
  readonly target: number;
  readonly a: number;
  readonly b: number;
  readonly c: number;
  /** For loads. */
  readonly column: Column | undefined;
}

/**
 * Lowers what is needed for `asked` nodes. Registers are reused once nothing needs them any more, so that a chunk of all of
 * them stays in the processor's cache.
 *
 * @param columnOf the column that a load's place stands for, over the rows that are run
 */
export function lower(graph: Graph, asked: readonly number[], columnOf: (place: number) => Column): Program {
  const live = nodesUnder(graph, asked);
  const lastUse = new Map<number, number>();
  for (const i of live) for (const operand of operandsOf(graph.at(i))) lastUse.set(operand, i);
  for (const i of asked) lastUse.set(i, Number.POSITIVE_INFINITY);

  const registerOf = new Map<number, number>();
  const free: number[] = [];
  const fixed: { register: number; value: number }[] = [];
  const instructions: Instruction[] = [];
  let registers = 0;
  const register = (i: number): number => (i < 0 ? -1 : (registerOf.get(i) ?? -1));
  for (const i of live) {
    const node = graph.at(i);
    if (node.op === "const" || node.op === "param") {
      const value = node.op === "const" ? node.value : graph.params[node.value];
      fixed.push({ register: registers, value: value ?? Number.NaN });
      registerOf.set(i, registers++);
      continue;
    }
    const target = free.pop() ?? registers++;
    registerOf.set(i, target);
    instructions.push({
      op: node.op,
      target,
      a: register(node.a),
      b: register(node.b),
      c: register(node.c),
      column: node.op === "load" ? columnOf(node.value) : undefined,
    });
    // Freed only after the target is taken: no operation writes over its own operand.
    for (const operand of new Set(operandsOf(node))) {
      const { op } = graph.at(operand);
      if (lastUse.get(operand) === i && op !== "const" && op !== "param") free.push(register(operand));
    }
  }
  return { instructions, fixed, registers, results: asked.map(register) };
}
