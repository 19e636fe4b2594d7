import { CellError, type Problem } from "../errors";
import { parseUnit } from "../quantity/unit";
import { readCell } from "./cell";
import { settleDecimal } from "./decimal";
import { decodeText } from "./decode";
import { guessDelimiter, splitDelimited } from "./delimited";
import { quotas, type RawTable } from "./raw";

/** Longest header that is kept whole. */
const HEADER_LENGTH = 200;
/** Ragged rows that get a sentence of their own; the rest are counted. */
const RAGGED_SENTENCES = 20;

/**
 * Reads a source as rows of text: encoding, delimiter, decimal sign, headers, a line of units, ragged rows. Nothing is
 * converted and no cell is changed.
 *
 * @param source bytes of a file, or text that was pasted
 * @throws CellError with a sentence where it is no table: empty, binary, headers alone, too big
 */
export function readTable(source: Uint8Array | string): RawTable {
  if (typeof source === "string" && source.length > quotas.bytes)
    throw new CellError(
      "source-too-big",
      `The text has more than ${quotas.bytes / 1048576} million characters, and a source may have ${quotas.bytes / 1048576} MiB. Split it.`,
    );
  const { text, encoding } = typeof source === "string" ? { text: source.replace(/^\ufeff/u, ""), encoding: "text" } : decodeText(source);
  if (text.trim() === "")
    throw new CellError("source-empty", "The table is empty: it holds nothing but blanks. Give it a line of headers and at least one row.");
  const delimiter = guessDelimiter(text);
  const lines = splitDelimited(text, delimiter).filter((row) => row.some((cell) => cell.trim() !== ""));
  const { preamble, headerRow, body } = takeHeader(lines);
  return shapeTable({ preamble, headerRow, body, encoding, delimiter });
}

interface Shape {
  readonly preamble: readonly string[];
  readonly headerRow: readonly string[];
  readonly body: readonly (readonly string[])[];
  readonly encoding: string;
  readonly delimiter: string;
}

/** Headers, units and rows of equal length out of lines of cells; shared by all kinds of source. */
export function shapeTable(shape: Shape): RawTable {
  const problems: Problem[] = [];
  const width = usedWidth(shape.headerRow, shape.body);
  if (width > quotas.columns)
    throw new CellError("source-too-big", `The table has ${width} columns, and a source may have ${quotas.columns}. Leave out columns that are not needed.`);
  if (shape.body.length > quotas.rows + 1)
    throw new CellError("source-too-big", `The table has ${shape.body.length} rows, and a source may have ${quotas.rows}. Split it.`);
  const headers = nameHeaders(shape.headerRow, width, problems);
  const units = unitsLine(shape.body[0], width);
  const body = units === undefined ? shape.body : shape.body.slice(1);
  if (body.length === 0)
    throw new CellError(
      "table-no-rows",
      `The table has headers (${headers.slice(0, 4).join(", ")}${headers.length > 4 ? " …" : ""}) and no rows. Add at least one row of data.`,
    );
  const rows = evenRows(body, width, shape.headerRow.length, problems);
  return {
    headers,
    ...(units === undefined ? {} : { units }),
    rows,
    preamble: shape.preamble,
    encoding: shape.encoding,
    delimiter: shape.delimiter,
    decimal: settleDecimal(rows),
    problems,
  };
}

/** The first line with more than one cell is the header, if the lines below have several; lines above it are a title. */
function takeHeader(lines: readonly string[][]): {
  readonly preamble: readonly string[];
  readonly headerRow: readonly string[];
  readonly body: readonly string[][];
} {
  const filled = lines.map((row) => row.reduce((n, cell) => (cell.trim() === "" ? n : n + 1), 0));
  const sample = filled.slice(0, 200).sort((a, b) => a - b);
  const typical = sample[Math.floor(sample.length / 2)] ?? 0;
  let at = 0;
  if (typical >= 3) while (at < lines.length - 1 && (filled[at] ?? 0) <= 1) at++;
  return { preamble: lines.slice(0, at).map((row) => row.join(" ").trim()), headerRow: lines[at] ?? [], body: lines.slice(at + 1) };
}

/** Columns up to the last that has a header or any cell. */
function usedWidth(headerRow: readonly string[], body: readonly (readonly string[])[]): number {
  let width = headerRow.length;
  while (width > 0 && (headerRow[width - 1] ?? "").trim() === "" && body.every((row) => (row[width - 1] ?? "").trim() === "")) width--;
  return width;
}

function nameHeaders(headerRow: readonly string[], width: number, problems: Problem[]): readonly string[] {
  const seen = new Map<string, number>();
  const headers = Array.from({ length: width }, (_, i) => {
    const header = (headerRow[i] ?? "").trim().replace(/\s+/gu, " ");
    if (header === "") {
      problems.push({
        code: "header-missing",
        severity: "warning",
        column: `column ${i + 1}`,
        text: `Column ${i + 1} has no header; it is called "column ${i + 1}".`,
      });
      return `column ${i + 1}`;
    }
    return header.length > HEADER_LENGTH ? header.slice(0, HEADER_LENGTH) : header;
  });
  for (const [i, header] of headers.entries()) {
    const first = seen.get(header);
    if (first !== undefined)
      problems.push({
        code: "header-twice",
        severity: "note",
        column: header,
        text: `Columns ${first + 1} and ${i + 1} have the same header "${header}"; they are told apart by their place.`,
      });
    else seen.set(header, i);
  }
  const numbers = headers.filter((header) => readCell(header, ".").kind === "value").length;
  if (numbers > headers.length / 2)
    problems.push({
      code: "header-numbers",
      severity: "warning",
      text: "The first line reads like data, not like headers. Put a line of headers above it, or the first sample is lost.",
    });
  return headers;
}

/** A line below the headers that gives units and nothing else. */
function unitsLine(row: readonly string[] | undefined, width: number): readonly string[] | undefined {
  if (row === undefined) return undefined;
  const cells = Array.from({ length: width }, (_, i) => (row[i] ?? "").trim());
  const filled = cells.filter((cell) => cell !== "" && cell !== "-");
  const unitLike = filled.filter((cell) => parseUnit(cell.replace(/^[([]|[)\]]$/gu, "")) !== undefined && !/^\d/u.test(cell));
  // A first sample may be called K, and have no values.
  const beyondFirst = width === 1 || cells.slice(1).some((cell) => unitLike.includes(cell));
  return beyondFirst && unitLike.length >= 1 && unitLike.length >= filled.length - 1 && unitLike.length > filled.length / 2
    ? cells.map((cell) => cell.replace(/^[([]|[)\]]$/gu, ""))
    : undefined;
}

function evenRows(body: readonly (readonly string[])[], width: number, headerLength: number, problems: Problem[]): readonly (readonly string[])[] {
  let ragged = 0;
  const rows = body.map((row, i) => {
    if (row.length === width) return row;
    const extra = row.slice(width).filter((cell) => cell.trim() !== "");
    const short = row.length < Math.min(width, headerLength);
    if (extra.length > 0 || short) {
      ragged++;
      if (ragged <= RAGGED_SENTENCES) problems.push(raggedProblem(i + 1, row.length, width, extra));
    }
    return row.length > width ? row.slice(0, width) : [...row, ...new Array<string>(width - row.length).fill("")];
  });
  if (ragged > RAGGED_SENTENCES)
    problems.push({ code: "row-ragged", severity: "warning", text: `${ragged - RAGGED_SENTENCES} more rows have fewer or more cells than there are headers.` });
  return rows;
}

function raggedProblem(row: number, cells: number, width: number, extra: readonly string[]): Problem {
  const text =
    extra.length > 0
      ? `Row ${row} has ${cells} cells and there are ${width} headers; what stands beyond the last header is not read (${extra.slice(0, 3).join(", ")}).`
      : `Row ${row} has ${cells} cells and there are ${width} headers; the missing ones are read as blank.`;
  return { code: "row-ragged", severity: "warning", row, text };
}
