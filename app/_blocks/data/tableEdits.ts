import type { Uploaded } from "@/app/_page/services";
import type { Column, DataBlock, RowId, TypedRow } from "@/cells";
import type { PageEdits } from "@/realtime/document";
import type { CellTarget } from "./CellActions";
import { clipboardCells } from "./clipboardTable";
import { columnName } from "./columnWords";
import type { CellPlace } from "./gridKeys";
import type { GridModel } from "./gridModel";
import { freshRowId, typedFault, typedStored } from "./typedText";

const MOST_TYPED = 2000;

/** Name of a column as amendments and the like say it. */
const named = (target: CellTarget): string => target.column?.name ?? "";
/** A sample's name as the document repeats it, for checking; rows without one repeat nothing. */
const sampleOf = (target: CellTarget): string => (target.sample === `row ${target.row}` ? "" : target.sample);

export interface TableEdits {
  /** Runs an edit; the sentence where it is refused. */
  attempt(edit: () => void): string | null;
  setSource(uploaded: Uploaded, columns: readonly Column[]): void;
  setColumns(columns: readonly Column[]): void;
  setStack(handles: readonly string[]): void;
  renormalise(isAsked: boolean): void;
  startTyped(columns: readonly Column[]): void;
  addColumn(column: Column): void;
  removeColumn(name: string): void;
  /** Puts a text into a cell; a sentence where it is refused. `isNew` where the row is not in the table yet. */
  typeCell(row: RowId, isNew: boolean, column: string, text: string): string | null;
  clearCell(row: RowId, column: string): void;
  /** @param rowIds the rows as they stand on the screen, the free one last */
  pasteCells(at: CellPlace, rowIds: readonly RowId[], model: GridModel, text: string): void;
  deleteRow(row: RowId): void;
  amend(target: CellTarget, value: string, reason: string): void;
  setAside(target: CellTarget, whole: boolean, reason: string): void;
  assume(column: string, assumed: { readonly relative: number } | { readonly absolute: number }, reason: string): void;
  undo(list: "amendments" | "setAside" | "assumed", entry: object): void;
}

/** What people do in a table, in terms of the page's edits. */
export function tableEdits(edits: PageEdits, key: string, block: DataBlock): TableEdits {
  const columns = block.columns ?? [];
  const isQuantity = (name: string) => columns.some((c) => columnName(c) === name && (c.role === "quantity" || c.role === "uncertainty"));
  // Asked of the document itself: what is on the screen may be a moment older, and would take back what was typed since.
  const rowOf = (id: RowId | undefined): TypedRow | undefined =>
    edits.entries(key, "typed").find(({ entry }) => entry.id === id)?.entry as unknown as TypedRow | undefined;
  const withCell = (row: TypedRow, column: string, text: string): TypedRow => {
    const { [column]: _, ...others } = row.cells;
    return { id: row.id, cells: text === "" ? others : { ...others, [column]: text } };
  };
  const putRow = (row: TypedRow) => edits.putEntry(key, "typed", row);

  return {
    attempt(edit) {
      try {
        edit();
        return null;
      } catch (error) {
        return error instanceof Error ? error.message : "This could not be changed.";
      }
    },
    setSource(uploaded, mapped) {
      edits.setField(key, "source", { file: uploaded.name, sha256: uploaded.sha256 });
      edits.setField(key, "columns", mapped);
      if (block.name === undefined) edits.setField(key, "name", uploaded.name.replace(/\.[A-Za-z]+$/, ""));
    },
    setColumns: (mapped) => edits.setField(key, "columns", mapped),
    setStack: (handles) => edits.setField(key, "stack", [...handles]),
    renormalise: (isAsked) => edits.setField(key, "renormalise", isAsked ? "volatile-free" : undefined),
    startTyped: (mapped) => edits.setField(key, "columns", mapped),
    addColumn: (column) => void edits.putEntry(key, "columns", column),
    removeColumn(name) {
      const column = columns.find((c) => columnName(c) === name);
      if (column !== undefined) edits.removeEntry(key, "columns", column);
    },
    typeCell(id, isNew, column, text) {
      const quantity = isQuantity(column);
      const fault = typedFault(text, quantity);
      if (fault !== null) return fault;
      const stored = typedStored(text, quantity);
      if (isNew && stored === "") return null;
      return this.attempt(() => {
        const row = rowOf(id) ?? (isNew ? { id: String(id), cells: {} } : undefined);
        if (row === undefined) throw new Error("This row was deleted meanwhile. Press Escape, and type in another row.");
        putRow(withCell(row, column, stored));
      });
    },
    clearCell(id, column) {
      const row = rowOf(id);
      if (row !== undefined && column in row.cells) putRow(withCell(row, column, ""));
    },
    pasteCells(at, rowIds, model, text) {
      const cells = clipboardCells(text);
      if (at.row + cells.length > MOST_TYPED)
        throw new Error(`A typed table holds at most 2,000 rows; this would make ${at.row + cells.length}. Upload it as a file instead.`);
      const present = new Map(edits.entries(key, "typed").map(({ entry }) => [entry.id, entry as unknown as TypedRow]));
      const rows = cells.map((line, r) => {
        const id = String(rowIds[at.row + r] ?? freshRowId());
        let row = present.get(id) ?? { id, cells: {} };
        line.forEach((cell, c) => {
          const column = model.columns[at.column + c]?.name;
          if (column === undefined) return;
          const quantity = isQuantity(column);
          const fault = typedFault(cell, quantity);
          if (fault !== null) throw new Error(`${fault} (pasted row ${r + 1}, ${column}; nothing was pasted)`);
          row = withCell(row, column, typedStored(cell, quantity));
        });
        return row;
      });
      for (const row of rows) putRow(row);
    },
    deleteRow(id) {
      const row = rowOf(id);
      if (row !== undefined) edits.removeEntry(key, "typed", row);
    },
    amend: (target, value, reason) =>
      void edits.putEntry(key, "amendments", { row: target.row, sample: sampleOf(target), column: named(target), was: target.raw, value, reason }),
    setAside: (target, whole, reason) =>
      void edits.putEntry(key, "setAside", {
        row: target.row,
        ...(sampleOf(target) === "" ? {} : { sample: sampleOf(target) }),
        ...(whole ? {} : { column: named(target) }),
        reason,
      }),
    assume: (column, assumed, reason) => void edits.putEntry(key, "assumed", { column, ...assumed, reason }),
    undo: (list, entry) => edits.removeEntry(key, list, entry),
  };
}
