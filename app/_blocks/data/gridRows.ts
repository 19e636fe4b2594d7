import type { PageView } from "@/app/_page/contract";
import { pickedIndices } from "@/app/_blocks/shared/picks";
import type { UncertaintyForm } from "@/app/_ui/concise";
import type { DataBlock, DataResult } from "@/cells";
import { footnotesOf, lettersByPlace, TOTAL_COLUMN } from "@/app/_page/margin/footnotes";
import { amendedTexts, plainText, quantityCell, type GridColumn, type GridModel } from "./gridModel";
import type { DrawnCell } from "./GridRow";

const looks: Record<GridColumn["role"], DrawnCell["look"]> = {
  sample: "sample",
  class: "class",
  text: "words",
  reference: "words",
  quantity: "figure",
  uncertainty: "figure",
};

/** Makes the rows of a grid as they are drawn, and remembers them, as scrolling asks for the same row again and again. */
export function rowDrawer(
  block: DataBlock,
  result: DataResult | undefined,
  model: GridModel,
  totals: Float64Array | null,
  form: UncertaintyForm,
  classIndex: (name: string) => number,
): (index: number) => readonly DrawnCell[] {
  const amended = amendedTexts(block);
  const letters = lettersByPlace(footnotesOf(block, result));
  const flagged = new Set((result?.screening ?? []).map((f) => `${f.row}/${f.code === "total" ? TOTAL_COLUMN : (f.column ?? "")}`));
  const drawn = new Map<number, readonly DrawnCell[]>();
  const make = (index: number): DrawnCell[] => {
    const row = String(model.rowIds[index] ?? "");
    const cells = model.columns.map((column): DrawnCell => {
      const own = letters.get(`${row}/${column.name}`) ?? letters.get(`${row}/${column.quantity?.header ?? ""}`) ?? "";
      const text = plainText(block, model, column, index);
      return {
        name: column.name,
        look: looks[column.role],
        text,
        written: column.role === "quantity" ? quantityCell(block, model, column, index, form, amended) : undefined,
        letters: column.role === "sample" ? (letters.get(row) ?? "") + own : own,
        flagged: flagged.has(`${row}/${column.name}`),
        classIndex: column.role === "class" ? classIndex(text) : -1,
      };
    });
    if (totals !== null) {
      const total = totals[index] ?? NaN;
      const value = Number.isFinite(total) ? total.toFixed(1) : "–";
      cells.push({
        name: TOTAL_COLUMN,
        look: "figure",
        text: "",
        written: { was: null, value, sigma: "", mark: "", aside: false, absent: value === "–", spoken: value === "–" ? "no total" : value },
        letters: letters.get(`${row}/${TOTAL_COLUMN}`) ?? "",
        flagged: flagged.has(`${row}/${TOTAL_COLUMN}`),
        classIndex: -1,
      });
    }
    return cells;
  };
  return (index) => {
    let cells = drawn.get(index);
    if (cells === undefined) {
      cells = make(index);
      drawn.set(index, cells);
    }
    return cells;
  };
}

export interface OtherPick {
  readonly name: string;
  readonly color: string;
}

/** Rows that others picked, by index. */
export function othersPicks(view: PageView, model: GridModel): ReadonlyMap<number, readonly OtherPick[]> {
  const found = new Map<number, OtherPick[]>();
  for (const person of view.present) {
    if (person.isMe || person.picked.length === 0) continue;
    for (const index of pickedIndices(model.table, person.picked)) {
      const here = found.get(index) ?? [];
      here.push({ name: person.name, color: person.color });
      found.set(index, here);
    }
  }
  return found;
}
