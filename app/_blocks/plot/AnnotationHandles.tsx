"use client";

import { useState, type KeyboardEvent, type PointerEvent } from "react";
import { classNames } from "@/app/_ui/classNames";
import type { PlotLayer, PlotResult } from "@/cells";
import { annotationBox } from "./annotations";
import type { Frame } from "./frame";
import { sharesAt } from "./ternary";

type Words = Extract<PlotLayer, { what: "annotation" }>;

export interface AnnotationHandlesProps {
  /** As it is laid out, in the places of `frame`. */
  readonly result: PlotResult;
  readonly frame: Frame;
  /** A new place, as the block has places. */
  onMove(drawn: number, x: number, y: number): void;
}

/** Pixels that an arrow key moves by; with Shift the larger. */
const step = 2;
const leap = 20;

/** To as many places as a tenth of a pixel is worth, so that the block's numbers stay readable. */
function rounded(value: number, perPixel: number): number {
  if (!(perPixel > 0) || !Number.isFinite(value)) return value;
  const decimals = Math.max(0, Math.min(12, Math.ceil(-Math.log10(perPixel / 2))));
  return Number(value.toFixed(decimals));
}

/** Where something laid at a pixel stands in the block's own numbers. */
export function placeAt(frame: Frame, plot: PlotResult["plot"], px: number, py: number): { readonly x: number; readonly y: number } {
  const at = (a: number, b: number): readonly [number, number] => (plot === "ternary" ? sharesAt(frame.xAt(a), frame.yAt(b)) : [frame.xAt(a), frame.yAt(b)]);
  const [x, y] = at(px, py);
  const [nextX, nextY] = at(px + 1, py + 1);
  return { x: rounded(x, Math.abs(nextX - x)), y: rounded(y, Math.abs(nextY - y)) };
}

/** A handle over every annotation: dragged, or moved by the arrow keys. The words themselves are the drawing's. */
export function AnnotationHandles({ result, frame, onMove }: AnnotationHandlesProps) {
  const words = result.layers.filter((layer): layer is Words => layer.what === "annotation");
  return (
    <>
      {words.map((layer) => (
        <Handle
          key={layer.drawn}
          layer={layer}
          frame={frame}
          onMove={(px, py) => {
            const { x, y } = placeAt(frame, result.plot, px, py);
            if (Number.isFinite(x) && Number.isFinite(y)) onMove(layer.drawn, x, y);
          }}
        />
      ))}
    </>
  );
}

function Handle({ layer, frame, onMove }: { readonly layer: Words; readonly frame: Frame; onMove(px: number, py: number): void }) {
  const [moved, setMoved] = useState<{ readonly fromX: number; readonly fromY: number; readonly x: number; readonly y: number } | null>(null);
  const box = annotationBox(layer, frame);
  const isInside =
    box.right > frame.margin.l && box.left < frame.width - frame.margin.r && box.bottom > frame.margin.t && box.top < frame.height - frame.margin.b;
  if (!isInside) return null;
  const keep = (dx: number, dy: number): void => {
    const within = (value: number, low: number, high: number): number => Math.min(high, Math.max(low, value));
    onMove(
      within(box.left + dx, frame.margin.l, frame.width - frame.margin.r - 8),
      within(box.top + 8 + dy, frame.margin.t + 8, frame.height - frame.margin.b - 8),
    );
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    const by = event.shiftKey ? leap : step;
    const to = { ArrowLeft: [-by, 0], ArrowRight: [by, 0], ArrowUp: [0, -by], ArrowDown: [0, by] }[event.key];
    if (to === undefined) return;
    event.preventDefault();
    event.stopPropagation();
    keep(to[0] ?? 0, to[1] ?? 0);
  };
  const shift = moved === null ? { x: 0, y: 0 } : { x: moved.x - moved.fromX, y: moved.y - moved.fromY };
  return (
    <button
      type="button"
      aria-label={`Move “${layer.text}”`}
      title="Drag, or use the arrow keys"
      className={classNames(
        "absolute z-[5] cursor-move touch-none border border-transparent text-left text-[12px] leading-4 whitespace-nowrap hover:border-indigo focus-visible:border-indigo",
        moved !== null && "border-indigo bg-paper",
      )}
      style={{ left: box.left + shift.x - 3, top: box.top + shift.y - 1, width: box.right - box.left + 6, height: 18 }}
      onKeyDown={onKeyDown}
      onPointerDown={(event: PointerEvent<HTMLButtonElement>) => {
        event.currentTarget.setPointerCapture(event.pointerId);
        setMoved({ fromX: event.clientX, fromY: event.clientY, x: event.clientX, y: event.clientY });
      }}
      onPointerMove={(event) => moved !== null && setMoved({ ...moved, x: event.clientX, y: event.clientY })}
      onPointerCancel={() => setMoved(null)}
      onPointerUp={() => {
        if (moved !== null && (shift.x !== 0 || shift.y !== 0)) keep(shift.x, shift.y);
        setMoved(null);
      }}
    >
      <span className={moved === null ? "sr-only" : "pl-[3px]"}>{layer.text}</span>
    </button>
  );
}
