import type { Data, Layout, LayoutAxis } from "plotly.js";
import { tickDecimals, tickStep } from "@/app/_blocks/shared/scale";
import type { PageResults, PlotBlock, PlotLayer, PlotResult } from "@/cells";
import { buildAnnotations } from "./annotations";
import type { Range } from "./frame";
import { cloudOf, isCloud, type CloudView } from "./cloud/cloud";
import { missesOf } from "./misses";
import { logTicks } from "./axisTicks";
import { patternTraces } from "./patternTraces";
import { axisInWords } from "./plotWords";
import { ternaryTraces } from "./ternaryTraces";
import { bodiesTraces, crossingTraces, missTraces, pathTraces, pickedTraces, samplesTraces, trendTraces, type Drawing } from "./traces";

export interface Figure {
  readonly data: Data[];
  readonly layout: Partial<Layout>;
  /** Samples too many for Plotly, painted under it; null where there are none. */
  readonly cloud: CloudView | null;
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
    case "means":
      return [];
  }
}

/** A framed axis with ticks inside on all four sides, figures outside, no grid and no zero line. */
function axis(range: Range, log: boolean, pixels: number, drawing: Drawing): Partial<LayoutAxis> {
  const { palette } = drawing;
  const most = Math.max(2, Math.floor(pixels / 64));
  const step = tickStep(Math.abs(range[1] - range[0]), most);
  const figures = log ? logTicks(range, most) : null;
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
    ...(figures !== null
      ? { tickmode: "array", tickvals: figures.major.map((tick) => tick.at), ticktext: figures.major.map((tick) => tick.text) }
      : { dtick: step, tick0: 0, tickformat: `.${tickDecimals(step)}f` }),
    tickfont: { family: '"IBM Plex Sans", "Helvetica Neue", Arial, sans-serif', size: drawing.projector ? 14 : 11, color: palette.second },
    minor: {
      ticks: "inside",
      ticklen: 3,
      tickwidth: 0.7,
      tickcolor: palette.ink,
      ...(figures !== null
        ? { tickmode: "array", tickvals: [...figures.minor] }
        : { dtick: step / (String(step / 10 ** Math.floor(Math.log10(step))).startsWith("5") ? 5 : 4) }),
    },
    fixedrange: false,
    automargin: false,
  } as Partial<LayoutAxis>;
}

/** Rows of a distribution in place of figures. */
function rowTicks(rows: readonly string[]): Partial<LayoutAxis> {
  return { tickmode: "array", tickvals: rows.map((_, i) => i), ticktext: [...rows], ticks: "", minor: {} } as Partial<LayoutAxis>;
}

/** Elements in place of figures: what is written under them stands with the other words. */
function columnTicks(columns: PlotResult["columns"]): Partial<LayoutAxis> {
  return { tickmode: "array", tickvals: (columns ?? []).map(({ x }) => x), showticklabels: false, minor: {} } as Partial<LayoutAxis>;
}

/** A triangle has its own axes. */
const noAxis: Partial<LayoutAxis> = { visible: false, mirror: false };

/** A mark that nobody sees, in the corner of the view. */
function cornerTrace({ view, logX, logY }: Drawing["frame"]): Data[] {
  const at = (end: number, log: boolean): number => (log ? 10 ** end : end);
  return [
    { type: "scatter", mode: "markers", x: [at(view.x[0], logX)], y: [at(view.y[0], logY)], marker: { opacity: 0 }, hoverinfo: "skip", showlegend: false },
  ];
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
  const isPattern = result.plot === "pattern";
  const data = isPattern ? patternTraces(layers, drawing) : layers.flatMap((layer) => tracesOf(layer, drawing));
  if (result.plot === "ternary") data.unshift(...ternaryTraces(drawing));
  data.push(...missTraces(missesOf(layers, results), drawing));
  for (const layer of layers) if (layer.what === "samples") data.push(...pickedTraces(layer, drawing));
  // Without a trace of its own Plotly neither draws axes nor lets anybody drag a box.
  if (data.length === 0) data.push(...cornerTrace(frame));
  const clouds = isPattern ? [] : layers.flatMap((layer) => (layer.what === "samples" && isCloud(layer) ? [cloudOf(layer, drawing)] : []));
  const axes = { x: axisInWords(result.x, block.xAxis?.label), y: rows === null ? axisInWords(result.y, block.yAxis?.label) : "" };
  return {
    data,
    cloud: clouds.length === 0 ? null : { clouds, frame, paper: palette.paper },
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
      xaxis: {
        ...axis(frame.view.x, frame.logX, frame.width - frame.margin.l - frame.margin.r, drawing),
        ...(isPattern ? columnTicks(result.columns) : {}),
        ...(result.plot === "ternary" ? noAxis : {}),
      },
      yaxis: {
        ...axis(frame.view.y, frame.logY, frame.height - frame.margin.t - frame.margin.b, drawing),
        ...(rows === null ? {} : rowTicks(rows)),
        ...(result.plot === "ternary" ? noAxis : {}),
      },
      annotations: buildAnnotations({ ...result, layers }, axes, nameOf, drawing, results),
      newselection: { line: { color: palette.indigo, width: 1, dash: "solid" } },
      activeselection: { fillcolor: palette.indigo, opacity: 0.06 },
      selections: [],
    } as Partial<Layout>,
  };
}
