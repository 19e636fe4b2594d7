/** Tables on the clipboard, as spreadsheets put them there: tabs between cells, lines between rows, quotes where a cell has either. */

/** Cells of a pasted table. */
export function clipboardCells(text: string): string[][] {
  const rows: string[][] = [];
  let row: string[] = [];
  let cell = "";
  let quoted = false;
  const plain = text.replace(/\r\n?/g, "\n");
  for (let i = 0; i < plain.length; i++) {
    const c = plain[i] ?? "";
    if (quoted) {
      if (c === '"' && plain[i + 1] === '"') {
        cell += '"';
        i++;
      } else if (c === '"') quoted = false;
      else cell += c;
    } else if (c === '"' && cell === "") quoted = true;
    else if (c === "\t") {
      row.push(cell);
      cell = "";
    } else if (c === "\n") {
      rows.push([...row, cell]);
      row = [];
      cell = "";
    } else cell += c;
  }
  if (cell !== "" || row.length > 0) rows.push([...row, cell]);
  return rows;
}

/** True where a text looks like several cells rather than one. */
export function isTable(text: string): boolean {
  return /[\t\n]/.test(text.trim());
}

/** Name under which a pasted table is kept as a source. */
export function pastedName(now: Date): string {
  const two = (n: number): string => String(n).padStart(2, "0");
  return `pasted-${now.getUTCFullYear()}${two(now.getUTCMonth() + 1)}${two(now.getUTCDate())}-${two(now.getUTCHours())}${two(now.getUTCMinutes())}${two(now.getUTCSeconds())}.tsv`;
}
