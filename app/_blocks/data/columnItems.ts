import type { MenuItem } from "@/app/_ui/Menu";
import type { Assumed, DataBlock } from "@/cells";
import type { GridColumn } from "./gridModel";

export interface ColumnActions {
  readonly assume: () => void;
  readonly takeBack: (entry: Assumed) => void;
  readonly remap: (() => void) | undefined;
  readonly remove: (() => void) | undefined;
}

/** What can be done to a column as a whole. */
export function columnItems(block: DataBlock, column: GridColumn, actions: ColumnActions): MenuItem[] {
  const items: MenuItem[] = [];
  if (column.role === "quantity") {
    const assumed = (block.assumed ?? []).find((a) => a.column === column.name || a.column === column.quantity?.header);
    items.push({ label: assumed === undefined ? "Assume a σ" : "Assume another σ", onChoose: actions.assume });
    if (assumed !== undefined) items.push({ label: "Take the assumed σ back", onChoose: () => actions.takeBack(assumed) });
  }
  if (actions.remap !== undefined) items.push({ label: "How it is read", onChoose: actions.remap });
  if (actions.remove !== undefined) items.push({ label: "Delete the column", danger: true, onChoose: actions.remove });
  return items;
}
