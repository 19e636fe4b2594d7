"use client";

// First: Plotly looks for these when it is loaded.
import "./plotlyStyles";
import plotly from "plotly.js-dist-min";
import { useMemo, useRef, useState } from "react";
import createPlotlyComponent from "react-plotly.js/factory";
import { ON_DATA, type Note } from "./annotations";
import { CloudCanvas } from "./cloud/CloudCanvas";
import type { CloudView } from "./cloud/cloud";
import { insideOutline, nearestInCloud, type Found, type Outline } from "./cloud/findInCloud";
import type { Painting } from "./cloud/paintCloud";
import type { Figure } from "./figure";
import { plotFrame, type ViewRange } from "./frame";
import type { PointRef } from "./traces";

const Plotly = createPlotlyComponent(plotly);

/** Pixels that the pointer moves at least in a drag; less is a click. */
const DRAGGED = 4;

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

interface Ends {
  readonly x?: readonly number[];
  readonly y?: readonly number[];
}

interface Selected {
  readonly points?: readonly EventPoint[];
  readonly range?: Ends;
  readonly lassoPoints?: Ends;
}

/** What was dragged over, in the data's own numbers; null where Plotly only repeats an old selection. */
function outlineOf({ range, lassoPoints }: Selected): Outline | null {
  if (lassoPoints?.x !== undefined && lassoPoints.y !== undefined) return { corners: { x: lassoPoints.x, y: lassoPoints.y } };
  const [x0, x1] = range?.x ?? [];
  const [y0, y1] = range?.y ?? [];
  return x0 === undefined || x1 === undefined || y0 === undefined || y1 === undefined ? null : { box: { x: [x0, x1], y: [y0, y1] } };
}

function refOf(point: EventPoint | undefined): PointRef | null {
  const custom = point?.customdata;
  if (!Array.isArray(custom)) return null;
  const [data, index, of] = custom as unknown[];
  if (typeof data !== "string" || typeof index !== "number") return null;
  return typeof of === "string" ? { data, index, of } : { data, index };
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
  const painting = useRef<Painting | null>(null);
  const isOverTrace = useRef(false);
  const [moved, setMoved] = useState<{ readonly of: CloudView; readonly view: CloudView } | null>(null);
  const pickAll = (event: Selected | undefined): void => {
    // Plotly says "selected" again whenever it redraws; only a drag of the pointer has a range or an outline.
    const outline = event === undefined ? null : outlineOf(event);
    if (event === undefined || outline === null) return;
    const drawn = (event.points ?? []).map(refOf).filter((ref): ref is PointRef => ref !== null && ref.index >= 0);
    onPick(figure.cloud === null ? drawn : [...drawn, ...insideOutline(figure.cloud.clouds, outline)], false);
    // The outline has done its work: what is picked is marked by rings.
    if (graph.current !== null) void plotly.relayout(graph.current, { selections: [] });
  };
  const plot = (
    <Plotly
      data={figure.data}
      layout={figure.layout}
      config={config}
      onHover={(event: { points?: readonly EventPoint[] }) => {
        const point = event.points?.[0];
        const ref = refOf(point);
        const box = point?.bbox;
        isOverTrace.current = ref !== null;
        onHover(ref === null || box === undefined ? null : { ref, x: (box.x0 + box.x1) / 2, y: (box.y0 + box.y1) / 2 });
      }}
      onUnhover={() => {
        isOverTrace.current = false;
        onHover(null);
      }}
      onClick={(event: { points?: readonly EventPoint[]; event?: MouseEvent }) => {
        const ref = refOf(event.points?.[0]);
        if (ref !== null && ref.index >= 0) onPick([ref], event.event?.shiftKey === true);
      }}
      onInitialized={(_: unknown, made: HTMLElement) => {
        graph.current = made;
      }}
      onSelected={pickAll}
      onRelayouting={(update: Readonly<Record<string, unknown>>) => {
        const x = rangeOf(update, "xaxis");
        const y = rangeOf(update, "yaxis");
        showWordsOnData(graph.current, figure, false);
        if (figure.cloud !== null && x !== null && y !== null) setMoved({ of: figure.cloud, view: movedTo(figure.cloud, { x, y }) });
      }}
      onRelayout={(update: Readonly<Record<string, unknown>>) => {
        showWordsOnData(graph.current, figure, true);
        const x = rangeOf(update, "xaxis");
        const y = rangeOf(update, "yaxis");
        if (x !== null && y !== null) onView({ x, y });
        else if (update["xaxis.autorange"] === true || update["yaxis.autorange"] === true) onView(null);
      }}
    />
  );
  // What the pointer was on when a drag began says nothing of what is being dragged over.
  const onDragStart = ({ clientX, clientY }: { readonly clientX: number; readonly clientY: number }): void => {
    const onMove = (move: PointerEvent): void => {
      if (Math.hypot(move.clientX - clientX, move.clientY - clientY) < DRAGGED) return;
      isOverTrace.current = false;
      onHover(null);
      onEnd();
    };
    const onEnd = (): void => {
      window.removeEventListener("pointermove", onMove);
      window.removeEventListener("pointerup", onEnd);
    };
    window.addEventListener("pointermove", onMove);
    window.addEventListener("pointerup", onEnd);
  };
  if (figure.cloud === null) return <div onPointerDownCapture={onDragStart}>{plot}</div>;
  const { clouds } = figure.cloud;
  const foundAt = (event: { readonly clientX: number; readonly clientY: number; readonly currentTarget: Element }): Found | null => {
    const box = event.currentTarget.getBoundingClientRect();
    return painting.current === null ? null : nearestInCloud(painting.current, clouds, event.clientX - box.left, event.clientY - box.top);
  };
  return (
    <div
      className="relative"
      onPointerMove={(event) => {
        if (!isOverTrace.current && event.buttons === 0) onHover(foundAt(event));
      }}
      onPointerLeave={() => onHover(null)}
      onPointerDownCapture={(event) => {
        onDragStart(event);
        const found = isOverTrace.current ? null : foundAt(event);
        if (found === null) return;
        const { clientX, clientY } = event;
        // Plotly covers the page while a button is down, so that its end comes to the window alone.
        const onUp = (up: PointerEvent): void => {
          if (Math.hypot(up.clientX - clientX, up.clientY - clientY) < DRAGGED) onPick([found.ref], up.shiftKey);
        };
        window.addEventListener("pointerup", onUp, { once: true });
      }}
    >
      <CloudCanvas view={moved?.of === figure.cloud ? moved.view : figure.cloud} painting={painting} />
      <div className="relative">{plot}</div>
    </div>
  );
}

/** Hides what is written beside data while the data moves away from under it. Axes keep their words. */
function showWordsOnData(graph: HTMLElement | null, { layout }: Figure, isShown: boolean): void {
  for (const note of graph?.querySelectorAll<SVGElement>(".infolayer .annotation") ?? [])
    if ((layout.annotations?.[Number(note.dataset["index"])] as Note | undefined)?.name === ON_DATA) note.style.visibility = isShown ? "" : "hidden";
}

/** The same clouds while the axes are being dragged. */
function movedTo(cloud: CloudView, view: ViewRange): CloudView {
  const { frame } = cloud;
  return { ...cloud, frame: plotFrame(frame.width, frame.height, view, frame.logX, frame.logY, frame.margin) };
}
