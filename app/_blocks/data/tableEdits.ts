import type { Uploaded } from "@/app/_page/services";
import type { Column, DataBlock, TypedRow } from "@/cells";
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
  startTyped(columns: readonly Column[]): void;
  addColumn(column: Column): void;
  removeColumn(name: string): void;
  typeCell(index: number, column: string, text: string): string | null;
  clearCell(index: number, column: string): void;
  pasteCells(at: CellPlace, model: GridModel, text: string): void;
  deleteRow(index: number): void;
  amend(target: CellTarget, value: string, reason: string): void;
  setAside(target: CellTarget, whole: boolean, reason: string): void;
  assume(column: string, assumed: { readonly relative: number } | { readonly absolute: number }, reason: string): void;
  undo(list: "amendments" | "setAside" | "assumed", entry: object): void;
}

/** What people do in a table, in terms of the page's edits. */
export function tableEdits(edits: PageEdits, key: string, block: DataBlock): TableEdits {
  const columns = block.columns ?? [];
  const isQuantity = (name: string) => columns.some((c) => columnName(c) === name && (c.role === "quantity" || c.role === "uncertainty"));
  const rowAt = (index: number): TypedRow => block.typed?.[index] ?? { id: freshRowId(), cells: {} };
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
    startTyped: (mapped) => edits.setField(key, "columns", mapped),
    addColumn: (column) => void edits.putEntry(key, "columns", column),
    removeColumn(name) {
      const column = columns.find((c) => columnName(c) === name);
      if (column !== undefined) edits.removeEntry(key, "columns", column);
    },
    typeCell(index, column, text) {
      const quantity = isQuantity(column);
      const fault = typedFault(text, quantity);
      if (fault !== null) return fault;
      return this.attempt(() => putRow(withCell(rowAt(index), column, typedStored(text, quantity))));
    },
    clearCell(index, column) {
      const row = block.typed?.[index];
      if (row !== undefined && column in row.cells) putRow(withCell(row, column, ""));
    },
    pasteCells(at, model, text) {
      const cells = clipboardCells(text);
      if (at.row + cells.length > MOST_TYPED)
        throw new Error(`A typed table holds at most 2,000 rows; this would make ${at.row + cells.length}. Upload it as a file instead.`);
      const rows = cells.map((line, r) => {
        let row = rowAt(at.row + r);
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
    deleteRow(index) {
      const row = block.typed?.[index];
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
