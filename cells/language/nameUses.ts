import { CellError, type Span } from "../errors";
import { lex } from "./lexer";
import { writeName, type Token } from "./tokens";

/** A name that an expression uses. Names of functions that are called are not among them. */
export interface NameUse {
  readonly name: string;
  /** What stands after the point of `block.name`. */
  readonly member?: string;
  readonly span: Span;
}

/**
 * Every name in an expression, or in the whole text of a formula block, in order; names that lines are given are left out.
 * Faulty text does not throw: the names around the fault are found.
 */
export function namesUsed(text: string): NameUse[] {
  const found: NameUse[] = [];
  let start = 0;
  for (const line of text.split("\n")) {
    const begin = line.length - withoutDefinition(line).length;
    for (const use of namesOfLine(line.slice(begin))) found.push({ ...use, span: [use.span[0] + start + begin, use.span[1] + start + begin] });
    start += line.length + 1;
  }
  return found;
}

function withoutDefinition(line: string): string {
  const definition = /^\s*(?:[\p{L}_][\p{L}\p{M}\p{N}_]*|`[^`]*`)\s*=(?!=)/u.exec(line)?.[0];
  return definition === undefined ? line : line.slice(definition.length);
}

function namesOfLine(line: string): NameUse[] {
  const tokens = tolerantTokens(line);
  return tokens.flatMap((token, i): NameUse[] => {
    if (token.kind !== "name") return [];
    const next = tokens[i + 1];
    if (next?.kind === "symbol" && next.symbol === "(" && token.member === undefined) return [];
    return [{ name: token.name, ...(token.member === undefined ? {} : { member: token.member }), span: [token.start, token.end] }];
  });
}

/** Tokens of a text that may be faulty: at a fault one character is skipped. */
function tolerantTokens(text: string): Token[] {
  const tokens: Token[] = [];
  let start = 0;
  while (start < text.length) {
    try {
      return [...tokens, ...shifted(lex(text.slice(start, start + 4000)), start)];
    } catch (error) {
      if (!(error instanceof CellError)) throw error;
      const fault = start + (error.place.span?.[0] ?? 0);
      // Cut off at the fault, what stands before it may be faulty too: `d.` without the name that was in unclosed backticks.
      tokens.push(...shifted(tolerantTokens(text.slice(start, fault)), start));
      start = Math.max(fault + 1, start + 1);
    }
  }
  return tokens;
}

function shifted(tokens: readonly Token[], by: number): Token[] {
  return tokens.map((token) => ({ ...token, start: token.start + by, end: token.end + by }));
}

/** A name as it is to be after a renaming; `member` is what stands after the point. */
export interface Renamed {
  readonly name: string;
  readonly member?: string;
}

/**
 * Rewrites the names an expression uses.
 *
 * @param rename what a name becomes, its member too, or undefined to leave it; names with other characters than letters,
 *   digits and `_` are put in backticks
 */
export function renameInText(text: string, rename: (name: string, member?: string) => Renamed | undefined): string {
  let renamed = "";
  let from = 0;
  for (const use of namesUsed(text)) {
    const by = rename(use.name, use.member);
    if (by === undefined) continue;
    renamed += text.slice(from, use.span[0]) + writeName(by.name) + (by.member === undefined ? "" : `.${writeName(by.member)}`);
    from = use.span[1];
  }
  return renamed + text.slice(from);
}
