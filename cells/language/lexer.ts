import { CellError } from "../errors";
import { reservedWords, type NameToken, type NumberToken, type TextToken, type Token } from "./tokens";
import { MAX_CHARACTERS } from "./limits";

const namePart = /[\p{L}_][\p{L}\p{M}\p{N}_]*/uy;
const numberPart = /(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?/y;
const symbolPart = /==|!=|<=|>=|[-+*/^<>?:(),]/y;
const blank = /[ \t\r\n\u00a0]/;

/**
 * Splits an expression into tokens, each with its place. Comments (`#` to the end of the line) are skipped.
 *
 * @throws CellError at the first character that is no part of the language, with a sentence that says what to write instead
 */
export function lex(text: string): Token[] {
  if (text.length > MAX_CHARACTERS) {
    throw new CellError("too-long", `This expression has ${text.length} characters; at most ${MAX_CHARACTERS} are read. Split it into several lines.`, {
      span: [MAX_CHARACTERS, text.length],
    });
  }
  const tokens: Token[] = [];
  let at = 0;
  while (at < text.length) {
    const character = text.charAt(at);
    if (blank.test(character)) {
      at++;
      continue;
    }
    if (character === "#") {
      const end = text.indexOf("\n", at);
      at = end < 0 ? text.length : end;
      continue;
    }
    const token = readToken(text, at);
    tokens.push(token);
    at = token.end;
  }
  return tokens;
}

/** The token that begins at `at`. Throws where none does. */
function readToken(text: string, at: number): Token {
  const character = text.charAt(at);
  if (character === '"' || character === "'") return readText(text, at);
  const number = match(numberPart, text, at);
  if (number !== undefined) return readNumber(text, at, number);
  if (character === "`" || match(namePart, text, at) !== undefined) return readName(text, at);
  refuseLookalikes(text, at);
  const symbol = match(symbolPart, text, at);
  if (symbol === undefined) throw unknownCharacter(text, at);
  return { kind: "symbol", symbol, start: at, end: at + symbol.length };
}

function match(pattern: RegExp, text: string, at: number): string | undefined {
  pattern.lastIndex = at;
  return pattern.exec(text)?.[0];
}

function readNumber(text: string, start: number, digits: string): NumberToken {
  const end = start + digits.length;
  const span = [start, end] as const;
  const radix = /^0[xXbBoO][0-9a-fA-F]+/.exec(text.slice(start, start + 40))?.[0];
  if (radix !== undefined) throw new CellError("bad-number", `${radix} is not read: write numbers in decimals.`, { span: [start, start + radix.length] });
  const next = text.charAt(end);
  if (next === "." || (/[\p{L}_`]/u.test(next) && next !== "")) {
    const rest = match(/[\p{L}\p{N}_.]+/uy, text, end) ?? next;
    throw new CellError(
      "bad-number",
      `${digits}${rest} is neither a number nor a name. Put an operator after ${digits}, or write a name that begins with a digit in backticks.`,
      {
        span: [start, end + rest.length],
      },
    );
  }
  const value = Number(digits);
  if (!Number.isFinite(value)) throw new CellError("bad-number", `${digits} is larger than any number that can be calculated with.`, { span });
  return { kind: "number", value, start, end };
}

function readText(text: string, start: number): TextToken {
  const quote = text.charAt(start);
  const end = text.indexOf(quote, start + 1);
  if (end < 0) throw new CellError("unfinished-text", `The text that begins here has no closing ${quote}.`, { span: [start, text.length] });
  const inside = text.slice(start + 1, end);
  const line = inside.indexOf("\n");
  if (line >= 0) throw new CellError("unfinished-text", `The text that begins here has no closing ${quote} on its line.`, { span: [start, start + 1 + line] });
  if (inside.includes("\\"))
    throw new CellError("bad-character", "A text is taken letter by letter; a backslash has no meaning in it. Leave it out.", { span: [start, end + 1] });
  return { kind: "text", text: inside.normalize("NFC"), start, end: end + 1 };
}

function readName(text: string, start: number): Token {
  const first = readNamePart(text, start);
  if (!first.quoted && reservedWords.has(first.name)) return { kind: "symbol", symbol: first.name, start, end: first.end };
  if (text.charAt(first.end) !== ".") return { kind: "name", name: first.name, start, end: first.end };
  const begin = first.end + 1;
  if (text.charAt(begin) !== "`" && match(namePart, text, begin) === undefined) {
    throw new CellError("bad-name", `After the point of ${text.slice(start, begin)} a name must follow, as in ch.mg_si.`, { span: [start, begin] });
  }
  const second = readNamePart(text, begin);
  if (text.charAt(second.end) === ".") {
    throw new CellError(
      "bad-name",
      "A name has one point at most: the block's handle before it, the name after it. Put a name that holds points in backticks.",
      { span: [start, second.end + 1] },
    );
  }
  return { kind: "name", name: first.name, member: second.name, start, end: second.end } satisfies NameToken;
}

function readNamePart(text: string, start: number): { name: string; end: number; quoted: boolean } {
  if (text.charAt(start) !== "`") {
    const name = match(namePart, text, start) ?? "";
    return { name: name.normalize("NFC"), end: start + name.length, quoted: false };
  }
  const end = text.indexOf("`", start + 1);
  const inside = end < 0 ? "" : text.slice(start + 1, end);
  if (end < 0 || inside.includes("\n"))
    throw new CellError("unfinished-name", "The name that begins here has no closing backtick.", { span: [start, Math.min(text.length, start + 1)] });
  if (inside.trim() === "") throw new CellError("bad-name", "Between these backticks there is no name.", { span: [start, end + 1] });
  return { name: inside.normalize("NFC"), end: end + 1, quoted: true };
}

/** What people write for operators of the language, and what the language writes. */
const lookalikes: readonly (readonly [written: string, instead: string])[] = [
  ["**", "^"],
  ["/*", "# for a comment"],
  ["//", "/ once, or # for a comment"],
  ["&&", "and"],
  ["||", "or"],
  ["=>", ">="],
  ["=<", "<="],
  ["<>", "!="],
  ["−", "- (the plain minus)"],
  ["–", "- (the plain minus)"],
  ["×", "*"],
  ["·", "*"],
  ["∙", "*"],
  ["•", "*"],
  ["÷", "/"],
  ["≤", "<="],
  ["≥", ">="],
  ["≠", "!="],
  ["²", "^2"],
  ["³", "^3"],
  ["√", "sqrt( )"],
  ["“", '" (the straight quotation mark)'],
  ["”", '" (the straight quotation mark)'],
  ["„", '" (the straight quotation mark)'],
];

function refuseLookalikes(text: string, at: number): void {
  for (const [written, instead] of lookalikes) {
    if (text.startsWith(written, at))
      throw new CellError("bad-character", `${written} is not part of the language; write ${instead}.`, { span: [at, at + written.length] });
  }
}

function unknownCharacter(text: string, at: number): CellError {
  const character = String.fromCodePoint(text.codePointAt(at) ?? 0);
  return new CellError(
    "bad-character",
    refusals.get(character) ?? `The character ${character} is not part of the language. Names that hold it stand in backticks.`,
    { span: [at, at + character.length] },
  );
}

const refusals: ReadonlyMap<string, string> = new Map([
  ["=", "One = gives a line its name and stands once, before the expression. To compare, write ==."],
  ["!", "! is not part of the language: write not in front of a condition, and != for “is not”."],
  [";", "; is not part of the language: write each formula on a line of its own."],
  [".", "A point stands inside a number or between a block's handle and a name, without spaces."],
  ["%", "% is not part of the language: wtpct(20) is 20 wt%, and a percentage is a number divided by 100."],
  ["[", "Square brackets are not part of the language: use round ones."],
  ["]", "Square brackets are not part of the language: use round ones."],
  ["{", "Braces are not part of the language: use round brackets."],
  ["}", "Braces are not part of the language: use round brackets."],
  ["&", "Write and between two conditions."],
  ["|", "Write or between two conditions."],
]);
