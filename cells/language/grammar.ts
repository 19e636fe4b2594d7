import { CellError, type Span } from "../errors";
import { MAX_DEPTH } from "./limits";
import type { Token } from "./tokens";

/**
 * Checks the order of tokens before the parser sees them: the parser lets through missing commas, empty brackets and calls of
 * calls, and names no place in its errors.
 *
 * @throws CellError at the token that cannot stand where it does
 */
export function checkOrder(tokens: readonly Token[], length: number): void {
  const open: { token: Token; call: boolean; choices: Token[] }[] = [];
  let choices: Token[] = [];
  let before: Token | undefined;
  let signs = 0;
  let powers = 0;
  let asked = 0;
  for (const token of tokens) {
    const symbol = token.kind === "symbol" ? token.symbol : undefined;
    const wanted = wantsOperand(before);
    if (symbol === undefined) {
      if (!wanted) throw missingOperator(before, token);
      signs = 0;
    } else if (symbol === "(") {
      const call = before?.kind === "name";
      if (!wanted && !call) throw missingOperator(before, token);
      open.push({ token, call, choices });
      choices = [];
      signs = 0;
      if (open.length > MAX_DEPTH) throw tooDeep(token);
    } else if (wanted) {
      if (symbol !== "-" && symbol !== "+" && symbol !== "not") throw missingOperand(before, token);
      if (++signs > MAX_DEPTH) throw tooDeep(token);
    } else if (symbol === "not") {
      throw missingOperator(before, token);
    } else if (symbol === ")") {
      const group = open.pop();
      if (group === undefined) throw new CellError("unbalanced", "This bracket closes nothing: leave it out, or open it before.", { span: place(token) });
      refuseOpenChoice(choices);
      choices = group.choices;
    } else if (symbol === ",") {
      if (open[open.length - 1]?.call !== true) {
        throw new CellError("bad-comma", "A comma stands only between the arguments of a function. In numbers, write a decimal point.", { span: place(token) });
      }
      refuseOpenChoice(choices);
      choices = [];
    } else if (symbol === "?") {
      choices.push(token);
      if (++asked > MAX_DEPTH) throw tooDeep(token);
    } else if (symbol === ":") {
      if (choices.pop() === undefined)
        throw new CellError("bad-choice", "A colon needs a ? before it: condition ? value : other value.", { span: place(token) });
    } else if (symbol === "^" && ++powers > MAX_DEPTH) {
      throw tooDeep(token);
    }
    before = token;
  }
  const unclosed = open[open.length - 1];
  if (wantsOperand(before)) throw missingOperand(before, undefined, length);
  if (unclosed !== undefined) throw new CellError("unbalanced", "This bracket is not closed.", { span: place(unclosed.token) });
  refuseOpenChoice(choices);
}

/** True where a value, a sign or an opening bracket must come next. */
function wantsOperand(before: Token | undefined): boolean {
  return before === undefined || (before.kind === "symbol" && before.symbol !== ")");
}

function refuseOpenChoice(choices: readonly Token[]): void {
  const token = choices[0];
  if (token !== undefined) throw new CellError("bad-choice", "This ? has no colon: write condition ? value : other value.", { span: place(token) });
}

function place(token: Token): Span {
  return [token.start, token.end];
}

function tooDeep(token: Token): CellError {
  return new CellError("too-deep", `More than ${MAX_DEPTH} levels inside one another are not read. Give a part of this a line and a name of its own.`, {
    span: place(token),
  });
}

function missingOperator(before: Token | undefined, token: Token): CellError {
  const call = token.kind === "symbol" && token.symbol === "(";
  const text = call
    ? "An operator is missing before this bracket; to multiply, write *."
    : "Between this and what stands before it an operator or a comma is missing.";
  return new CellError("missing-operator", text, { span: [before === undefined || call ? token.start : before.end, token.end] });
}

function missingOperand(before: Token | undefined, token: Token | undefined, length = 0): CellError {
  const after = before?.kind === "symbol" ? ` after ${before.symbol}` : "";
  if (token !== undefined) {
    const symbol = token.kind === "symbol" ? token.symbol : "";
    if (symbol === ")" && before?.kind === "symbol" && before.symbol === "(")
      return new CellError("missing-operand", "There is nothing between these brackets.", { span: [before.start, token.end] });
    return new CellError("missing-operand", `A value is missing${after === "" ? ` before ${symbol}` : after}.`, { span: place(token) });
  }
  if (before === undefined) return new CellError("empty", "There is no expression here.", { span: [0, length] });
  return new CellError("missing-operand", `A value is missing${after}.`, { span: place(before) });
}
