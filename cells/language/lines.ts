import { CellError, type Span } from "../errors";
import { functionNames } from "./functions";
import { isPlainName, reservedWords } from "./tokens";

/** One `name = expression` of a formula block. Places are in the block's whole text. */
export interface FormulaLine {
  readonly name: string;
  readonly nameSpan: Span;
  /** The line without its comment and the blanks around it. */
  readonly span: Span;
  /** The expression alone. */
  readonly text: string;
  readonly expressionSpan: Span;
}

export interface FormulaLines {
  readonly lines: readonly FormulaLine[];
  /** Lines that cannot be read, and names given twice. */
  readonly errors: readonly CellError[];
}

/**
 * Splits the text of a formula block into its lines. `#` begins a comment, blank lines are skipped. A faulty line is an error
 * of its own and does not hide the others.
 */
export function parseLines(text: string): FormulaLines {
  const lines: FormulaLine[] = [];
  const errors: CellError[] = [];
  const names = new Set<string>();
  let start = 0;
  for (const raw of text.split("\n")) {
    const line = readLine(withoutComment(raw), start);
    start += raw.length + 1;
    if (line === undefined) continue;
    if (line instanceof CellError) {
      errors.push(line);
      continue;
    }
    if (names.has(line.name)) {
      errors.push(new CellError("duplicate-name", `There is a line ${line.name} above already. Give this one another name.`, { span: line.nameSpan }));
      continue;
    }
    names.add(line.name);
    lines.push(line);
  }
  return { lines, errors };
}

/** Cuts a comment off, but not a # inside a text or backticks. */
function withoutComment(line: string): string {
  let quote = "";
  for (let i = 0; i < line.length; i++) {
    const character = line.charAt(i);
    if (quote !== "") {
      if (character === quote) quote = "";
    } else if (character === "#") return line.slice(0, i);
    else if (character === '"' || character === "'" || character === "`") quote = character;
  }
  return line;
}

/** The line that begins at `start` of the block's text; undefined where it is blank. */
function readLine(line: string, start: number): FormulaLine | CellError | undefined {
  const trimmed = line.trim();
  if (trimmed === "") return undefined;
  const begin = start + line.indexOf(trimmed);
  const span: Span = [begin, begin + trimmed.length];
  const equals = /^[^"'`=<>!]*(?:`[^`]*`[^"'`=<>!]*)?=(?!=)/u.exec(trimmed)?.[0];
  if (equals === undefined) return new CellError("no-name", "A line gives a result a name: write name = expression.", { span });
  const written = equals.slice(0, -1).trim();
  const nameSpan: Span = [begin, begin + Math.max(written.length, 1)];
  const name = (/^`([^`]+)`$/u.exec(written)?.[1] ?? written).normalize("NFC");
  if (name === "") return new CellError("no-name", "Before = the name of the result is missing.", { span: nameSpan });
  if (!isPlainName(name)) {
    const why = reservedWords.has(name) ? `${name} is a word of the language` : `${written} cannot be a name`;
    return new CellError("bad-name", `${why}. A result's name has letters, digits and _, and does not begin with a digit.`, { span: nameSpan });
  }
  if (functionNames.has(name)) return new CellError("bad-name", `${name} is a function of the language. Give the result another name.`, { span: nameSpan });
  const rest = trimmed.slice(equals.length);
  const expression = rest.trim();
  if (expression === "") return new CellError("empty", `After ${name} = an expression is missing.`, { span: [begin + equals.length - 1, span[1]] });
  const expressionStart = begin + equals.length + rest.indexOf(expression);
  return { name, nameSpan, span, text: expression, expressionSpan: [expressionStart, expressionStart + expression.length] };
}
