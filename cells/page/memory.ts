import type { BlockResult } from "./results";

/**
 * What the last evaluation calculated, and from what. A result is taken again only when every one of its inputs is the same:
 * texts equal, result objects and bytes identical. The digits of a result depend on its inputs alone, so an editing history
 * cannot show in them.
 */
export class Memory {
  private before = new Map<string, { inputs: readonly unknown[]; result: BlockResult }>();
  private now = new Map<string, { inputs: readonly unknown[]; result: BlockResult }>();

  /** Call once before a page is evaluated; what the evaluation does not ask for again is forgotten after it. */
  begin(): void {
    this.now = new Map();
  }

  /** The remembered result for these inputs, or a fresh one. */
  recall(key: string, inputs: readonly unknown[], calculate: () => BlockResult): BlockResult {
    const known = this.before.get(key);
    const result = known !== undefined && same(known.inputs, inputs) ? known.result : calculate();
    this.now.set(key, { inputs, result });
    return result;
  }

  end(): void {
    this.before = this.now;
  }
}

function same(a: readonly unknown[], b: readonly unknown[]): boolean {
  return a.length === b.length && a.every((value, index) => Object.is(value, b[index]));
}
