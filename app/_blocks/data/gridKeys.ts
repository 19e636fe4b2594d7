/** A cell of a grid, by place. */
export interface CellPlace {
  readonly row: number;
  readonly column: number;
}

/** So many rows a page key moves. */
export const PAGE_ROWS = 16;

/**
 * Where a key moves the active cell, as in any table: arrows, Home and End in the row, with Ctrl in the table, Page up and down.
 *
 * @returns undefined for keys that do not move
 */
export function movedBy(
  event: { readonly key: string; readonly ctrlKey: boolean; readonly metaKey: boolean },
  at: CellPlace,
  rows: number,
  columns: number,
): CellPlace | undefined {
  const all = event.ctrlKey || event.metaKey;
  const row = (r: number) => Math.max(0, Math.min(rows - 1, r));
  const column = (c: number) => Math.max(0, Math.min(columns - 1, c));
  switch (event.key) {
    case "ArrowUp":
      return { row: all ? 0 : row(at.row - 1), column: at.column };
    case "ArrowDown":
      return { row: all ? row(rows - 1) : row(at.row + 1), column: at.column };
    case "ArrowLeft":
      return { row: at.row, column: all ? 0 : column(at.column - 1) };
    case "ArrowRight":
      return { row: at.row, column: all ? column(columns - 1) : column(at.column + 1) };
    case "Home":
      return { row: all ? 0 : at.row, column: 0 };
    case "End":
      return { row: all ? row(rows - 1) : at.row, column: column(columns - 1) };
    case "PageUp":
      return { row: row(at.row - PAGE_ROWS), column: at.column };
    case "PageDown":
      return { row: row(at.row + PAGE_ROWS), column: at.column };
    default:
      return undefined;
  }
}

/** All places from one to another, whichever is first. */
export function between(a: number, b: number): number[] {
  const from = Math.min(a, b);
  return Array.from({ length: Math.abs(a - b) + 1 }, (_, i) => from + i);
}
