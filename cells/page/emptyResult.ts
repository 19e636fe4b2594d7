import type { Problem } from "../errors";
import type { AxisInfo, BlockResult, TrendResult } from "./results";
import type { Block, TrendBlock } from "./schema";

const noAxis: AxisInfo = { expression: "", label: "", unit: "1", basis: null };

/** The result of a block that could not be calculated at all: nothing, and the reasons. */
export function emptyResult(block: Block, problems: readonly Problem[]): BlockResult {
  const all = { problems, bodiesUsed: {} };
  switch (block.kind) {
    case "data":
      return { kind: "data", samples: 0, setAside: 0, valuesSetAside: 0, amended: 0, columns: [], screening: [], proposed: false, ...all };
    case "formula":
      return { kind: "formula", lines: [], correlation: [], ...all };
    case "trend":
      return emptyTrend(block, problems);
    case "budget":
      return { kind: "budget", ok: false, roots: [], report: [], path: [], shares: [], byCompilation: [], ...all };
    case "plot":
      return { kind: "plot", plot: block.plot, x: noAxis, y: noAxis, layers: [], drawn: 0, notDrawn: {}, ...all };
    case "note":
      return { kind: "note", values: [], ...all };
  }
}

export function emptyTrend(block: TrendBlock, problems: readonly Problem[]): TrendResult {
  const axis = (expression: string): AxisInfo => ({ ...noAxis, expression, label: expression });
  const { method, x, y } = block;
  return { kind: "trend", method, ok: false, n: 0, leftOut: {}, x: axis(x), y: axis(y), points: [], fromBodies: [], problems, bodiesUsed: {} };
}
