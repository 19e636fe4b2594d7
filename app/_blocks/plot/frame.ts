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
  /** And back. */
  xAt(px: number): number;
  yAt(py: number): number;
}

export const plotMargin = { l: 52, r: 8, t: 8, b: 42 } as const;

export function plotFrame(width: number, height: number, view: ViewRange, logX: boolean, logY: boolean, room: Partial<Frame["margin"]> = {}): Frame {
  const margin = { ...plotMargin, ...room };
  const sx: Scale = scale(view.x[0], view.x[1], margin.l, width - margin.r);
  const sy: Scale = scale(view.y[0], view.y[1], height - margin.b, margin.t);
  const backX: Scale = scale(margin.l, width - margin.r, view.x[0], view.x[1]);
  const backY: Scale = scale(height - margin.b, margin.t, view.y[0], view.y[1]);
  return {
    width,
    height,
    margin,
    view,
    logX,
    logY,
    px: (x) => sx.at(logX ? Math.log10(x) : x),
    py: (y) => sy.at(logY ? Math.log10(y) : y),
    xAt: (px) => (logX ? 10 ** backX.at(px) : backX.at(px)),
    yAt: (py) => (logY ? 10 ** backY.at(py) : backY.at(py)),
  };
}

/** Height that suits a width: a little flatter than square on wide pages, square on a phone. */
export function plotHeight(width: number): number {
  return Math.round(width < 480 ? Math.max(260, width) : Math.min(560, width * 0.765));
}

/** The least and the greatest of what is to be in view, on one axis. */
class Span {
  private low = Infinity;
  private high = -Infinity;

  constructor(private readonly axis: Axis | undefined) {}

  get isEmpty(): boolean {
    return !(this.low <= this.high);
  }

  private get isLog(): boolean {
    return this.axis?.scale === "log";
  }

  add(value: number, sigma: number): void {
    if (this.isLog && !(value > 0)) return;
    const around = this.isLog || !Number.isFinite(sigma) ? 0 : sigma;
    const a = this.isLog ? Math.log10(value) : value - around;
    const b = this.isLog ? a : value + around;
    if (a < this.low) this.low = a;
    if (b > this.high) this.high = b;
  }

  range(): Range {
    const [from, to] = this.isEmpty ? [0, 1] : padded(this.low, this.high, 0.06);
    const given = (v: number | undefined): number | undefined => (v === undefined ? undefined : this.isLog ? (v > 0 ? Math.log10(v) : undefined) : v);
    return [given(this.axis?.from) ?? from, given(this.axis?.to) ?? to];
  }
}

/** The whole view: all samples, bodies, crossings and path ends, as far as the block sets no range of its own. Trends are carried to its edges. */
export function wholeView(result: PlotResult, xAxis: Axis | undefined, yAxis: Axis | undefined): ViewRange {
  const isPattern = result.plot === "pattern";
  const xs = new Span(isPattern ? { ...xAxis, scale: "linear" } : xAxis);
  const ys = new Span(yAxis);
  const add = (x: number, y: number, sx: number, sy: number): void => {
    if (!Number.isFinite(x) || !Number.isFinite(y)) return;
    xs.add(x, sx);
    ys.add(y, sy);
  };
  for (const layer of result.layers) {
    if (layer.what === "samples")
      for (let i = 0; i < layer.points.x.length; i++)
        add(layer.points.x[i] ?? NaN, layer.points.y[i] ?? NaN, layer.points.sigmaX[i] ?? 0, layer.points.sigmaY[i] ?? 0);
    else if (layer.what === "means") for (const { points } of layer.classes) for (const p of points) add(p.x, p.y, 0, p.sigmaY ?? 0);
    else if (layer.what === "bodies") for (const body of layer.bodies) add(body.x, body.y, body.sigmaX ?? 0, body.sigmaY ?? 0);
    else if (layer.what === "crossing" || layer.what === "annotation") add(layer.x, layer.y, 0, 0);
    else if (layer.what === "path") for (let i = 0; i < layer.line.x.length; i++) add(layer.line.x[i] ?? NaN, layer.line.y[i] ?? NaN, 0, 0);
  }
  const y = ys.range();
  if (!isPattern) return { x: xs.range(), y };
  // Bodies may have values of their own beside; all columns have their place. The most refractory stand at the left.
  const columns = new Span({ ...xAxis, scale: "linear" });
  for (const column of result.columns ?? []) columns.add(column.x, 0);
  const x = (columns.isEmpty ? xs : columns).range();
  return { x: result.x.unit === "K" && xAxis?.from === undefined && xAxis?.to === undefined ? [x[1], x[0]] : x, y };
}
