import { Parser } from "expr-eval";

/**
 * The seam to the parser package. Only the instructions that `Parser.parse` returns are used: nothing of the package ever
 * calculates anything here. Its look-up tables are replaced by ones without a prototype that hold the operators of our
 * language alone, and it sees no names and no numbers of the user, only placeholders (see parse.ts).
 */
export type Instruction =
  | { readonly type: "IVAR" | "IOP1" | "IOP2" | "IOP3"; readonly value: string }
  | { readonly type: "IFUNCALL"; readonly value: number }
  | { readonly type: "IEXPR"; readonly value: readonly Instruction[] }
  | { readonly type: "other" };

interface ParserTables {
  unaryOps: object;
  binaryOps: object;
  ternaryOps: object;
  functions: object;
  consts: object;
}

function table(names: readonly string[], value: unknown): object {
  const made = Object.create(null) as Record<string, unknown>;
  for (const name of names) made[name] = value;
  return made;
}

/** Stands where the package keeps its own arithmetic; nothing may ever call it. */
function never(): never {
  throw new Error("the parser package was asked to calculate");
}

function makeParser(): Parser {
  const on = table(["add", "subtract", "multiply", "divide", "power", "comparison", "logical", "conditional"], true);
  const off = table(["concatenate", "factorial", "remainder", "assignment", "array", "fndef", "in", "."], false);
  const parser = new Parser({ allowMemberAccess: false, operators: Object.assign(Object.create(null), on, off) as object });
  const tables = parser as unknown as ParserTables;
  tables.unaryOps = table(["-", "+", "not"], never);
  tables.binaryOps = table(["+", "-", "*", "/", "^", "==", "!=", "<", "<=", ">", ">=", "and", "or"], never);
  tables.ternaryOps = table(["?"], never);
  tables.functions = table([], never);
  tables.consts = table([], never);
  return parser;
}

const parser = makeParser();

/**
 * The instructions of a text made of placeholders, in postfix order, or undefined where the parser refuses it.
 */
export function parseInstructions(text: string): readonly Instruction[] | undefined {
  try {
    const { tokens } = parser.parse(text) as unknown as { tokens: readonly unknown[] };
    return tokens.map(readInstruction);
  } catch {
    return undefined;
  }
}

/** Takes over only what has the expected shape; everything else becomes `other`, which the tree builder refuses. */
function readInstruction(given: unknown): Instruction {
  if (typeof given !== "object" || given === null || !("type" in given) || !("value" in given)) return { type: "other" };
  const { type, value } = given;
  if ((type === "IVAR" || type === "IOP1" || type === "IOP2" || type === "IOP3") && typeof value === "string") return { type, value };
  if (type === "IFUNCALL" && typeof value === "number") return { type, value };
  if (type === "IEXPR" && Array.isArray(value)) return { type, value: value.map(readInstruction) };
  return { type: "other" };
}
