import { CellError, type Span } from "../errors";
import { checkOrder } from "./grammar";
import { lex } from "./lexer";
import { MAX_DEPTH, MAX_NODES } from "./limits";
import { parseInstructions, type Instruction } from "./syntax";
import type { Token } from "./tokens";
import { isComparison, type BinaryOperator, type Tree } from "./tree";

/**
 * Reads one expression.
 *
 * Tokens are ours; the parser package gets them with every number, name and text replaced by the placeholder `v` and the
 * token's index, so each operand that comes back names the token it is, and an operator's place is the gap between its
 * operands.
 *
 * @throws CellError with a place in `text` and a sentence that says what to do
 */
export function parse(text: string): Tree {
  const tokens = lex(text);
  checkOrder(tokens, text.length);
  const instructions = parseInstructions(tokens.map((token, i) => (token.kind === "symbol" ? token.symbol : `v${i}`)).join(" "));
  const tree = instructions === undefined ? undefined : new Builder(tokens).build(instructions);
  if (tree === undefined)
    throw new CellError("unreadable", "This expression cannot be read. Put brackets around its parts to find the one that is wrong.", {
      span: [0, text.length],
    });
  return tree;
}

/** A part of the tree with the tokens it spans, brackets around it not counted, and how deep it goes. */
interface Part {
  readonly tree: Tree;
  readonly first: number;
  readonly last: number;
  readonly depth: number;
}

class Builder {
  readonly #tokens: readonly Token[];
  readonly #closing = new Map<number, number>();
  #nodes = 0;

  constructor(tokens: readonly Token[]) {
    this.#tokens = tokens;
    const open: number[] = [];
    tokens.forEach((token, i) => {
      if (token.kind !== "symbol") return;
      if (token.symbol === "(") open.push(i);
      const opened = token.symbol === ")" ? open.pop() : undefined;
      if (opened !== undefined) this.#closing.set(opened, i);
    });
  }

  build(instructions: readonly Instruction[]): Tree | undefined {
    return this.#run(instructions)?.tree;
  }

  /** The stack machine over postfix instructions; undefined where they are not what the language allows. */
  #run(instructions: readonly Instruction[]): Part | undefined {
    const stack: (Part | readonly Instruction[])[] = [];
    const pop = (): Part | undefined => {
      const top = stack.pop();
      return top === undefined ? undefined : "tree" in top ? top : this.#run(top);
    };
    for (const instruction of instructions) {
      let made: Part | undefined;
      switch (instruction.type) {
        case "IEXPR":
          stack.push(instruction.value);
          continue;
        case "IVAR":
          made = this.#operand(instruction.value);
          break;
        case "IOP1":
          made = this.#unary(instruction.value, pop());
          break;
        case "IOP2": {
          const right = pop();
          made = this.#binary(instruction.value, pop(), right);
          break;
        }
        case "IOP3": {
          const no = pop();
          const yes = pop();
          made = this.#choice(pop(), yes, no);
          break;
        }
        case "IFUNCALL": {
          const args: (Part | undefined)[] = [];
          for (let i = 0; i < instruction.value; i++) args.unshift(pop());
          made = this.#call(pop(), args);
          break;
        }
        case "other":
          return undefined;
      }
      if (made === undefined) return undefined;
      if (made.depth > MAX_DEPTH || ++this.#nodes > MAX_NODES) {
        throw new CellError("too-deep", `More than ${MAX_DEPTH} levels inside one another are not read. Give a part of this a line and a name of its own.`, {
          span: made.tree.at,
        });
      }
      stack.push(made);
    }
    const result = pop();
    return stack.length === 0 ? result : undefined;
  }

  #operand(placeholder: string): Part | undefined {
    const index = /^v(\d{1,4})$/.exec(placeholder)?.[1];
    const place = Number(index ?? -1);
    const token = this.#tokens[place];
    if (token === undefined || token.kind === "symbol") return undefined;
    const span: Span = [token.start, token.end];
    const leaf = (tree: Tree): Part => ({ tree, first: place, last: place, depth: 0 });
    if (token.kind === "number") return leaf({ kind: "number", value: token.value, span, at: span });
    if (token.kind === "text") return leaf({ kind: "text", text: token.text, span, at: span });
    return leaf({ kind: "name", name: token.name, ...(token.member === undefined ? {} : { member: token.member }), span, at: span });
  }

  #unary(operator: string, of: Part | undefined): Part | undefined {
    if (of === undefined || (operator !== "-" && operator !== "+" && operator !== "not")) return undefined;
    let first = of.first - 1;
    while (first > 0 && this.#symbol(first) === "(") first--;
    const at = this.#span(first, first);
    return { tree: { kind: "unary", operator, of: of.tree, span: this.#span(first, of.last), at }, first, last: of.last, depth: of.depth + 1 };
  }

  #binary(operator: string, left: Part | undefined, right: Part | undefined): Part | undefined {
    if (left === undefined || right === undefined || !isBinary(operator)) return undefined;
    const place = this.#operatorAfter(left);
    const at = this.#span(place, place);
    if (isComparison(operator) && left.tree.kind === "binary" && isComparison(left.tree.operator) && left.last === place - 1) {
      throw new CellError("chained-comparison", "Comparisons do not chain. Write both and join them: a < b and b < c.", { span: at });
    }
    // A long sum is a long chain to the left, not a deep one.
    const depth = Math.max(operator === "^" ? left.depth + 1 : left.depth, right.depth + 1);
    return {
      tree: { kind: "binary", operator, left: left.tree, right: right.tree, span: this.#span(left.first, right.last), at },
      first: left.first,
      last: right.last,
      depth,
    };
  }

  #choice(condition: Part | undefined, yes: Part | undefined, no: Part | undefined): Part | undefined {
    if (condition === undefined || yes === undefined || no === undefined) return undefined;
    const place = this.#operatorAfter(condition);
    const depth = Math.max(condition.depth, yes.depth, no.depth) + 1;
    const tree: Tree = {
      kind: "choice",
      condition: condition.tree,
      yes: yes.tree,
      no: no.tree,
      span: this.#span(condition.first, no.last),
      at: this.#span(place, place),
    };
    return { tree, first: condition.first, last: no.last, depth };
  }

  #call(callee: Part | undefined, args: readonly (Part | undefined)[]): Part | undefined {
    if (callee === undefined || callee.tree.kind !== "name") return undefined;
    const last = this.#closing.get(callee.last + 1);
    if (last === undefined) return undefined;
    const { name, member, span } = callee.tree;
    if (member !== undefined) throw new CellError("unknown-function", `${name}.${member} is no function. Functions have no point in their names.`, { span });
    const trees: Tree[] = [];
    let depth = 0;
    for (const arg of args) {
      if (arg === undefined) return undefined;
      trees.push(arg.tree);
      depth = Math.max(depth, arg.depth);
    }
    return { tree: { kind: "call", name, args: trees, span: this.#span(callee.first, last), at: span }, first: callee.first, last, depth: depth + 1 };
  }

  /** Index of the operator that follows a part: the first token after it that is no closing bracket. */
  #operatorAfter(part: Part): number {
    let place = part.last + 1;
    while (this.#symbol(place) === ")") place++;
    return place;
  }

  #symbol(index: number): string | undefined {
    const token = this.#tokens[index];
    return token?.kind === "symbol" ? token.symbol : undefined;
  }

  #span(first: number, last: number): Span {
    return [this.#tokens[first]?.start ?? 0, this.#tokens[last]?.end ?? 0];
  }
}

function isBinary(operator: string): operator is BinaryOperator {
  return isComparison(operator) || ["+", "-", "*", "/", "^", "and", "or"].includes(operator);
}
