import { CellError } from "../errors";
import { exp, log, log10 } from "../numeric";
import type { Split } from "./split";

/**
 * The calculation of one expression as a graph of operations. Structurally identical parts are one node. A node's operands
 * always have smaller numbers than itself, so the order of numbers is an order of calculation.
 */
export type Op =
  | "const"
  /** A column of numbers or bytes, over rows or classes. `value` is its place among the loads. */
  | "load"
  /** A number that is the same for all rows but not part of the formula. `value` is its place among the parameters. */
  | "param"
  | "add"
  | "sub"
  | "mul"
  | "div"
  | "log"
  | "log10"
  | "exp"
  | "sqrt"
  | "abs"
  | "sign"
  | "pow"
  | "eq"
  | "ne"
  | "lt"
  | "le"
  /** Greater of two numbers, for states and flags. */
  | "max"
  /** a is not 0 ? b : c, without touching what is not chosen. */
  | "select"
  /** State of a result: `a` where it is not present; else out of domain where b is not finite. */
  | "guard"
  /** 1 where a is a number, 0 where it is not known (NaN). */
  | "known"
  /** a, or 0 where it is not known. */
  | "orZero";

export interface Node {
  readonly op: Op;
  readonly a: number;
  readonly b: number;
  readonly c: number;
  readonly value: number;
}

export type Column = Float64Array | Uint8Array | Uint16Array;

export interface Load {
  readonly column: Column;
  /** Where the column has one entry a class; null where it has one a row. */
  readonly split: Split | null;
  /** Names it for good: `ch.MgO`, `ch.Mg:choice`. */
  readonly label: string;
}

export class Graph {
  readonly nodes: Node[] = [];
  readonly loads: Load[] = [];
  readonly params: number[] = [];
  readonly #numbers = new Map<string, number>();
  readonly #loadOf = new Map<Column, number>();
  readonly #paramOf = new Map<string, number>();
  #limit: number;

  constructor(limit: number) {
    this.#limit = limit;
  }

  /** Lets the graph grow further, for derivatives. */
  raiseLimit(limit: number): void {
    this.#limit = limit;
  }

  at(index: number): Node {
    const node = this.nodes[index];
    if (node === undefined) throw new RangeError(`expected a node from 0 to ${this.nodes.length - 1}, got ${index}`);
    return node;
  }

  constant(value: number): number {
    return this.#make("const", -1, -1, -1, value);
  }

  load(column: Column, label: string, split: Split | null = null): number {
    let place = this.#loadOf.get(column);
    if (place === undefined) {
      place = this.loads.push({ column, split, label }) - 1;
      this.#loadOf.set(column, place);
    }
    return this.#make("load", -1, -1, -1, place);
  }

  param(key: string, value: number): number {
    let place = this.#paramOf.get(key);
    if (place === undefined) {
      place = this.params.push(value) - 1;
      this.#paramOf.set(key, place);
    }
    return this.#make("param", -1, -1, -1, place);
  }

  paramKey(place: number): string {
    return [...this.#paramOf.keys()][place] ?? "";
  }

  /** The value of a constant node; undefined for any other. */
  constantOf(index: number): number | undefined {
    const node = this.at(index);
    return node.op === "const" ? node.value : undefined;
  }

  add(a: number, b: number): number {
    const x = this.constantOf(a);
    const y = this.constantOf(b);
    if (x !== undefined && y !== undefined) return this.constant(x + y);
    if (x === 0) return b;
    if (y === 0) return a;
    return this.#make("add", Math.min(a, b), Math.max(a, b));
  }

  sub(a: number, b: number): number {
    const x = this.constantOf(a);
    const y = this.constantOf(b);
    if (x !== undefined && y !== undefined) return this.constant(x - y);
    return y === 0 ? a : this.#make("sub", a, b);
  }

  mul(a: number, b: number): number {
    const x = this.constantOf(a);
    const y = this.constantOf(b);
    if (x !== undefined && y !== undefined) return this.constant(x * y);
    if (x === 1) return b;
    if (y === 1) return a;
    if (x === 0 || y === 0) return this.constant(0);
    return this.#make("mul", Math.min(a, b), Math.max(a, b));
  }

  negate(a: number): number {
    return this.mul(this.constant(-1), a);
  }

  div(a: number, b: number): number {
    const x = this.constantOf(a);
    const y = this.constantOf(b);
    if (x !== undefined && y !== undefined && y !== 0) return this.constant(x / y);
    return y === 1 ? a : this.#make("div", a, b);
  }

  /** Constants are folded with the very functions that columns go through. */
  apply(op: "log" | "log10" | "exp" | "sqrt" | "abs" | "sign" | "known" | "orZero", a: number): number {
    const x = this.constantOf(a);
    if (x === undefined) return this.#make(op, a);
    if (op === "log") return this.constant(log(x));
    if (op === "log10") return this.constant(log10(x));
    if (op === "exp") return this.constant(exp(x));
    if (op === "sqrt") return this.constant(Math.sqrt(x));
    if (op === "abs") return this.constant(Math.abs(x));
    return op === "known" ? this.constant(x === x ? 1 : 0) : op === "orZero" ? this.constant(x === x ? x : 0) : this.#make(op, a);
  }

  pow(a: number, b: number): number {
    return this.#make("pow", a, b);
  }

  compare(op: "eq" | "ne" | "lt" | "le", a: number, b: number): number {
    const x = this.constantOf(a);
    const y = this.constantOf(b);
    if (x !== undefined && y !== undefined) return this.constant((op === "eq" ? x === y : op === "ne" ? x !== y : op === "lt" ? x < y : x <= y) ? 1 : 0);
    return this.#make(op, a, b);
  }

  max(a: number, b: number): number {
    const x = this.constantOf(a);
    const y = this.constantOf(b);
    if (x !== undefined && y !== undefined) return this.constant(Math.max(x, y));
    // States and flags are never below 0.
    if (a === b || x === 0) return b;
    if (y === 0) return a;
    return this.#make("max", Math.min(a, b), Math.max(a, b));
  }

  /** 1 where a flag is 0, else 0. */
  not(a: number): number {
    return this.compare("eq", a, this.constant(0));
  }

  select(condition: number, yes: number, no: number): number {
    const known = this.constantOf(condition);
    if (known !== undefined) return known === 0 ? no : yes;
    return yes === no ? yes : this.#make("select", condition, yes, no);
  }

  guard(state: number, value: number): number {
    const known = this.constantOf(value);
    if (known !== undefined && Number.isFinite(known)) return state;
    return this.#make("guard", state, value);
  }

  /**
   * Takes over a node of another graph, with all it stands on.
   *
   * @param columnOf the column that a load's place in the other graph stands for
   * @param mark set before the keys of parameters, so that two graphs' parameters are never taken for one
   * @param columnOfParam the column that takes a parameter's place, for parameters that are to vary; the parameter's own place is asked
   */
  adopt(from: Graph, root: number, columnOf: (place: number) => Column, mark: string, columnOfParam?: (place: number) => Column | undefined): number {
    const own = new Map<number, number>();
    const place = (index: number): number => (index < 0 ? -1 : (own.get(index) ?? -1));
    for (const index of nodesUnder(from, [root])) {
      const { op, a, b, c, value } = from.at(index);
      if (op === "load") own.set(index, this.load(columnOf(value), from.loads[value]?.label ?? ""));
      else if (op === "param") {
        const varying = columnOfParam?.(value);
        const key = `${mark}${from.paramKey(value)}`;
        own.set(index, varying === undefined ? this.param(key, from.params[value] ?? Number.NaN) : this.load(varying, key));
      } else own.set(index, this.#make(op, place(a), place(b), place(c), value));
    }
    return place(root);
  }

  #make(op: Op, a: number, b = -1, c = -1, value = 0): number {
    const key = `${op}|${a}|${b}|${c}|${Object.is(value, -0) ? "-0" : value}`;
    const known = this.#numbers.get(key);
    if (known !== undefined) return known;
    const index = this.nodes.length;
    if (index >= this.#limit)
      throw new CellError("too-large", "This expression comes to more operations than are calculated at once. Split it into several lines.");
    this.nodes.push({ op, a, b, c, value });
    this.#numbers.set(key, index);
    return index;
  }
}

/** The operands of a node. */
export function operandsOf({ a, b, c }: Node): number[] {
  return [a, b, c].filter((operand) => operand >= 0);
}

/** Every node that some nodes stand on, themselves included, in the order of calculation. */
export function nodesUnder(graph: Graph, roots: readonly number[]): number[] {
  const wanted = new Uint8Array(graph.nodes.length);
  for (const root of roots) wanted[root] = 1;
  const found: number[] = [];
  for (let i = wanted.length - 1; i >= 0; i--) {
    if (wanted[i] === 0) continue;
    found.push(i);
    for (const operand of operandsOf(graph.at(i))) wanted[operand] = 1;
  }
  return found.reverse();
}

/**
 * A text that two nodes have in common exactly when they calculate the same from the same columns, whatever graph they are in.
 * Written as a list of operations, so that shared parts are written once.
 */
export function structureOf(graph: Graph, of: number): string {
  const order = new Map<number, number>();
  const parts: string[] = [];
  for (const index of nodesUnder(graph, [of])) {
    const { op, a, b, c, value } = graph.at(index);
    order.set(index, order.size);
    const leaf = op === "load" ? graph.loads[value]?.label : op === "param" ? graph.paramKey(value) : op === "const" ? String(value) : "";
    parts.push(`${op} ${[a, b, c].map((operand) => (operand < 0 ? "" : String(order.get(operand)))).join(",")}${leaf ?? ""}`);
  }
  return parts.join(";");
}
