"use client";

// First: Plotly looks for these when it is loaded.
import "./plotlyStyles";
import plotly from "plotly.js-dist-min";
import { useMemo, useRef } from "react";
import createPlotlyComponent from "react-plotly.js/factory";
import type { Figure } from "./figure";
import type { PointRef } from "./traces";

const Plotly = createPlotlyComponent(plotly);

/** What is under the pointer, and where on the drawing. */
export interface Hovered {
  readonly ref: PointRef;
  readonly x: number;
  readonly y: number;
}

export interface PlotCanvasProps {
  readonly figure: Figure;
  onHover(hovered: Hovered | null): void;
  onPick(points: readonly PointRef[], adds: boolean): void;
  /** Ends of the axes after moving or enlarging, as Plotly has them; null for the whole view. */
  onView(view: { readonly x: readonly [number, number]; readonly y: readonly [number, number] } | null): void;
}

interface EventPoint {
  readonly customdata?: unknown;
  readonly x?: unknown;
  readonly y?: unknown;
  readonly bbox?: { readonly x0: number; readonly x1: number; readonly y0: number; readonly y1: number };
}

interface Selected {
  readonly points?: readonly EventPoint[];
  readonly range?: unknown;
  readonly lassoPoints?: unknown;
}

function refOf(point: EventPoint | undefined): PointRef | null {
  const custom = point?.customdata;
  if (!Array.isArray(custom)) return null;
  const [data, index] = custom as unknown[];
  return typeof data === "string" && typeof index === "number" ? { data, index } : null;
}

/** What Plotly tells of an axis after a drag: its two ends, or that it is to be whole again. */
function rangeOf(update: Readonly<Record<string, unknown>>, axis: "xaxis" | "yaxis"): readonly [number, number] | null {
  const from = update[`${axis}.range[0]`];
  const to = update[`${axis}.range[1]`];
  return typeof from === "number" && typeof to === "number" ? [from, to] : null;
}

/** Plotly's drawing surface: no modebar, no scrolling into it, no default look. In a chunk of its own that only a page with a plot fetches. */
export function PlotCanvas({ figure, onHover, onPick, onView }: PlotCanvasProps) {
  const config = useMemo(
    () => ({ displayModeBar: false, displaylogo: false, scrollZoom: false, staticPlot: false, doubleClick: "reset", showTips: false, responsive: false }),
    [],
  );
  const graph = useRef<HTMLElement | null>(null);
  const pickAll = (event: Selected | undefined): void => {
    // Plotly says "selected" again whenever it redraws; only a drag of the pointer has a range or an outline.
    if (event?.points === undefined || (event.range === undefined && event.lassoPoints === undefined)) return;
    onPick(
      event.points.map(refOf).filter((ref): ref is PointRef => ref !== null && ref.index >= 0),
      false,
    );
    // The outline has done its work: what is picked is marked by rings.
    if (graph.current !== null) void plotly.relayout(graph.current, { selections: [] });
  };
  return (
    <Plotly
      data={figure.data}
      layout={figure.layout}
      config={config}
      onHover={(event: { points?: readonly EventPoint[] }) => {
        const point = event.points?.[0];
        const ref = refOf(point);
        const box = point?.bbox;
        onHover(ref === null || box === undefined ? null : { ref, x: (box.x0 + box.x1) / 2, y: (box.y0 + box.y1) / 2 });
      }}
      onUnhover={() => onHover(null)}
      onClick={(event: { points?: readonly EventPoint[]; event?: MouseEvent }) => {
        const ref = refOf(event.points?.[0]);
        if (ref !== null && ref.index >= 0) onPick([ref], event.event?.shiftKey === true);
      }}
      onInitialized={(_: unknown, made: HTMLElement) => {
        graph.current = made;
      }}
      onSelected={pickAll}
      onRelayout={(update: Readonly<Record<string, unknown>>) => {
        const x = rangeOf(update, "xaxis");
        const y = rangeOf(update, "yaxis");
        if (x !== null && y !== null) onView({ x, y });
        else if (update["xaxis.autorange"] === true || update["yaxis.autorange"] === true) onView(null);
      }}
    />
  );
}
