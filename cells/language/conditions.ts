import { CellError } from "../errors";
import type { Compiler } from "./compiler";
import { sourceOf, type Frame } from "./frame";
import type { Compiled, CompiledCondition, CompiledLabels } from "./compiled";
import type { Graph } from "./graph";
import { requireAlike } from "./meaning";
import { joinOver, type Over } from "./split";
import type { BinaryTree, Comparison } from "./tree";

/** Comparison of two values of one kind, or of text for being the same. The result has no σ. */
export function compare(compiler: Compiler, tree: BinaryTree, operator: Comparison, left: Compiled, right: Compiled, frame: Frame): CompiledCondition {
  if (left.kind === "value" && right.kind === "value") {
    const { graph } = compiler;
    requireAlike(left.meaning, right.meaning, () => compiler.sides(operator, tree.at, tree.left, tree.right, frame));
    const state = graph.max(graph.guard(left.state, left.node), graph.guard(right.state, right.node));
    return { kind: "condition", node: compareNodes(graph, operator, left.node, right.node), state, over: joinOver(left.over, right.over, tree.at) };
  }
  if (left.kind === "condition" || right.kind === "condition")
    throw new CellError("not-a-number", "Conditions are joined with and, or, not; they are not compared.", { span: tree.at });
  return compareText(compiler, tree, operator, left, right, frame);
}

function compareNodes(graph: Graph, operator: Comparison, a: number, b: number): number {
  switch (operator) {
    case "==":
      return graph.compare("eq", a, b);
    case "!=":
      return graph.compare("ne", a, b);
    case "<":
      return graph.compare("lt", a, b);
    case "<=":
      return graph.compare("le", a, b);
    case ">":
      return graph.compare("lt", b, a);
    case ">=":
      return graph.compare("le", b, a);
  }
}

function compareText(compiler: Compiler, tree: BinaryTree, operator: Comparison, left: Compiled, right: Compiled, frame: Frame): CompiledCondition {
  const labels = left.kind === "labels" ? left : right.kind === "labels" ? right : undefined;
  const other = labels === left ? right : left;
  if (labels === undefined || (other.kind !== "text" && other.kind !== "labels")) {
    const number = left.kind === "value" ? tree.left : tree.right;
    const text =
      labels === undefined
        ? 'A text is compared with a column of text, as in Group == "CI".'
        : `${labels.name} is a column of text; what it is compared with stands in quotation marks: "${sourceOf(number, frame)}".`;
    throw new CellError("text-mismatch", text, { span: tree.at });
  }
  if (operator !== "==" && operator !== "!=") throw new CellError("text-mismatch", "Texts have no order: compare them with == or != alone.", { span: tree.at });
  const over = other.kind === "labels" ? joinOver(labels.over, other.over, tree.at) : labels.over;
  const same = sameText(labels, other.text);
  const node = compiler.graph.load(same, `${labels.over.table.handle}.${labels.name} is ${other.kind === "labels" ? other.name : `"${other.text}"`}`);
  return { kind: "condition", node: operator === "==" ? node : compiler.graph.not(node), state: compiler.graph.constant(0), over };
}

function sameText(labels: CompiledLabels, other: string | readonly string[]): Uint8Array {
  const same = new Uint8Array(labels.text.length);
  for (let row = 0; row < same.length; row++) same[row] = labels.text[row] === (typeof other === "string" ? other : other[row]) ? 1 : 0;
  return same;
}

/**
 * `and`, `or` with values that may be missing: what is decided by one side alone is decided, whatever the other is, so that
 * `is_missing(x) or x > 3` holds where x is missing.
 */
export function conjunction(graph: Graph, operator: "and" | "or", a: CompiledCondition, b: CompiledCondition, over: Over | null): CompiledCondition {
  const certain = (c: CompiledCondition): { yes: number; no: number } => {
    const sure = graph.not(c.state);
    return { yes: graph.mul(sure, c.node), no: graph.mul(sure, graph.not(c.node)) };
  };
  const left = certain(a);
  const right = certain(b);
  const yes = operator === "and" ? graph.mul(left.yes, right.yes) : graph.max(left.yes, right.yes);
  const no = operator === "and" ? graph.max(left.no, right.no) : graph.mul(left.no, right.no);
  return { kind: "condition", node: yes, state: graph.select(graph.max(yes, no), graph.constant(0), graph.max(a.state, b.state)), over };
}

export function negation(graph: Graph, of: CompiledCondition): CompiledCondition {
  return { ...of, node: graph.not(of.node) };
}
