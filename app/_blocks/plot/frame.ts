import { scale, type Scale } from "@/app/_blocks/shared/scale";
import { padded } from "@/app/_blocks/shared/scale";
import type { Axis, PlotResult } from "@/cells";

export type Range = readonly [number, number];

/** What part of the data is in view. */
export interface ViewRange {
  readonly x: Range;
  readonly y: Range;
}

/** The drawing area in pixels, and how data fall on it. Both axes as Plotly has them: on a log axis ranges are decimal logarithms. */
export interface Frame {
  readonly width: number;
  readonly height: number;
  readonly margin: { readonly l: number; readonly r: number; readonly t: number; readonly b: number };
  readonly view: ViewRange;
  readonly logX: boolean;
  readonly logY: boolean;
  /** Pixels from the left and the top of the whole drawing. */
  px(x: number): number;
  py(y: number): number;
}

export const plotMargin = { l: 52, r: 8, t: 8, b: 42 } as const;

export function plotFrame(width: number, height: number, view: ViewRange, logX: boolean, logY: boolean, left: number = plotMargin.l): Frame {
  const margin = { ...plotMargin, l: left };
  const sx: Scale = scale(view.x[0], view.x[1], left, width - plotMargin.r);
  const sy: Scale = scale(view.y[0], view.y[1], height - plotMargin.b, plotMargin.t);
  return { width, height, margin, view, logX, logY, px: (x) => sx.at(logX ? Math.log10(x) : x), py: (y) => sy.at(logY ? Math.log10(y) : y) };
}

/** Height that suits a width: a little flatter than square on wide pages, square on a phone. */
export function plotHeight(width: number): number {
  return Math.round(width < 480 ? Math.max(260, width) : Math.min(560, width * 0.765));
}

function spanOf(values: readonly (readonly [number, number])[], log: boolean, axis: Axis | undefined): Range {
  let low = Infinity;
  let high = -Infinity;
  for (const [value, sigma] of values) {
    const around = log || !Number.isFinite(sigma) ? 0 : sigma;
    const a = log ? (value > 0 ? Math.log10(value) : NaN) : value - around;
    const b = log ? a : value + around;
    if (a < low) low = a;
    if (b > high) high = b;
  }
  const [from, to] = low <= high ? padded(low, high, 0.06) : [0, 1];
  const given = (v: number | undefined): number | undefined => (v === undefined ? undefined : log ? (v > 0 ? Math.log10(v) : undefined) : v);
  return [given(axis?.from) ?? from, given(axis?.to) ?? to];
}

/** The whole view: all samples, bodies, crossings and path ends, as far as the block sets no range of its own. Trends are carried to its edges. */
export function wholeView(result: PlotResult, xAxis: Axis | undefined, yAxis: Axis | undefined): ViewRange {
  const xs: [number, number][] = [];
  const ys: [number, number][] = [];
  const add = (x: number, y: number, sx: number, sy: number): void => {
    if (!Number.isFinite(x) || !Number.isFinite(y)) return;
    xs.push([x, sx]);
    ys.push([y, sy]);
  };
  for (const layer of result.layers) {
    if (layer.what === "samples")
      for (let i = 0; i < layer.points.x.length; i++)
        add(layer.points.x[i] ?? NaN, layer.points.y[i] ?? NaN, layer.points.sigmaX[i] ?? 0, layer.points.sigmaY[i] ?? 0);
    else if (layer.what === "bodies") for (const body of layer.bodies) add(body.x, body.y, body.sigmaX ?? 0, body.sigmaY ?? 0);
    else if (layer.what === "crossing" || layer.what === "annotation") add(layer.x, layer.y, 0, 0);
    else if (layer.what === "path") for (let i = 0; i < layer.line.x.length; i++) add(layer.line.x[i] ?? NaN, layer.line.y[i] ?? NaN, 0, 0);
  }
  return { x: spanOf(xs, xAxis?.scale === "log", xAxis), y: spanOf(ys, yAxis?.scale === "log", yAxis) };
}
