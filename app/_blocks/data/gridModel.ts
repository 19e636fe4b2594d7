import type { DataBlock, QuantityColumn, RowId, Table } from "@/cells";
import type { UncertaintyForm } from "@/app/_ui/concise";
import { writeCell, type WrittenCell } from "./cellWords";

/** One column of the grid on the screen. */
export interface GridColumn {
  readonly name: string;
  readonly role: "sample" | "class" | "text" | "reference" | "quantity" | "uncertainty";
  /** Least width in pixels. */
  readonly width: number;
  /** What the engine made of it; none while it has not, and for columns of uncertainties. */
  readonly quantity: QuantityColumn | undefined;
  readonly text: readonly string[] | undefined;
}

export interface GridModel {
  readonly columns: readonly GridColumn[];
  /** Rows that hold something. */
  readonly rows: number;
  readonly rowIds: readonly RowId[];
  /** Typed tables read their cells from the document itself, so that typing never waits for the engine. */
  readonly typed: boolean;
  readonly table: Table | undefined;
}

const MOST_TEXT_WIDTH = 220;

function textWidth(texts: readonly string[], least: number): number {
  let longest = 0;
  for (let i = 0; i < Math.min(texts.length, 500); i++) longest = Math.max(longest, texts[i]?.length ?? 0);
  return Math.min(MOST_TEXT_WIDTH, Math.max(least, longest * 7.6 + 24));
}

function quantityWidth(column: QuantityColumn, form: UncertaintyForm): number {
  const base = form === "plus-minus" ? 124 : 88;
  return column.amended.includes(1) ? base + 44 : base;
}

const roleOrder = { sample: 0, class: 1 } as const;
const placeOf = (role: GridColumn["role"]): number => (role === "sample" || role === "class" ? roleOrder[role] : 2);

function fromTable(table: Table, form: UncertaintyForm): GridColumn[] {
  return table.columns.map((column): GridColumn =>
    column.kind === "text"
      ? { name: column.name, role: column.role, width: textWidth(column.text, 72), quantity: undefined, text: column.text }
      : { name: column.name, role: "quantity", width: quantityWidth(column, form), quantity: column, text: undefined },
  );
}

/** Columns of a typed table stand as the document has them, those of uncertainties included. */
function fromDocument(block: DataBlock, table: Table | undefined): GridColumn[] {
  return (block.columns ?? []).map((column): GridColumn => {
    const name = column.name ?? column.header ?? "";
    const made = table?.columns.find((c) => c.name === name);
    const width =
      column.role === "quantity" || column.role === "uncertainty"
        ? 92
        : textWidth(
            (block.typed ?? []).map((row) => row.cells[name] ?? ""),
            76,
          );
    return { name, role: column.role, width, quantity: made?.kind === "quantity" ? made : undefined, text: undefined };
  });
}

/** What the grid shows of a block. */
export function gridModel(block: DataBlock, table: Table | undefined, form: UncertaintyForm): GridModel {
  const typed = block.typed !== undefined;
  const columns = typed ? fromDocument(block, table) : table === undefined ? [] : fromTable(table, form);
  // Sample and class first, as people read a table; all else keeps its order.
  const ordered = columns.map((column, i) => ({ column, i })).sort((a, b) => placeOf(a.column.role) - placeOf(b.column.role) || a.i - b.i);
  const rowIds = block.typed !== undefined ? block.typed.map((row) => row.id) : (table?.rowIds ?? []);
  return { columns: ordered.map((o) => o.column), rows: rowIds.length, rowIds, typed, table };
}

/** The row of the grid that a row of the source is in: of analyses merged into one, that one; below 0 where there is none. */
export function rowShown(model: GridModel, handle: string, row: RowId): number {
  const at = model.rowIds.indexOf(row);
  return at >= 0 ? at : (model.table?.origins.findIndex((origins) => origins.some((origin) => origin.table === handle && origin.row === row)) ?? -1);
}

/** Amended texts by place, for the decimals of the new value. */
export function amendedTexts(block: DataBlock): ReadonlyMap<string, string> {
  return new Map((block.amendments ?? []).map((a) => [`${a.row}/${a.column}`, a.value]));
}

/** Text of a cell that is no calculated quantity. */
export function plainText(block: DataBlock, model: GridModel, column: GridColumn, index: number): string {
  if (model.typed) return block.typed?.[index]?.cells[column.name] ?? "";
  return column.text?.[index] ?? "";
}

/** A quantity's cell; undefined where the engine has not read the present text yet, and the text itself is to be shown. */
export function quantityCell(
  block: DataBlock,
  model: GridModel,
  column: GridColumn,
  index: number,
  form: UncertaintyForm,
  amended: ReadonlyMap<string, string>,
): WrittenCell | undefined {
  const { quantity } = column;
  const { table } = model;
  if (quantity === undefined || table === undefined) return undefined;
  const row = model.rowIds[index];
  if (row === undefined) return undefined;
  if (model.typed && (table.rowIds[index] !== row || (quantity.raw[index] ?? "") !== plainText(block, model, column, index))) return undefined;
  return writeCell(quantity, index, form, amended.get(`${row}/${column.name}`) ?? amended.get(`${row}/${quantity.header ?? ""}`), table.setAside[index] === 1);
}
