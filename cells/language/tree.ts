import type { Span } from "../errors";

export type BinaryOperator = "+" | "-" | "*" | "/" | "^" | Comparison | "and" | "or";
export type Comparison = "==" | "!=" | "<" | "<=" | ">" | ">=";

/** An expression, read but not yet understood. `span` covers the whole of it, `at` the operator or name an error points at. */
export type Tree = NumberTree | NameTree | TextTree | UnaryTree | BinaryTree | ChoiceTree | CallTree;

interface AnyTree {
  readonly span: Span;
  readonly at: Span;
}

export interface NumberTree extends AnyTree {
  readonly kind: "number";
  readonly value: number;
}

export interface NameTree extends AnyTree {
  readonly kind: "name";
  readonly name: string;
  readonly member?: string;
}

export interface TextTree extends AnyTree {
  readonly kind: "text";
  readonly text: string;
}

export interface UnaryTree extends AnyTree {
  readonly kind: "unary";
  readonly operator: "-" | "+" | "not";
  readonly of: Tree;
}

export interface BinaryTree extends AnyTree {
  readonly kind: "binary";
  readonly operator: BinaryOperator;
  readonly left: Tree;
  readonly right: Tree;
}

export interface ChoiceTree extends AnyTree {
  readonly kind: "choice";
  readonly condition: Tree;
  readonly yes: Tree;
  readonly no: Tree;
}

export interface CallTree extends AnyTree {
  readonly kind: "call";
  readonly name: string;
  readonly args: readonly Tree[];
}

const comparisons: ReadonlySet<string> = new Set(["==", "!=", "<", "<=", ">", ">="]);

export function isComparison(operator: string): operator is Comparison {
  return comparisons.has(operator);
}
