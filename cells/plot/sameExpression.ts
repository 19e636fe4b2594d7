import { CellError } from "../errors";
import { parse, type Tree } from "../language";
import type { BlockContext } from "../page/context";

/** An expression and the data block its names stand over. */
export interface Standing {
  readonly text: string;
  readonly data: string | undefined;
}

/**
 * Whether two expressions are one and the same when the names of lines are written out, brackets and blanks apart: `mg_si` is
 * `Mg / Si`, and `norm(Mg, CI)` is `norm(Mg, CI_PLJ14)` where CI means that. Expressions that only come to the same number
 * are not found.
 */
export function sameExpression(context: BlockContext, a: Standing, b: Standing): boolean {
  if (a.text.trim() === b.text.trim() && a.data === b.data) return true;
  try {
    return shape(context, a) === shape(context, b);
  } catch (error) {
    if (error instanceof CellError) return false;
    throw error;
  }
}

function shape(context: BlockContext, { text, data }: Standing): string {
  return written(parse(context.expand(text, data)), context);
}

function written(tree: Tree, context: BlockContext): string {
  switch (tree.kind) {
    case "number":
      return String(tree.value);
    case "text":
      return JSON.stringify(tree.text);
    case "name":
      return tree.member === undefined ? `\`${context.bodies(tree.name)?.id ?? tree.name}\`` : `\`${tree.name}\`.\`${tree.member}\``;
    case "unary":
      return `(${tree.operator} ${written(tree.of, context)})`;
    case "binary":
      return `(${written(tree.left, context)} ${tree.operator} ${written(tree.right, context)})`;
    case "choice":
      return `(${written(tree.condition, context)} ? ${written(tree.yes, context)} : ${written(tree.no, context)})`;
    case "call":
      return `${tree.name}(${tree.args.map((arg) => written(arg, context)).join(", ")})`;
  }
}
