import { CellError } from "../errors";

/** In order of preference where two fit equally well: a comma is also a decimal sign. */
const delimiters = ["\t", ";", "|", ","] as const;

/**
 * The sign that parts the cells of a text, by its first lines: the one that the lines have most, and equally often.
 *
 * @returns "," where the text has none of them (a single column)
 */
export function guessDelimiter(text: string): string {
  const lines = firstLines(text, 60);
  let best = ",";
  let bestScore = 0;
  for (const delimiter of delimiters) {
    const counts = lines.map((line) => countOutsideQuotes(line, delimiter)).filter((_, i) => (lines[i] ?? "").trim() !== "");
    const most = mode(counts.filter((count) => count > 0));
    if (most === 0) continue;
    const agreeing = counts.filter((count) => count === most).length / counts.length;
    const having = counts.filter((count) => count > 0).length / counts.length;
    // A table's lines agree; a stray sign in a few cells does not.
    const score = having < 0.5 ? 0 : (agreeing + having) * (1 + Math.min(most, 20) / 20);
    if (score > bestScore + 1e-9) [best, bestScore] = [delimiter, score];
  }
  return best;
}

/** The first lines, a quoted line break not ending one. */
function firstLines(text: string, limit: number): readonly string[] {
  const lines: string[] = [];
  let start = 0;
  let quoted = false;
  for (let i = 0; i <= text.length && lines.length < limit; i++) {
    const char = text[i];
    if (char === '"') quoted = !quoted;
    if (i === text.length || (!quoted && (char === "\n" || char === "\r"))) {
      lines.push(text.slice(start, i));
      if (char === "\r" && text[i + 1] === "\n") i++;
      start = i + 1;
    }
    // A quote never closed would swallow the file.
    if (quoted && i - start > 20_000) quoted = false;
  }
  return lines;
}

function countOutsideQuotes(line: string, delimiter: string): number {
  let count = 0;
  let quoted = false;
  for (const char of line) {
    if (char === '"') quoted = !quoted;
    else if (char === delimiter && !quoted) count++;
  }
  return count;
}

function mode(counts: readonly number[]): number {
  const times = new Map<number, number>();
  let best = 0;
  for (const count of counts) {
    const n = (times.get(count) ?? 0) + 1;
    times.set(count, n);
    if (best === 0 || n > (times.get(best) ?? 0)) best = count;
  }
  return best;
}

/**
 * Cells of a delimited text (RFC 4180, line ends of any kind): quotes around a cell are taken off, doubled quotes inside it
 * halved; a quote inside an unquoted cell stands for itself. Cells are otherwise exactly as they stand.
 *
 * @throws CellError `table-quote` where a quote is never closed
 */
export function splitDelimited(text: string, delimiter: string): string[][] {
  const rows: string[][] = [];
  const separator = delimiter.charCodeAt(0);
  const length = text.length;
  let row: string[] = [];
  let at = 0;
  while (at < length) {
    let cell: string;
    if (text.charCodeAt(at) === 34) {
      const [value, end] = quotedCell(text, at, separator, rows.length + 1);
      cell = value;
      at = end;
    } else {
      const start = at;
      let code = text.charCodeAt(at);
      while (at < length && code !== separator && code !== 10 && code !== 13) code = text.charCodeAt(++at);
      cell = text.slice(start, at);
    }
    row.push(cell);
    const code = text.charCodeAt(at);
    if (at < length && code === separator) {
      at++;
      if (at === length) row.push("");
      continue;
    }
    if (code === 13 && text.charCodeAt(at + 1) === 10) at++;
    at++;
    rows.push(row);
    row = [];
  }
  if (row.length > 0) rows.push(row);
  return rows;
}

/** A cell that begins with a quote, and where it ends; text after the closing quote belongs to it as it stands. */
function quotedCell(text: string, open: number, separator: number, line: number): readonly [value: string, end: number] {
  let value = "";
  let start = open + 1;
  for (;;) {
    const close = text.indexOf('"', start);
    if (close < 0)
      throw new CellError(
        "table-quote",
        `A quotation mark opens a cell in line ${line} and is never closed, so everything after it would be one cell. Close it, or double it where the mark itself is meant.`,
        { row: line },
      );
    value += text.slice(start, close);
    if (text.charCodeAt(close + 1) === 34) {
      value += '"';
      start = close + 2;
      continue;
    }
    let end = close + 1;
    while (end < text.length && text.charCodeAt(end) !== separator && text.charCodeAt(end) !== 10 && text.charCodeAt(end) !== 13) end++;
    return [value + text.slice(close + 1, end), end];
  }
}

/** A table written as delimited text: cells that hold the delimiter, a quote, a line break or outer spaces are quoted. */
export function writeDelimited(headers: readonly string[], rows: readonly (readonly string[])[], delimiter = ","): string {
  const write = (cell: string): string => (/["\r\n]|^\s|\s$/u.test(cell) || cell.includes(delimiter) ? `"${cell.replaceAll('"', '""')}"` : cell);
  return [headers, ...rows].map((row) => row.map(write).join(delimiter)).join("\r\n") + "\r\n";
}
