import type { ComponentType } from "react";
import type { BlockViewProps } from "@/app/_page/contract";
import type { Block, BlockKind, BlockResult } from "@/cells";
import { BudgetView, stateInWords as budgetState } from "./budget/BudgetView";
import { DataView, stateInWords as dataState } from "./data/DataView";
import { FormulaView, stateInWords as formulaState } from "./formula/FormulaView";
import { plainState, type StateWords } from "./headWords";
import { NoteView, stateInWords as noteState } from "./note/NoteView";
import { PlotView, stateInWords as plotState } from "./plot/PlotView";
import { stateInWords as trendState, TrendView } from "./trend/TrendView";

/** One view a kind of block. To add a kind is to add a folder here and a line in this list. */
const views: { readonly [K in BlockKind]: ComponentType<BlockViewProps<Extract<Block, { kind: K }>>> } = {
  data: DataView,
  formula: FormulaView,
  plot: PlotView,
  trend: TrendView,
  budget: BudgetView,
  note: NoteView,
};

/** The view of a block's kind. The list above pairs every kind with a view of that kind's block. */
export function viewOf(kind: BlockKind): ComponentType<BlockViewProps> {
  return views[kind] as ComponentType<BlockViewProps>;
}

/** What a block's head says at its right. */
export function stateOf(result: BlockResult | undefined): StateWords {
  switch (result?.kind) {
    case "data":
      return dataState(result);
    case "formula":
      return formulaState(result);
    case "plot":
      return plotState(result);
    case "trend":
      return trendState(result);
    case "budget":
      return budgetState(result);
    case "note":
      return noteState(result);
    case undefined:
      return plainState(result);
  }
}
