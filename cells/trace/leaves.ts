import { parse, type Scope, type Tree } from "../language";
import { aggregateNames, unitSuffixes } from "../language/functions";
import type { Table } from "../table/table";

/** What the text of an expression names, the lines it goes through written out. */
export interface Leaves {
  /** Columns and species that have a value in each row, in order of first appearance. */
  readonly measured: { readonly table: Table; readonly name: string }[];
  readonly lines: { readonly block: string; readonly name: string; readonly text: string }[];
  /** Calls over samples, as they are written. */
  readonly aggregates: Aggregate[];
  /** Numbers written in it. */
  readonly numbers: { readonly text: string; readonly value: number }[];
}

export interface Aggregate {
  /** `mean(Mg / Si`, as labels of aggregates begin. */
  readonly name: string;
  /** Text of what is taken over samples. */
  readonly of: string;
  readonly scope: Scope;
}

/** The leaves of an expression that was calculated already, so that nothing in it can fail here. */
export function leavesOf(scope: Scope, text: string): Leaves {
  const leaves: Leaves = { measured: [], lines: [], aggregates: [], numbers: [] };
  walk(leaves, parse(text), scope, text);
  return leaves;
}

function walk(leaves: Leaves, tree: Tree, scope: Scope, text: string): void {
  const inner = (part: Tree | undefined): void => {
    if (part !== undefined) walk(leaves, part, scope, text);
  };
  switch (tree.kind) {
    case "number":
      leaves.numbers.push({ text: text.slice(tree.span[0], tree.span[1]), value: tree.value });
      return;
    case "text":
      return;
    case "name":
      return walkName(leaves, tree.name, tree.member, scope);
    case "unary":
      return inner(tree.of);
    case "binary":
      inner(tree.left);
      // An exponent is part of what is done, not of what it is done to.
      if (tree.operator !== "^") inner(tree.right);
      return;
    case "choice":
      inner(tree.condition);
      inner(tree.yes);
      return inner(tree.no);
    case "call": {
      const [first] = tree.args;
      if ((aggregateNames as readonly string[]).includes(tree.name)) {
        if (first !== undefined) leaves.aggregates.push({ name: tree.name, of: text.slice(first.span[0], first.span[1]), scope });
        return;
      }
      if (tree.name === "at") return;
      if (tree.name === "norm") return inner(first);
      if (unitSuffixes.has(tree.name) && first?.kind === "number") {
        leaves.numbers.push({ text: text.slice(tree.span[0], tree.span[1]), value: first.value });
        return;
      }
      tree.args.forEach(inner);
    }
  }
}

function walkName(leaves: Leaves, name: string, member: string | undefined, scope: Scope): void {
  const named = scope.lookup(name, member);
  if (named === "ambiguous" || named?.kind === "common") return;
  if (named?.kind === "line") {
    if (leaves.lines.some((line) => line.block === named.block && line.name === named.name)) return;
    leaves.lines.push({ block: named.block, name: named.name, text: named.text });
    walk(leaves, parse(named.text), named.scope, named.text);
    return;
  }
  const table = named?.kind === "column" ? named.table : scope.table;
  const own = named?.kind === "column" ? named.name : (member ?? name);
  if (table !== null && !leaves.measured.some((leaf) => leaf.table === table && leaf.name === own)) leaves.measured.push({ table, name: own });
}
