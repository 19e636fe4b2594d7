import type { BlockKind } from "@/cells";

/** What the kinds of block are called, and what each is for, as menus say it. */
export const kindWords: Record<BlockKind, { readonly one: string; readonly title: string; readonly says: string }> = {
  data: { one: "data", title: "Data", says: "a table: uploaded, pasted, typed or stacked" },
  formula: { one: "formula", title: "Formula", says: "ratios and other lines over a table" },
  plot: { one: "plot", title: "Plot", says: "samples, bodies, trends and paths" },
  trend: { one: "trend", title: "Trend", says: "a straight line with errors on both axes" },
  budget: { one: "budget", title: "Budget", says: "a mass balance, fixed or solved" },
  note: { one: "note", title: "Note", says: "words with live values" },
};
