import type { Data, Layout, LayoutAxis } from "plotly.js";
import { tickDecimals, tickStep } from "@/app/_blocks/shared/scale";
import type { PageResults, PlotBlock, PlotLayer, PlotResult } from "@/cells";
import { buildAnnotations } from "./annotations";
import type { Range } from "./frame";
import { missesOf } from "./misses";
import { axisInWords } from "./plotWords";
import { bodiesTraces, carriedOn, crossingTraces, missTraces, pathTraces, pickedTraces, samplesTraces, trendTraces, type Drawing } from "./traces";

export interface Figure {
  readonly data: Data[];
  readonly layout: Partial<Layout>;
}

/** How the pointer's drag is read. */
export type DragMode = "select" | "lasso" | "pan" | "zoom";

function tracesOf(layer: PlotLayer, drawing: Drawing): Data[] {
  switch (layer.what) {
    case "samples":
      return samplesTraces(layer, drawing);
    case "trend":
      return trendTraces(layer, drawing);
    case "crossing":
      return crossingTraces(layer, drawing);
    case "bodies":
      return bodiesTraces(layer, drawing);
    case "path":
      return pathTraces(layer, drawing);
    case "annotation":
      return [];
  }
}

/** A framed axis with ticks inside on all four sides, figures outside, no grid and no zero line. */
function axis(range: Range, log: boolean, pixels: number, drawing: Drawing): Partial<LayoutAxis> {
  const { palette } = drawing;
  const step = tickStep(range[1] - range[0], Math.max(2, Math.floor(pixels / 64)));
  return {
    range: [range[0], range[1]],
    type: log ? "log" : "linear",
    showgrid: false,
    zeroline: false,
    showline: true,
    mirror: "allticks",
    linecolor: palette.ink,
    linewidth: 1,
    ticks: "inside",
    ticklen: 6,
    tickwidth: 1,
    tickcolor: palette.ink,
    ...(log ? {} : { dtick: step, tick0: 0, tickformat: `.${tickDecimals(step)}f` }),
    tickfont: { family: '"IBM Plex Sans", "Helvetica Neue", Arial, sans-serif', size: drawing.projector ? 14 : 11, color: palette.second },
    minor: {
      ticks: "inside",
      ticklen: 3,
      tickwidth: 0.7,
      tickcolor: palette.ink,
      ...(log ? {} : { dtick: step / (String(step / 10 ** Math.floor(Math.log10(step))).startsWith("5") ? 5 : 4) }),
    },
    fixedrange: false,
    automargin: false,
  } as Partial<LayoutAxis>;
}

/** Rows of a distribution in place of figures. */
function rowTicks(rows: readonly string[]): Partial<LayoutAxis> {
  return { tickmode: "array", tickvals: rows.map((_, i) => i), ticktext: [...rows], ticks: "", minor: {} } as Partial<LayoutAxis>;
}

/** The card knows dashes by name only. */
function onGraphicsCard(trace: Data): void {
  trace.type = "scattergl";
  if ("line" in trace && trace.line !== undefined && "dash" in trace.line && trace.line.dash === carriedOn) trace.line.dash = "dash";
}

/** A plot as Plotly takes it: the layers bottom first, picks on top, all words as annotations. */
export function buildFigure(
  block: PlotBlock,
  result: PlotResult,
  nameOf: (handle: string) => string,
  drawing: Drawing,
  results: PageResults | null,
  dragmode: DragMode,
  rows: readonly string[] | null = null,
): Figure {
  const { frame, palette } = drawing;
  const layers = result.layers.filter((layer) => block.drawn[layer.drawn]?.hidden !== true);
  const data = layers.flatMap((layer) => tracesOf(layer, drawing));
  data.push(...missTraces(missesOf(layers, results), drawing));
  for (const layer of layers) if (layer.what === "samples") data.push(...pickedTraces(layer, drawing));
  // The graphics card's layer lies over the vectors: with any of it, everything is drawn on it, so that the order holds.
  if (data.some((trace) => trace.type === "scattergl")) for (const trace of data) onGraphicsCard(trace);
  const axes = { x: axisInWords(result.x, block.xAxis?.label), y: rows === null ? axisInWords(result.y, block.yAxis?.label) : "" };
  return {
    data,
    layout: {
      width: frame.width,
      height: frame.height,
      margin: { ...frame.margin, pad: 0 },
      paper_bgcolor: "rgba(0,0,0,0)",
      plot_bgcolor: "rgba(0,0,0,0)",
      showlegend: false,
      hovermode: "closest",
      hoverdistance: 12,
      dragmode,
      font: { family: '"IBM Plex Sans", "Helvetica Neue", Arial, sans-serif', color: palette.ink, size: 12 },
      xaxis: axis(frame.view.x, frame.logX, frame.width - frame.margin.l - frame.margin.r, drawing),
      yaxis: { ...axis(frame.view.y, frame.logY, frame.height - frame.margin.t - frame.margin.b, drawing), ...(rows === null ? {} : rowTicks(rows)) },
      annotations: buildAnnotations(layers, axes, nameOf, drawing, results),
      newselection: { line: { color: palette.indigo, width: 1, dash: "solid" } },
      activeselection: { fillcolor: palette.indigo, opacity: 0.06 },
      selections: [],
    } as Partial<Layout>,
  };
}
