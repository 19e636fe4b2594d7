import { CellError, createEngine } from "@/cells";
import type { ReadAnswer } from "./tasks";

export const MOST_ROWS = 200_000;
export const MOST_COLUMNS = 300;

/**
 * Reads an uploaded file as a table, to see that it is one before it is kept.
 *
 * @throws CellError with a sentence: no table, empty, headers without rows, too many rows or columns
 */
export function readSource(fileName: string, bytes: Uint8Array): ReadAnswer {
  const { headers, rows } = createEngine().propose(bytes, fileName);
  if (headers.length === 0) throw new CellError("no-table", `${fileName} holds no table: it has no line of headers. The first line must name the columns.`);
  if (rows.length === 0) throw new CellError("no-rows", `${fileName} has headers and no rows under them. Add the samples and upload it again.`);
  if (rows.length > MOST_ROWS)
    throw new CellError("too-many-rows", `${fileName} has ${rows.length} rows; a table may have ${MOST_ROWS}. Part it into several files and stack them.`);
  if (headers.length > MOST_COLUMNS)
    throw new CellError("too-many-columns", `${fileName} has ${headers.length} columns; a table may have ${MOST_COLUMNS}. Leave out the ones you do not use.`);
  return { rows: rows.length, columns: headers.length };
}
