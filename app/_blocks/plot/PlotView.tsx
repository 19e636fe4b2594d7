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
import { changeEntry } from "@/app/_blocks/shared/entries";
import { AnnotationHandles, placeAt } from "./AnnotationHandles";
import { ClassKey } from "./ClassKey";
import { DrawnList } from "./DrawnList";
import { buildFigure, type DragMode } from "./figure";
import type { ViewRange } from "./frame";
import { heightFor, layOutPlot } from "./layOutPlot";
import { ExportButton } from "./export/ExportButton";
import type { Hovered } from "./PlotCanvas";
import { PlotHover } from "./PlotHover";
import { PlotSettings } from "./PlotSettings";
import { mostEllipses, plotInWords } from "./plotWords";
import { PointsTable } from "./PointsTable";
import type { PointRef } from "./traces";

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

/** A plot: the drawing, the list of what is drawn, the key of classes, and the same as a table. */
export function PlotView({ blockKey, block, view }: BlockViewProps<PlotBlock>) {
  const [box, size] = useSize<HTMLDivElement>();
  const palette = usePalette();
  const result = resultOf(view.results, block.id, "plot");
  const [hovered, setHovered] = useState<Hovered | null>(null);
  const [dragMode, setDragMode] = useState<DragMode>(view.mode === "frozen" ? "zoom" : "select");
  const [showsTable, setTable] = useState(false);
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
  const laid = useMemo(
    () =>
      result === undefined || width === 0
        ? null
        : layOutPlot(block, result, { width, height: heightFor(result.plot, width) }, closeUp, (name) => view.classIndex(name)),
    [result, width, closeUp, block, view],
  );
  const figure = useMemo(() => {
    if (laid === null) return null;
    const classIndex = (name: string): number => view.classIndex(name);
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
  }, [laid, block, view, palette, pickedIn, pickedByOthers, dragMode]);

  const samples = result?.layers.reduce((most, layer) => (layer.what === "samples" ? Math.max(most, layer.points.x.length) : most), 0) ?? 0;

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
  const edits = view.mode === "edit" ? view.edits : null;
  const moveAnnotation = (index: number, x: number, y: number): void => {
    const shown = block.drawn[index];
    if (edits !== null && shown !== undefined && "annotation" in shown) changeEntry(edits, blockKey, "drawn", index, shown, { ...shown, x, y });
  };
  const errors = (result?.problems ?? []).filter((p) => p.severity === "error");
  const warnings = (result?.problems ?? []).filter((p) => p.severity === "warning");
  // A new annotation stands in the middle of what is seen.
  const middle =
    laid === null
      ? undefined
      : placeAt(
          laid.frame,
          block.plot,
          (laid.frame.margin.l + laid.frame.width - laid.frame.margin.r) / 2,
          (laid.frame.margin.t + laid.frame.height - laid.frame.margin.b) / 2,
        );
  const isNarrow = block.width === 4 || block.width === 6;
  return (
    <div className={isNarrow ? "min-w-0" : "grid min-w-0 grid-cols-[minmax(0,1fr)] gap-x-6 lg:grid-cols-[minmax(0,1fr)_232px]"}>
      <div className="min-w-0">
        <div ref={box} className="relative overflow-hidden" style={{ height: width === 0 ? 360 : heightFor(block.plot, width) }}>
          <div role="img" aria-label={result === undefined ? "Plot, not calculated yet" : plotInWords(result)} className="h-full">
            {figure !== null && <PlotCanvas figure={figure} onHover={setHovered} onPick={onPick} onView={setCloseUp} />}
            {figure === null && <p className="p-3 text-second">{view.results === null ? "Calculating for the first time." : "Nothing to draw yet."}</p>}
            {hovered !== null && result !== undefined && <PlotHover hovered={hovered} result={result} view={view} width={width} />}
          </div>
          {laid !== null && edits !== null && <AnnotationHandles result={laid.result} frame={laid.frame} onMove={moveAnnotation} />}
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
          {result !== undefined && <ExportButton block={block} result={result} view={view} />}
          {samples > mostEllipses && (
            <span className="text-second">
              More than {mostEllipses} samples:{" "}
              {block.plot === "pattern" ? "lines of single samples are left off; draw the means of classes" : "drawn as points, without ellipses"}.
            </span>
          )}
        </div>
        {errors.map((p, index) => (
          <p key={index} className="mt-2 text-vermilion">
            {p.text}
          </p>
        ))}
        {warnings.map((p, index) => (
          <p key={index} className="mt-2 text-margin text-second">
            {p.text}
          </p>
        ))}
        {block.drawn.length === 0 && (
          <p className="mt-2 text-second">
            {view.mode === "edit" ? "Nothing is drawn yet. Choose “Draw more” and begin with samples." : "Nothing is drawn here."}
          </p>
        )}
        {result !== undefined && (
          <details className="mt-2" onToggle={(event) => setTable(event.currentTarget.open)}>
            <summary className="cursor-pointer text-margin font-medium text-indigo">The same as a table</summary>
            {showsTable && <PointsTable result={result} view={view} />}
          </details>
        )}
      </div>
      <div className="min-w-0">
        <DrawnList blockKey={blockKey} block={block} result={result} view={view} middle={middle} />
        {result !== undefined && <ClassKey result={result} view={view} />}
        {view.mode === "edit" && view.edits !== null && <PlotSettings blockKey={blockKey} block={block} result={result} edits={view.edits} />}
      </div>
    </div>
  );
}
