import { CellError, type Span } from "../errors";
import { callFunction } from "./calls";
import type { Compiled, CompiledCondition, CompiledValue, Uses, Variable } from "./compiled";
import { compare, conjunction, negation } from "./conditions";
import { notANumber, placeKey, sourceOf, type Frame } from "./frame";
import { DENOMINATOR, type Edge } from "./edges";
import { Graph } from "./graph";
import { MAX_DEPTH, MAX_NODES } from "./limits";
import { plainNumber, powerMeaning, productMeaning, requireAlike, sumMeaning, type Sides } from "./meaning";
import { resolveName } from "./names";
import { parse } from "./parse";
import type { NamedLine } from "./scope";
import { byAtoms } from "./suggest";
import { isDimensionless } from "./dimension";
import { joinOver } from "./split";
import { isComparison, type BinaryTree, type ChoiceTree, type Tree, type UnaryTree } from "./tree";

/**
 * Turns trees into nodes of one graph, checking units and bases on the way. One compiler serves one formula and is then
 * thrown away: nothing that was calculated before can reach the digits of what is calculated now.
 */
export class Compiler {
  readonly graph = new Graph(MAX_NODES);
  readonly variables = new Map<number, Variable>();
  readonly links = new Map<number, { to: number; partial: number }[]>();
  readonly uses: Uses = { lines: new Map(), bodies: new Map(), conversions: new Map(), warnings: new Map() };
  /** Values near whose zero the result turns sharply: denominators, arguments of logarithms and roots. */
  readonly edges = new Map<number, Edge>();
  readonly #lines = new Map<string, Compiled>();
  readonly #active = new Set<string>();

  compile(tree: Tree, frame: Frame): Compiled {
    switch (tree.kind) {
      case "number":
        return { kind: "value", node: this.graph.constant(tree.value), state: this.graph.constant(0), meaning: plainNumber, over: null };
      case "text":
        return { kind: "text", text: tree.text };
      case "name":
        return resolveName(this, tree, frame);
      case "call":
        return callFunction(this, tree, frame);
      case "unary":
        return this.#unary(tree, frame);
      case "binary":
        return this.#chain(tree, frame);
      case "choice":
        return this.#choice(tree, frame);
    }
  }

  /** A tree that must come to a number. */
  value(tree: Tree, frame: Frame): CompiledValue {
    const made = this.compile(tree, frame);
    if (made.kind === "value") return made;
    throw new CellError("not-a-number", notANumber(made, sourceOf(tree, frame)), { span: tree.span });
  }

  /** A tree that must come to true or false. */
  condition(tree: Tree, frame: Frame, needs: string): CompiledCondition {
    const made = this.compile(tree, frame);
    if (made.kind === "condition") return made;
    throw new CellError("not-a-condition", `${needs} needs a condition such as Mg > wtpct(20), and ${sourceOf(tree, frame)} is none.`, { span: tree.span });
  }

  /** A line of a formula block, as the expression it is. Compiled once, however often it is used. */
  line(line: NamedLine, frame: Frame, at: Span): Compiled {
    const place = `${line.block}.${line.name}`;
    const key = `${place}|${placeKey(frame)}`;
    const known = this.#lines.get(key);
    if (known !== undefined) return known;
    if (this.#active.has(place))
      throw new CellError("cycle", `${line.name} is calculated from itself, by way of ${[...this.#active].join(", ")}. Break the circle.`, { span: at });
    if (this.#active.size >= MAX_DEPTH) throw new CellError("lines-too-deep", `Lines that use lines go deeper than ${MAX_DEPTH} here.`, { span: at });
    this.#active.add(place);
    try {
      const made = this.compile(parse(line.text), { scope: line.scope, text: line.text, on: frame.on });
      this.#lines.set(key, made);
      this.uses.lines.set(place, { block: line.block, name: line.name });
      return made;
    } catch (error) {
      if (!(error instanceof CellError)) throw error;
      if (error.code === "cycle" || error.code === "bad-line" || error.code === "lines-too-deep" || error.code === "too-large")
        throw new CellError(error.code, error.message, { span: at });
      throw new CellError("bad-line", `${line.name} (block ${line.block}) cannot be calculated: ${error.message}`, { span: at });
    } finally {
      this.#active.delete(place);
    }
  }

  /** Text of both sides of an operator, for its errors. */
  sides(operator: string, at: Span, left: Tree, right: Tree, frame: Frame): Sides {
    return { operator, at, left: sourceOf(left, frame), right: sourceOf(right, frame), byAtoms: [byAtoms(left, frame), byAtoms(right, frame)] };
  }

  #unary(tree: UnaryTree, frame: Frame): Compiled {
    if (tree.operator === "not") {
      const made = this.compile(tree.of, frame);
      if (made.kind === "condition") return negation(this.graph, made);
      throw new CellError("not-a-condition", `not needs a condition: put brackets around the whole comparison, as in not (Mg > wtpct(20)).`, { span: tree.at });
    }
    const of = this.value(tree.of, frame);
    if (tree.operator === "+") return of;
    return { ...of, node: this.graph.negate(of.node), meaning: { ...of.meaning, onScale: false } };
  }

  /** A chain of operators to the left is walked, not descended: a sum of a thousand terms is no deeper than one of two. */
  #chain(tree: BinaryTree, frame: Frame): Compiled {
    const chain: BinaryTree[] = [];
    let first: Tree = tree;
    while (first.kind === "binary") {
      chain.push(first);
      first = first.left;
    }
    let made = this.compile(first, frame);
    for (let step = chain.pop(); step !== undefined; step = chain.pop()) made = this.#binary(step, made, frame);
    return made;
  }

  #binary(tree: BinaryTree, left: Compiled, frame: Frame): Compiled {
    const { operator } = tree;
    if (operator === "and" || operator === "or") {
      if (left.kind !== "condition")
        throw new CellError("not-a-condition", `${operator} joins conditions, and ${sourceOf(tree.left, frame)} is none.`, { span: tree.at });
      const right = this.condition(tree.right, frame, operator);
      return conjunction(this.graph, operator, left, right, joinOver(left.over, right.over, tree.at));
    }
    const right = this.compile(tree.right, frame);
    if (isComparison(operator)) return compare(this, tree, operator, left, right, frame);
    if (left.kind !== "value") throw new CellError("not-a-number", notANumber(left, sourceOf(tree.left, frame)), { span: tree.left.span });
    if (right.kind !== "value") throw new CellError("not-a-number", notANumber(right, sourceOf(tree.right, frame)), { span: tree.right.span });
    return this.#arithmetic(tree, operator, left, right, frame);
  }

  #arithmetic(tree: BinaryTree, operator: "+" | "-" | "*" | "/" | "^", left: CompiledValue, right: CompiledValue, frame: Frame): CompiledValue {
    const { graph } = this;
    const over = joinOver(left.over, right.over, tree.at);
    const state = graph.max(left.state, right.state);
    switch (operator) {
      case "+":
      case "-":
        requireAlike(left.meaning, right.meaning, () => this.sides(operator, tree.at, tree.left, tree.right, frame));
        return {
          kind: "value",
          node: operator === "+" ? graph.add(left.node, right.node) : graph.sub(left.node, right.node),
          state,
          meaning: sumMeaning(left.meaning, right.meaning, operator),
          over,
        };
      case "*":
        return { kind: "value", node: graph.mul(left.node, right.node), state, meaning: productMeaning(left.meaning, right.meaning, 1), over };
      case "/": {
        const node = graph.div(left.node, right.node);
        this.edges.set(right.node, { source: sourceOf(tree.right, frame), tolerated: DENOMINATOR });
        return { kind: "value", node, state: graph.guard(state, node), meaning: ratioMeaning(left, right), over };
      }
      case "^": {
        const exponent = graph.constantOf(right.node);
        if (!isDimensionless(right.meaning.dimension))
          throw new CellError("unit-mismatch", `An exponent is a plain number, and ${sourceOf(tree.right, frame)} has a unit.`, { span: tree.right.span });
        if (exponent === undefined && !isDimensionless(left.meaning.dimension)) {
          throw new CellError(
            "unit-mismatch",
            `${sourceOf(tree.left, frame)} has a unit, so its exponent must be a number: otherwise the unit of the result would differ from sample to sample.`,
            { span: tree.at },
          );
        }
        const node = power(graph, left.node, right.node);
        return { kind: "value", node, state: graph.guard(state, node), meaning: powerMeaning(left.meaning, exponent ?? 1), over };
      }
    }
  }

  #choice(tree: ChoiceTree, frame: Frame): Compiled {
    const { graph } = this;
    const condition = this.condition(tree.condition, frame, "?");
    const yes = this.value(tree.yes, frame);
    const no = this.value(tree.no, frame);
    requireAlike(yes.meaning, no.meaning, () => this.sides("?", tree.at, tree.yes, tree.no, frame));
    const state = graph.select(condition.state, condition.state, graph.select(condition.node, yes.state, no.state));
    const over = joinOver(condition.over, joinOver(yes.over, no.over, tree.at), tree.at);
    const counting = yes.meaning.counting === "number" ? no.meaning : yes.meaning;
    return { kind: "value", node: graph.select(condition.node, yes.node, no.node), state, meaning: counting, over };
  }
}

function ratioMeaning(left: CompiledValue, right: CompiledValue): CompiledValue["meaning"] {
  const meaning = productMeaning(left.meaning, right.meaning, -1);
  return left.aggregate !== undefined && left.aggregate === right.aggregate
    ? { ...meaning, remark: `${left.aggregate === "mean" ? "ratio of means" : `ratio of two ${left.aggregate} values`}` }
    : meaning;
}

/** Small whole exponents are products, so that x^2 is x·x to the bit. */
function power(graph: Graph, base: number, exponent: number): number {
  const n = graph.constantOf(exponent);
  if (n === undefined || Math.abs(n) > 8 || n !== Math.floor(n)) return n === 0.5 ? graph.apply("sqrt", base) : graph.pow(base, exponent);
  if (n === 0) return graph.constant(1);
  let product = base;
  for (let i = 1; i < Math.abs(n); i++) product = graph.mul(product, base);
  return n < 0 ? graph.div(graph.constant(1), product) : product;
}
