import type { PlotBlock, PlotResult } from "@/cells";
import { layOutDistribution } from "./distribution";
import { plotFrame, plotHeight, wholeView, type Frame, type ViewRange } from "./frame";
import { roughWidth } from "./placeLabels";
import { layOutTernary, ternaryFrame, ternaryHeight } from "./ternary";

/** A plot on the paper it is drawn on: places instead of values, and the frame they stand in. */
export interface LaidOut {
  readonly result: PlotResult;
  readonly frame: Frame;
  /** Names of the rows of a distribution; null for the other kinds. */
  readonly rows: readonly string[] | null;
}

/** Height that suits a plot of a kind at a width. */
export function heightFor(plot: PlotResult["plot"], width: number): number {
  return plot === "ternary" ? ternaryHeight(width) : plotHeight(width);
}

/** Lays a plot out on a drawing of `width` × `height` pixels. */
export function layOutPlot(
  block: PlotBlock,
  result: PlotResult,
  size: { readonly width: number; readonly height: number },
  closeUp: ViewRange | null,
  classIndex: (name: string) => number,
): LaidOut {
  const { width, height } = size;
  if (result.plot === "ternary") return { result: layOutTernary(result), frame: ternaryFrame(width, height, closeUp), rows: null };
  if (result.plot === "distribution") {
    const spread = layOutDistribution(result, classIndex);
    const view = closeUp ?? { x: wholeView(spread.result, block.xAxis, undefined).x, y: [-0.6, spread.rows.length - 0.4] as const };
    const l = Math.min(width / 3, 24 + Math.max(...spread.rows.map((name) => roughWidth(name, 11)), 24));
    return { result: spread.result, frame: plotFrame(width, height, view, block.xAxis?.scale === "log", false, { l }), rows: spread.rows };
  }
  const view = closeUp ?? wholeView(result, block.xAxis, block.yAxis);
  const isPattern = result.plot === "pattern";
  // Elements and their temperatures take two lines more below, names of bodies some room at the right.
  const room = isPattern ? { b: 78, t: 24, r: width < 480 ? 8 : 16 } : {};
  return { result, frame: plotFrame(width, height, view, !isPattern && block.xAxis?.scale === "log", block.yAxis?.scale === "log", room), rows: null };
}
