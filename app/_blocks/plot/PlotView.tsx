"use client";

import dynamic from "next/dynamic";
import { useCallback, useMemo, useState } from "react";
import type { BlockViewProps } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { useSize } from "@/app/_ui/useSize";
import { originsOf, pickedIndices } from "@/app/_blocks/shared/picks";
import { resultOf, tableOf } from "@/app/_blocks/shared/tableOf";
import { usePalette } from "@/app/_blocks/shared/usePalette";
import type { PlotBlock } from "@/cells";
import { ClassKey } from "./ClassKey";
import { DrawnList } from "./DrawnList";
import { buildFigure, type DragMode } from "./figure";
import type { ViewRange } from "./frame";
import { heightFor, layOutPlot } from "./layOutPlot";
import type { Hovered } from "./PlotCanvas";
import { PlotHover } from "./PlotHover";
import { PlotSettings } from "./PlotSettings";
import { mostEllipses, plotInWords } from "./plotWords";
import { PointsTable } from "./PointsTable";
import type { PointRef } from "./traces";
import { useSettled } from "./useSettled";

export { stateInWords } from "./plotWords";

const PlotCanvas = dynamic(() => import("./PlotCanvas").then((module) => module.PlotCanvas), {
  ssr: false,
  loading: () => <p className="p-3 text-second">Fetching the drawing surface.</p>,
});

const drags: readonly { readonly mode: DragMode; readonly label: string }[] = [
  { mode: "select", label: "Pick in a box" },
  { mode: "lasso", label: "Pick freehand" },
  { mode: "pan", label: "Move" },
  { mode: "zoom", label: "Enlarge" },
];

/** From so many samples on, a plot is drawn again only when what it shows has stood still for a moment. */
const manySamples = 2000;

/** A plot: the drawing, the list of what is drawn, the key of classes, and the same as a table. */
export function PlotView({ blockKey, block, view }: BlockViewProps<PlotBlock>) {
  const [box, size] = useSize<HTMLDivElement>();
  const palette = usePalette();
  const result = resultOf(view.results, block.id, "plot");
  const [hovered, setHovered] = useState<Hovered | null>(null);
  const [dragMode, setDragMode] = useState<DragMode>(view.mode === "frozen" ? "zoom" : "select");
  const [closeUp, setCloseUp] = useState<ViewRange | null>(null);

  const pickedIn = useCallback((data: string) => pickedIndices(tableOf(view.results, data), view.picked), [view]);
  const pickedByOthers = useCallback(
    (data: string) =>
      view.mode === "frozen"
        ? []
        : view.present
            .filter((p) => !p.isMe && p.picked.length > 0)
            .map((p) => ({ color: p.color, rows: pickedIndices(tableOf(view.results, data), p.picked) })),
    [view],
  );
  const width = Math.floor(size.width);
  const figure = useMemo(() => {
    if (result === undefined || width === 0) return null;
    const classIndex = (name: string): number => view.classIndex(name);
    const laid = layOutPlot(block, result, { width, height: heightFor(result.plot, width) }, closeUp, classIndex);
    const nameOf = (handle: string): string => view.blocks.find((b) => b.block.id === handle)?.block.name ?? handle;
    return buildFigure(
      block,
      laid.result,
      nameOf,
      { palette, frame: laid.frame, projector: view.settings.projector, classIndex, pickedIn, pickedByOthers },
      view.results,
      dragMode,
      laid.rows,
    );
  }, [result, width, closeUp, block, view, palette, pickedIn, pickedByOthers, dragMode]);

  const samples = result?.layers.reduce((most, layer) => (layer.what === "samples" ? Math.max(most, layer.points.x.length) : most), 0) ?? 0;
  const drawn = useSettled(figure, samples > manySamples ? 200 : 0);

  const onPick = useCallback(
    (points: readonly PointRef[], adds: boolean) => {
      if (view.mode === "frozen") return;
      const rows = points.flatMap((point) => {
        const table = tableOf(view.results, point.data);
        return table === undefined ? [] : originsOf(table, [point.index]);
      });
      view.pick(adds ? [...view.picked, ...rows] : rows);
    },
    [view],
  );
  const errors = (result?.problems ?? []).filter((p) => p.severity === "error");
  const isNarrow = block.width === 4 || block.width === 6;
  return (
    <div className={isNarrow ? "min-w-0" : "grid min-w-0 grid-cols-[minmax(0,1fr)] gap-x-6 lg:grid-cols-[minmax(0,1fr)_232px]"}>
      <div className="min-w-0">
        <div
          ref={box}
          role="img"
          aria-label={result === undefined ? "Plot, not calculated yet" : plotInWords(result)}
          className="relative overflow-hidden"
          style={{ height: width === 0 ? 360 : heightFor(block.plot, width) }}
        >
          {drawn !== null && <PlotCanvas figure={drawn} onHover={setHovered} onPick={onPick} onView={setCloseUp} />}
          {hovered !== null && result !== undefined && <PlotHover hovered={hovered} result={result} view={view} width={width} />}
          {figure === null && <p className="p-3 text-second">{view.results === null ? "Calculating for the first time." : "Nothing to draw yet."}</p>}
        </div>
        <div className="mt-1 flex flex-wrap items-baseline gap-x-4 gap-y-1 text-margin" role="group" aria-label="What dragging on the plot does">
          {drags
            .filter(({ mode }) => view.mode !== "frozen" || mode === "pan" || mode === "zoom")
            .map(({ mode, label }) => (
              <Button
                key={mode}
                look={dragMode === mode ? "plain" : "quiet"}
                aria-pressed={dragMode === mode}
                className={dragMode === mode ? "border-b border-ink" : ""}
                onClick={() => setDragMode(mode)}
              >
                {label}
              </Button>
            ))}
          {closeUp !== null && <Button onClick={() => setCloseUp(null)}>Whole view</Button>}
          {samples > mostEllipses && <span className="text-second">More than {mostEllipses} samples: drawn without ellipses.</span>}
        </div>
        {errors.map((p, index) => (
          <p key={index} className="mt-2 text-vermilion">
            {p.text}
          </p>
        ))}
        {block.drawn.length === 0 && (
          <p className="mt-2 text-second">
            {view.mode === "edit" ? "Nothing is drawn yet. Choose “Draw more” and begin with samples." : "Nothing is drawn here."}
          </p>
        )}
        {result !== undefined && (
          <details className="mt-2">
            <summary className="cursor-pointer text-margin font-medium text-indigo">The same as a table</summary>
            <PointsTable result={result} view={view} />
          </details>
        )}
      </div>
      <div className="min-w-0">
        <DrawnList blockKey={blockKey} block={block} result={result} view={view} />
        {result !== undefined && <ClassKey result={result} view={view} />}
        {view.mode === "edit" && view.edits !== null && <PlotSettings blockKey={blockKey} block={block} edits={view.edits} />}
      </div>
    </div>
  );
}
