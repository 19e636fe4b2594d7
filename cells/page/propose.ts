import { proposeMapping, readTable } from "../table";
import type { ImportProposal } from "./engine";

/**
 * Reads a file and proposes what each of its columns is, before anything is saved.
 *
 * @throws CellError where it is no table: what it is, and what to give instead
 */
export function proposeImport(bytes: Uint8Array, fileName: string): ImportProposal {
  const raw = readTable(bytes);
  const { columns, reasons, problems } = proposeMapping(raw);
  return {
    fileName,
    headers: raw.headers,
    rows: raw.rows,
    columns: columns.map((column, index) => ({ column, reason: reasons[index] ?? "" })),
    problems: [...raw.problems, ...problems],
  };
}
