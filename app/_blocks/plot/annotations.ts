import type { Annotations } from "plotly.js";
import { formatValue } from "@/app/_ui/concise";
import { rowLabel } from "@/app/_blocks/shared/picks";
import { resultOf, tableOf } from "@/app/_blocks/shared/tableOf";
import type { PageResults, PlotLayer, PlotResult } from "@/cells";
import { chemicalMarkup, plainText } from "./chemicalMarkup";
import { missesOf } from "./misses";
import { linesOfBodies } from "./patternTraces";
import { patternWords } from "./patternWords";
import { overlap, placeLabels, roughWidth, type Box, type LabelRequest, type Obstacle } from "./placeLabels";
import { ternaryWords } from "./ternaryTraces";
import { normalAt, washOf, type Drawing } from "./traces";

/** One note as Plotly takes it; its types do not know that a note may have a name. */
export type Note = Partial<Annotations> & { readonly name?: string };

/** Name of what is written beside data, and not beside an axis: it holds only for the view that it was placed in. */
export const ON_DATA = "on data";

const sans = '"IBM Plex Sans", "Helvetica Neue", Arial, sans-serif';

interface Label {
  readonly x: number;
  readonly y: number;
  readonly lines: readonly { readonly text: string; readonly size: number; readonly color: string; readonly weight: number }[];
  readonly gap: number;
}

/** Below this width the long labels would cover what they name; the list beside the plot says the rest. */
const narrow = 480;

function labelOf(layer: PlotLayer, drawing: Drawing, results: PageResults | null): Label[] {
  const { palette } = drawing;
  switch (layer.what) {
    case "bodies":
      // A body that runs through a pattern is named once, where its line ends at the right.
      if (layer.bodies.some(({ of }) => of !== undefined))
        return linesOfBodies(layer).flatMap(([name, points]): Label[] => {
          const last = points.reduce((best, p) => (drawing.frame.px(p.x) > drawing.frame.px(best.x) ? p : best));
          return [{ x: last.x, y: last.y, gap: 10, lines: [{ text: name, size: 12, color: palette.ink, weight: 600 }] }];
        });
      return layer.bodies.map((b) => ({ x: b.x, y: b.y, gap: 10, lines: [{ text: b.name, size: 12, color: palette.ink, weight: 600 }] }));
    case "crossing": {
      const crossing = resultOf(results, layer.trends[0], "trend")?.crossing;
      const nearest =
        crossing?.fromBodies.reduce<{ body: string; distance: number } | null>((best, b) => (best === null || b.distance < best.distance ? b : best), null) ??
        null;
      return [
        {
          x: layer.x,
          y: layer.y,
          gap: 16,
          lines:
            drawing.frame.width < narrow
              ? [{ text: "crossing", size: 12, color: palette.magenta, weight: 500 }]
              : [
                  {
                    text: `crossing ${formatValue(layer.x, layer.sigmaX)}, ${formatValue(layer.y, layer.sigmaY)}`,
                    size: 12,
                    color: palette.magenta,
                    weight: 500,
                  },
                  {
                    text: nearest === null ? "ellipse 95 %" : `ellipse 95 %, ${nearest.body} ${nearest.distance.toFixed(1)}σ away`,
                    size: 11,
                    color: palette.second,
                    weight: 400,
                  },
                ],
        },
      ];
    }
    case "path":
      return layer.end === undefined
        ? []
        : [{ x: layer.end.x, y: layer.end.y, gap: 8, lines: [{ text: layer.end.label, size: 12, color: palette.indigo, weight: 400 }] }];
    case "samples": {
      if (layer.of !== undefined) return [];
      const rows = drawing.pickedIn(layer.data).filter((i) => Number.isFinite(layer.points.x[i] ?? NaN));
      // Names of a few picked samples help; names of many only cover them.
      if (rows.length === 0 || rows.length > 4) return [];
      const table = tableOf(results, layer.data);
      return rows.map((i) => ({
        x: layer.points.x[i] ?? 0,
        y: layer.points.y[i] ?? 0,
        gap: 12,
        lines: [{ text: rowLabel(table, i), size: 12, color: palette.indigo, weight: 400 }],
      }));
    }
    case "annotation":
    case "means":
    case "trend":
      return [];
  }
}

function obstaclesOf(layers: readonly PlotLayer[], drawing: Drawing): Obstacle[] {
  const found: Obstacle[] = [];
  for (const layer of layers) {
    if (layer.what === "samples" && layer.points.x.length <= 2000)
      for (let i = 0; i < layer.points.x.length; i++)
        found.push({ x: drawing.frame.px(layer.points.x[i] ?? NaN), y: drawing.frame.py(layer.points.y[i] ?? NaN) });
    else if (layer.what === "bodies") for (const b of layer.bodies) found.push({ x: drawing.frame.px(b.x), y: drawing.frame.py(b.y) });
    else if (layer.what === "path" || layer.what === "trend") {
      // A line is in the way all along itself.
      const { x, y } = layer.line;
      for (let k = 0; k <= 60; k++) {
        const t = (k / 60) * (x.length - 1);
        const i = Math.min(Math.floor(t), x.length - 2);
        const f = t - i;
        found.push({
          x: drawing.frame.px((x[i] ?? NaN) * (1 - f) + (x[i + 1] ?? NaN) * f),
          y: drawing.frame.py((y[i] ?? NaN) * (1 - f) + (y[i + 1] ?? NaN) * f),
        });
      }
    }
  }
  return found.filter((o) => Number.isFinite(o.x) && Number.isFinite(o.y));
}

const inData = { showarrow: false, align: "left" } as const;

/** A text at a place of the drawing, by its left and top edge in pixels. */
function textAt(left: number, top: number, text: string, size: number, color: string, weight: number, drawing: Drawing, extra: Note = {}): Note {
  const { frame, palette } = drawing;
  return {
    ...inData,
    xref: "paper",
    yref: "paper",
    x: 0,
    y: 1,
    xanchor: "left",
    yanchor: "top",
    xshift: left - frame.margin.l,
    yshift: -(top - frame.margin.t),
    text: plainText(text),
    font: { family: sans, size, color, weight } as Note["font"] & { weight: number },
    bgcolor: washOf(palette.paper, 0.75),
    borderpad: 0,
    ...extra,
  };
}

/** The name of a trend, written along its line below its middle. */
function trendName(layer: Extract<PlotLayer, { what: "trend" }>, name: string, drawing: Drawing): Note | null {
  const { frame, palette } = drawing;
  const [from, to] = layer.range;
  const { x, y } = layer.line;
  if (x.length < 2) return null;
  const at = (place: number): number => {
    const k = Math.max(
      1,
      x.findIndex((end) => end >= place),
    );
    const slope = ((y[k] ?? 0) - (y[k - 1] ?? 0)) / ((x[k] ?? 1) - (x[k - 1] ?? 0));
    return (y[k - 1] ?? 0) + slope * (place - (x[k - 1] ?? 0));
  };
  const x0 = frame.px(from);
  const y0 = frame.py(at(from));
  const x1 = frame.px(to);
  const y1 = frame.py(at(to));
  const angle = (Math.atan2(y1 - y0, x1 - x0) * 180) / Math.PI;
  const length = Math.hypot(x1 - x0, y1 - y0);
  if (!Number.isFinite(angle) || length < roughWidth(name) + 24) return null;
  // Below a rising line, above a falling one: both lie away from the line's own samples least often.
  const nx = -(y1 - y0) / length;
  const ny = (x1 - x0) / length;
  const t = 0.42;
  const cx = x0 + t * (x1 - x0) + nx * 16;
  const cy = y0 + t * (y1 - y0) + ny * 16;
  return {
    ...inData,
    xref: "paper",
    yref: "paper",
    x: 0,
    y: 1,
    xanchor: "center",
    yanchor: "middle",
    xshift: cx - frame.margin.l,
    yshift: -(cy - frame.margin.t),
    textangle: String(angle),
    text: `<i>${plainText(name)}</i>`,
    font: { family: sans, size: 12, color: palette.ink },
  };
}

/** All that is written on a drawing: axes in words, labels beside their points, trends along their lines, numbers at ticks. */
export function buildAnnotations(
  result: PlotResult,
  axes: { readonly x: string; readonly y: string },
  nameOf: (handle: string) => string,
  drawing: Drawing,
  results: PageResults | null,
): Note[] {
  const { frame, palette } = drawing;
  const { layers } = result;
  const write = (px: number, py: number, text: string, size: number, color: string, weight: number, extra: Note): Note =>
    textAt(px, py, "", size, color, weight, drawing, { text, ...extra });
  const title = { family: sans, size: 12, color: palette.ink, weight: 500 } as Note["font"] & { weight: number };
  const notes: Note[] =
    result.plot === "ternary"
      ? ternaryWords(result, drawing, write)
      : [
          {
            ...inData,
            xref: "paper",
            yref: "paper",
            x: 1,
            y: 0,
            xanchor: "right",
            yanchor: "top",
            yshift: result.plot === "pattern" ? -58 : -22,
            // A typed order is read off the symbols themselves.
            text: result.plot === "pattern" && result.x.label === (result.columns ?? []).map(({ of }) => of).join(", ") ? "" : chemicalMarkup(axes.x),
            font: title,
          },
          ...(result.plot === "pattern"
            ? [...patternWords(result, drawing, write), write(frame.margin.l, 2, chemicalMarkup(axes.y), 12, palette.ink, 500, {})]
            : axes.y === ""
              ? []
              : [write(frame.margin.l + 8, frame.margin.t + 6, chemicalMarkup(axes.y), 12, palette.ink, 500, {})]),
        ];
  const inView = (l: Label): boolean =>
    frame.px(l.x) >= frame.margin.l &&
    frame.px(l.x) <= frame.width - frame.margin.r &&
    frame.py(l.y) >= frame.margin.t &&
    frame.py(l.y) <= frame.height - frame.margin.b;
  const misses = missesOf(layers, results).map((miss): Label => ({
    x: miss.x,
    y: (miss.from + miss.to) / 2,
    gap: 8,
    lines: [{ text: `${miss.what} missed by ${miss.sigmas.toFixed(1)}σ`, size: 11, color: palette.vermilion, weight: 400 }],
  }));
  const labels = [...layers.flatMap((layer) => labelOf(layer, drawing, results)), ...misses].filter(inView);
  const requests: LabelRequest[] = labels.map((l) => ({
    x: frame.px(l.x),
    y: frame.py(l.y),
    gap: l.gap,
    width: Math.max(...l.lines.map((line) => roughWidth(line.text, line.size))),
    height: l.lines.length * 16,
  }));
  const axisBox: Obstacle[] = Array.from({ length: 10 }, (_, i) => ({ x: frame.margin.l + 8 + i * roughWidth(axes.y) * 0.1, y: frame.margin.t + 14 }));
  const inside: Box = { left: frame.margin.l + 4, top: frame.margin.t + 4, right: frame.width - frame.margin.r - 4, bottom: frame.height - frame.margin.b - 4 };
  const placed = layers.flatMap((layer) => (layer.what === "annotation" ? [{ layer, box: annotationBox(layer, frame) }] : []));
  const places = placeLabels(
    requests,
    [...obstaclesOf(layers, drawing), ...axisBox],
    inside,
    placed.map(({ box }) => box),
  );
  const taken: Box[] = placed.map(({ box }) => box);
  const fixed = notes.length;
  for (const { layer, box } of placed) if (overlap(box, inside) > 0) notes.push(textAt(box.left, box.top, layer.text, 12, palette.ink, 400, drawing));
  labels.forEach((label, i) => {
    const place = places[i];
    const request = requests[i];
    if (place === undefined || request === undefined) return;
    taken.push({ ...place, right: place.left + request.width, bottom: place.top + request.height });
    label.lines.forEach((line, n) => notes.push(textAt(place.left, place.top + n * 16, line.text, line.size, line.color, line.weight, drawing)));
  });
  for (const layer of layers) {
    if (layer.what === "trend") {
      const note = trendName(layer, nameOf(layer.trend), drawing);
      if (note !== null) notes.push(note);
    } else if (layer.what === "path") notes.push(...tickFigures(layer, drawing, inside, taken));
  }
  return notes.map((note, i) => (i < fixed ? note : { ...note, name: ON_DATA }));
}

/** Where a person's own words stand: they begin at their point, at half their height. */
export function annotationBox({ x, y, text }: Extract<PlotLayer, { what: "annotation" }>, frame: Drawing["frame"]): Box {
  const [left, middle] = [frame.px(x), frame.py(y)];
  return { left, top: middle - 8, right: left + roughWidth(text), bottom: middle + 8 };
}

/** Figures at a path's ticks, on the side where they cover nothing; a tick whose figure would cover another text goes without. */
function tickFigures(layer: Extract<PlotLayer, { what: "path" }>, drawing: Drawing, inside: Box, taken: Box[]): Note[] {
  const { frame, palette } = drawing;
  return layer.ticks.flatMap((tick): Note[] => {
    const [px, py] = [frame.px(tick.x), frame.py(tick.y)];
    // The end says its own amount.
    if (layer.end !== undefined && Math.hypot(px - frame.px(layer.end.x), py - frame.py(layer.end.y)) < 12) return [];
    const [dx, dy] = normalAt(layer.line, tick, frame);
    const width = roughWidth(tick.label, 11);
    // The upper side of the path first, where its samples seldom lie.
    const first = dy > 0 ? -1 : 1;
    for (const side of [first, -first]) {
      const [cx, cy] = [px + side * dx * (8 + Math.abs(dx) * (width / 2)), py + side * dy * 13];
      const box: Box = { left: cx - width / 2, top: cy - 7, right: cx + width / 2, bottom: cy + 7 };
      const isClear = overlap(box, inside) > width * 13.9 && taken.every((other) => overlap(box, other) === 0);
      if (!isClear) continue;
      taken.push(box);
      return [textAt(box.left, box.top, tick.label, 11, palette.indigo, 400, drawing, { bgcolor: "rgba(0,0,0,0)" })];
    }
    return [];
  });
}
