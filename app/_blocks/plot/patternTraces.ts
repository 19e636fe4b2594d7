import type { Dash, Data } from "plotly.js";
import { State, type PlotLayer } from "@/cells";
import { mostEllipses } from "./plotWords";
import { looks, silent, quiet, washOf, type Drawing } from "./traces";

type Samples = Extract<PlotLayer, { what: "samples" }>;
type Means = Extract<PlotLayer, { what: "means" }>;
type Bodies = Extract<PlotLayer, { what: "bodies" }>;

/** What runs through one line of a pattern. */
interface Through {
  readonly x: (number | null)[];
  readonly y: (number | null)[];
  readonly bars: { readonly x: (number | null)[]; readonly y: (number | null)[] };
  readonly marks: { readonly x: number[]; readonly y: number[]; readonly custom: unknown[] };
}

const fresh = (): Through => ({ x: [], y: [], bars: { x: [], y: [] }, marks: { x: [], y: [], custom: [] } });

function stand(on: Through, x: number, y: number, sigma: number | null, custom: readonly unknown[], isLog: boolean): void {
  on.x.push(x);
  on.y.push(y);
  on.marks.x.push(x);
  on.marks.y.push(y);
  on.marks.custom.push(custom);
  if (sigma === null || !(sigma > 0)) return;
  // On a logarithmic axis a bar that would reach zero ends at the drawing's own edge.
  const low = isLog && y - sigma <= 0 ? y / 1000 : y - sigma;
  on.bars.x.push(x, x, null);
  on.bars.y.push(low, y + sigma, null);
}

const gap = (on: Through): void => void (on.x.push(null), on.y.push(null));

/** Values of a pattern where they stand, from the left; the columns of one line of the list. */
function columnsOf(layers: readonly PlotLayer[], line: number): Samples[] {
  return layers.filter((layer): layer is Samples => layer.what === "samples" && layer.drawn === line).sort((a, b) => placeOf(a) - placeOf(b));
}

function placeOf(layer: Samples): number {
  return layer.points.x.find((x) => Number.isFinite(x)) ?? Infinity;
}

/** Samples of one line of the list: for each class a line through every sample's points, broken where a value is missing. */
function samplesThrough(layers: readonly PlotLayer[], line: number, drawing: Drawing): Data[] {
  const columns = columnsOf(layers, line);
  const first = columns[0];
  // Thousands of lines are a smear that hides what they mean; the plot says so and offers class means.
  if (first === undefined || first.points.state.length > mostEllipses) return [];
  const { classes } = first;
  const by = new Map<number, Through>();
  for (let row = 0; row < first.points.state.length; row++) {
    if (!columns.some(({ points }) => points.state[row] === State.present && Number.isFinite(points.y[row] ?? NaN))) continue;
    const name = classes[row] ?? "";
    const index = name === "" ? -1 : drawing.classIndex(name);
    const on = by.get(index) ?? fresh();
    by.set(index, on);
    for (const { points, data, of } of columns) {
      const y = points.y[row] ?? NaN;
      if (!Number.isFinite(y)) gap(on);
      else stand(on, points.x[row] ?? NaN, y, points.sigmaY[row] ?? null, [data, row, of], drawing.frame.logY);
    }
    gap(on);
  }
  return Array.from(by, ([index, on]) => tracesOf(on, index, drawing, first.joined !== false, false)).flat();
}

function tracesOf(on: Through, index: number, drawing: Drawing, isJoined: boolean, isMean: boolean): Data[] {
  const look = looks(index, drawing.palette);
  const { projector } = drawing;
  return [
    ...(isJoined
      ? [
          {
            ...silent,
            type: "scatter",
            mode: "lines",
            x: on.x,
            y: on.y,
            connectgaps: false,
            line: { color: isMean ? look.line : washOf(look.line, 0.7), width: isMean ? 1.8 : 1 },
          } as Data,
        ]
      : []),
    { ...silent, type: "scatter", mode: "lines", x: on.bars.x, y: on.bars.y, line: { color: look.line, width: 1 } },
    {
      ...quiet,
      type: "scatter",
      mode: "markers",
      x: on.marks.x,
      y: on.marks.y,
      customdata: on.marks.custom as never,
      marker: { symbol: look.symbol, size: projector ? 11 : isMean ? 8.5 : 6.5, color: look.fill, line: { color: look.line, width: 1 } },
    },
  ];
}

function meansThrough(layer: Means, drawing: Drawing): Data[] {
  return layer.classes.flatMap(({ name, points }) => {
    const on = fresh();
    for (const p of points) stand(on, p.x, p.y, p.sigmaY, [`mean ${name}`, -1, p.of], drawing.frame.logY);
    return tracesOf(on, name === "" ? -1 : drawing.classIndex(name), drawing, true, true);
  });
}

/** Lines of bodies differ by their dashes, since ink is the colour of all. */
const dashes: readonly Dash[] = ["solid", "8px,3px" as Dash, "2px,2px" as Dash, "8px,3px,2px,3px" as Dash];

function bodiesThrough(layer: Bodies, drawing: Drawing, nth: number): Data[] {
  const { ink } = drawing.palette;
  return linesOfBodies(layer).flatMap(([, points], i): Data[] => {
    const on = fresh();
    for (const p of points) stand(on, p.x, p.y, p.sigmaY, [`body ${p.name}`, -1, p.of], drawing.frame.logY);
    const dash = dashes[(nth + i) % dashes.length] ?? "solid";
    return [
      { ...silent, type: "scatter", mode: "lines", x: on.x, y: on.y, line: { color: ink, width: 1.4, dash } },
      { ...silent, type: "scatter", mode: "lines", x: on.bars.x, y: on.bars.y, line: { color: ink, width: 1 } },
      {
        ...quiet,
        type: "scatter",
        mode: "markers",
        x: on.marks.x,
        y: on.marks.y,
        customdata: on.marks.custom as never,
        marker: { symbol: "cross-thin", size: 9, color: ink, line: { color: ink, width: 1.6 } },
      },
    ];
  });
}

/** A body's marks, from the left. */
export function linesOfBodies(layer: Bodies): (readonly [body: string, points: Bodies["bodies"]])[] {
  const names = [...new Set(layer.bodies.map((b) => b.body ?? b.name))];
  return names.map((name) => [name, layer.bodies.filter((b) => (b.body ?? b.name) === name)] as const);
}

/** A pattern, line by line of its list: a hairline at 1, where the normalising body would lie, then what runs through the columns. */
export function patternTraces(layers: readonly PlotLayer[], drawing: Drawing): Data[] {
  const { frame, palette } = drawing;
  const traces: Data[] = [
    { ...silent, type: "scatter", mode: "lines", x: [frame.view.x[0], frame.view.x[1]], y: [1, 1], line: { color: palette.axis, width: 1 } },
  ];
  const isAscending = frame.view.x[0] < frame.view.x[1];
  const done = new Set<number>();
  let bodies = 0;
  for (const layer of layers) {
    if (layer.what === "samples" && !done.has(layer.drawn)) {
      done.add(layer.drawn);
      traces.push(...samplesThrough(layers, layer.drawn, drawing));
    } else if (layer.what === "means") traces.push(...meansThrough(layer, drawing));
    else if (layer.what === "bodies") {
      const sorted = [...layer.bodies].sort((a, b) => (isAscending ? a.x - b.x : b.x - a.x));
      const ordered = { ...layer, bodies: sorted };
      traces.push(...bodiesThrough(ordered, drawing, bodies));
      bodies += linesOfBodies(layer).length;
    }
  }
  return traces;
}
