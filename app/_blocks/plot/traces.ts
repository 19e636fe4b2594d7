import type { Dash, Data } from "plotly.js";
import { classStyle } from "@/app/_ui/classStyle";
import type { Palette } from "@/app/_blocks/shared/usePalette";
import { State, type Curve, type PlotLayer } from "@/cells";
import { traceEllipse } from "./ellipse";
import type { Frame } from "./frame";
import type { Miss } from "./misses";
import { isCloud, mostRings } from "./cloud/cloud";

/** What the traces need to know beside the layers. */
export interface Drawing {
  readonly palette: Palette;
  readonly frame: Frame;
  readonly projector: boolean;
  classIndex(name: string): number;
  /** Rows of a table that are picked, by its handle. */
  pickedIn(data: string): readonly number[];
  /** The same for the others who are on the page now, each in their colour. */
  pickedByOthers(data: string): readonly { readonly color: string; readonly rows: readonly number[] }[];
}

/** What a marker stands for, as hovering and selecting hand it back. */
export interface PointRef {
  readonly data: string;
  readonly index: number;
  /** Patterns: which value. */
  readonly of?: string;
}

type Samples = Extract<PlotLayer, { what: "samples" }>;

export const quiet = { hoverinfo: "none", showlegend: false } as const;
export const silent = { hoverinfo: "skip", showlegend: false } as const;

export function washOf(color: string, alpha: number): string {
  const hex = /^#([0-9a-f]{2})([0-9a-f]{2})([0-9a-f]{2})$/i.exec(color);
  if (hex === null) return color;
  return `rgba(${parseInt(hex[1] ?? "0", 16)},${parseInt(hex[2] ?? "0", 16)},${parseInt(hex[3] ?? "0", 16)},${alpha})`;
}

export function looks(index: number, palette: Palette): { readonly symbol: string; readonly fill: string; readonly line: string } {
  if (index < 0) return { symbol: "circle", fill: palette.paper, line: palette.second };
  const style = classStyle(index);
  return { symbol: style.shape, ...style[palette.light] };
}

/** Samples: ellipses first, then markers, one pair of traces a class, then what is set aside. Very many are a cloud instead. */
export function samplesTraces(layer: Samples, drawing: Drawing): Data[] {
  if (isCloud(layer)) return [];
  const { points } = layer;
  const { palette } = drawing;
  const rowsOf = new Map<number, number[]>();
  const aside: number[] = [];
  for (let i = 0; i < points.x.length; i++) {
    if (!Number.isFinite(points.x[i] ?? NaN) || !Number.isFinite(points.y[i] ?? NaN)) continue;
    if (points.state[i] === State.setAside) aside.push(i);
    else if (points.state[i] === State.present) {
      const name = layer.classes[i] ?? "";
      const index = name === "" ? -1 : drawing.classIndex(name);
      const rows = rowsOf.get(index);
      if (rows === undefined) rowsOf.set(index, [i]);
      else rows.push(i);
    }
  }
  const traces: Data[] = [];
  if (layer.ellipses > 0) {
    for (const [index, rows] of rowsOf) {
      const x: (number | null)[] = [];
      const y: (number | null)[] = [];
      for (const i of rows) {
        const sx = points.sigmaX[i] ?? NaN;
        const sy = points.sigmaY[i] ?? NaN;
        if (!Number.isFinite(sx) || !Number.isFinite(sy)) continue;
        traceEllipse(points.x[i] ?? 0, points.y[i] ?? 0, sx, sy, points.correlation[i] ?? 0, layer.ellipses, (a, b) => {
          x.push(a);
          y.push(b);
        });
        x.push(null);
        y.push(null);
      }
      traces.push({ ...silent, type: "scatter", mode: "lines", x, y, line: { color: washOf(looks(index, palette).line, 0.8), width: 0.8 } });
    }
  }
  for (const [index, rows] of rowsOf) {
    const look = looks(index, palette);
    traces.push({
      ...quiet,
      type: "scatter",
      mode: "markers",
      x: rows.map((i) => points.x[i] ?? null),
      y: rows.map((i) => points.y[i] ?? null),
      customdata: rows.map((i) => [layer.data, i]),
      marker: {
        symbol: look.symbol,
        size: drawing.projector ? 11 : 7.5,
        color: look.fill,
        line: { color: look.line, width: 1 },
      },
    });
  }
  if (aside.length > 0) {
    traces.push({
      ...quiet,
      type: "scatter",
      mode: "markers",
      x: aside.map((i) => points.x[i] ?? null),
      y: aside.map((i) => points.y[i] ?? null),
      customdata: aside.map((i) => [layer.data, i]),
      marker: { symbol: "x-thin", size: 8, color: palette.second, line: { color: palette.second, width: 1.2 } },
    });
  }
  return traces;
}

function ring(layer: Samples, picked: readonly number[], color: string, size: number): Data[] {
  // So many are painted with the cloud.
  if (isCloud(layer) && picked.length > mostRings) return [];
  const rows = picked.filter((i) => Number.isFinite(layer.points.x[i] ?? NaN) && Number.isFinite(layer.points.y[i] ?? NaN));
  if (rows.length === 0) return [];
  return [
    {
      ...silent,
      type: "scatter",
      mode: "markers",
      x: rows.map((i) => layer.points.x[i] ?? null),
      y: rows.map((i) => layer.points.y[i] ?? null),
      marker: { symbol: "circle-open", size, color, line: { color, width: 1.6 } },
    },
  ];
}

/** Rings around the picked samples, over everything else: one's own in indigo, those of others wider and in their colour. */
export function pickedTraces(layer: Samples, drawing: Drawing): Data[] {
  return [
    ...drawing.pickedByOthers(layer.data).flatMap(({ color, rows }) => ring(layer, rows, color, 21)),
    ...ring(layer, drawing.pickedIn(layer.data), drawing.palette.indigo, 16),
  ];
}

/** The part of a curve between two places, with both ends put in. */
function part(curve: Curve, from: number, to: number): { x: number[]; y: number[] } {
  const out: { x: number[]; y: number[] } = { x: [], y: [] };
  const last = curve.x.length - 1;
  const at = (place: number): void => {
    for (let i = 0; i < last; i++) {
      const x0 = curve.x[i] ?? 0;
      const x1 = curve.x[i + 1] ?? 0;
      if ((x0 <= place && place <= x1) || (x1 <= place && place <= x0)) {
        const t = x1 === x0 ? 0 : (place - x0) / (x1 - x0);
        out.x.push(place);
        out.y.push((curve.y[i] ?? 0) + t * ((curve.y[i + 1] ?? 0) - (curve.y[i] ?? 0)));
        return;
      }
    }
  };
  at(from);
  for (let i = 0; i <= last; i++) {
    const x = curve.x[i] ?? 0;
    if (x > from && x < to) {
      out.x.push(x);
      out.y.push(curve.y[i] ?? 0);
    }
  }
  at(to);
  return out;
}

/** Dashes in pixels, which Plotly takes and its types do not know. */
export const carriedOn = "5px,3px" as Dash;

/** A trend: its band, the line whole between its samples and dashed where it is carried on past them. */
export function trendTraces(layer: Extract<PlotLayer, { what: "trend" }>, { palette }: Drawing): Data[] {
  const traces: Data[] = [];
  if (layer.band !== undefined) {
    const x = Array.from(layer.band.x);
    traces.push({
      ...silent,
      type: "scatter",
      mode: "lines",
      x: [...x, ...x.slice().reverse()],
      y: [...layer.band.upper, ...Array.from(layer.band.lower).reverse()],
      fill: "toself",
      fillcolor: washOf(palette.ink, palette.light === "plane" ? 0.1 : 0.14),
      line: { width: 0, color: "transparent" },
    });
  }
  const xs = layer.line.x;
  const start = Math.min(xs[0] ?? 0, xs[xs.length - 1] ?? 0);
  const end = Math.max(xs[0] ?? 0, xs[xs.length - 1] ?? 0);
  const [from, to] = layer.range;
  const line = (a: number, b: number, dash: Dash): void => {
    if (b > a) traces.push({ ...silent, type: "scatter", mode: "lines", ...part(layer.line, a, b), line: { color: palette.ink, width: 1.2, dash } });
  };
  line(start, Math.min(from, end), carriedOn);
  line(Math.max(from, start), Math.min(to, end), "solid");
  line(Math.max(to, start), end, carriedOn);
  return traces;
}

/** A crossing: its ellipse in magenta. */
export function crossingTraces(layer: Extract<PlotLayer, { what: "crossing" }>, { palette }: Drawing): Data[] {
  return [
    {
      ...silent,
      type: "scatter",
      mode: "lines",
      x: Array.from(layer.ellipse.x),
      y: Array.from(layer.ellipse.y),
      fill: "toself",
      fillcolor: washOf(palette.magenta, 0.1),
      line: { color: palette.magenta, width: 1.6 },
    },
  ];
}

/** Bodies: ellipses and crosses. */
export function bodiesTraces(layer: Extract<PlotLayer, { what: "bodies" }>, { palette }: Drawing): Data[] {
  const x: (number | null)[] = [];
  const y: (number | null)[] = [];
  for (const body of layer.bodies) {
    if (body.ellipse === undefined) continue;
    x.push(...body.ellipse.x, null);
    y.push(...body.ellipse.y, null);
  }
  return [
    { ...silent, type: "scatter", mode: "lines", x, y, line: { color: palette.ink, width: 0.9 } },
    {
      ...quiet,
      type: "scatter",
      mode: "markers",
      x: layer.bodies.map((b) => b.x),
      y: layer.bodies.map((b) => b.y),
      customdata: layer.bodies.map((b) => [`body ${b.name}`, -1]),
      marker: { symbol: "cross-thin", size: 12, color: palette.ink, line: { color: palette.ink, width: 1.8 } },
    },
  ];
}

/** A budget's path with ticks across it and a cross at its end; the ticks are 9 pixels long whatever the scale. */
export function pathTraces(layer: Extract<PlotLayer, { what: "path" }>, { palette, frame }: Drawing): Data[] {
  const traces: Data[] = [
    { ...silent, type: "scatter", mode: "lines", x: Array.from(layer.line.x), y: Array.from(layer.line.y), line: { color: palette.indigo, width: 1.4 } },
  ];
  const x: (number | null)[] = [];
  const y: (number | null)[] = [];
  for (const tick of layer.ticks) {
    const [dx, dy] = normalAt(layer.line, tick, frame);
    const [px, py] = [frame.px(tick.x), frame.py(tick.y)];
    x.push(frame.xAt(px - 4.5 * dx), frame.xAt(px + 4.5 * dx), null);
    y.push(frame.yAt(py - 4.5 * dy), frame.yAt(py + 4.5 * dy), null);
  }
  if (x.length > 0) traces.push({ ...silent, type: "scatter", mode: "lines", x, y, line: { color: palette.indigo, width: 1.2 } });
  if (layer.end !== undefined)
    traces.push({
      ...silent,
      type: "scatter",
      mode: "markers",
      x: [layer.end.x],
      y: [layer.end.y],
      marker: { symbol: "x-thin", size: 8, color: palette.indigo, line: { color: palette.indigo, width: 1.6 } },
    });
  return traces;
}

/** From the end of a path to where it was to be: what a budget misses by, dotted. */
export function missTraces(misses: readonly Miss[], { palette }: Drawing): Data[] {
  return misses.map((miss) => ({
    ...silent,
    type: "scatter",
    mode: "lines",
    x: [miss.x, miss.x],
    y: [miss.from, miss.to],
    line: { color: palette.vermilion, width: 1.2, dash: "dot" },
  }));
}

/** Unit vector across a path at a tick, in pixels. */
export function normalAt(line: Curve, tick: { readonly x: number; readonly y: number }, frame: Frame): readonly [number, number] {
  let nearest = 0;
  let distance = Infinity;
  for (let i = 0; i + 1 < line.x.length; i++) {
    const d = Math.hypot(frame.px(line.x[i] ?? NaN) - frame.px(tick.x), frame.py(line.y[i] ?? NaN) - frame.py(tick.y));
    if (d < distance) {
      distance = d;
      nearest = i;
    }
  }
  const dx = frame.px(line.x[nearest + 1] ?? NaN) - frame.px(line.x[nearest] ?? NaN);
  const dy = frame.py(line.y[nearest + 1] ?? NaN) - frame.py(line.y[nearest] ?? NaN);
  const length = Math.hypot(dx, dy);
  return length > 0 ? [-dy / length, dx / length] : [0, 1];
}
