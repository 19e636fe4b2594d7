"use client";

import { useEffect, useRef } from "react";
import { classLine } from "./classStyle";
import { useLight } from "./useLight";
import { useSize } from "./useSize";

/** A named value that the strip is read against: a body, a fitted value. */
export interface StripMark {
  readonly label: string;
  readonly value: number;
}

export interface TickStripProps {
  /** One entry a sample; what is not finite is not drawn, and is counted by whoever shows the strip. */
  readonly values: ArrayLike<number>;
  /** Place of each sample's class in the page's sequence, below 0 for none. */
  readonly classOf?: ((index: number) => number) | undefined;
  /** 1 for samples that are not to be drawn (set aside, other states). */
  readonly hide?: ArrayLike<number> | undefined;
  /** Indices of picked samples: taller, in indigo. */
  readonly picked?: readonly number[] | undefined;
  /** Range of the strip; that of the drawn values where left out. Values outside are left to {@link stripCounts}. */
  readonly range?: readonly [number, number] | undefined;
  /** Marks under the strip, drawn as short lines below it. */
  readonly marks?: readonly StripMark[] | undefined;
  /** Height in pixels; 20 in table heads and lines. */
  readonly height?: number;
  /** What a screen reader hears. */
  readonly label: string;
  readonly className?: string;
}

/** Range of what a strip draws; undefined where nothing is finite. */
export function stripRange(values: ArrayLike<number>, hide?: ArrayLike<number>): [number, number] | undefined {
  let least = Infinity;
  let most = -Infinity;
  for (let i = 0; i < values.length; i++) {
    const v = values[i] ?? NaN;
    if (!Number.isFinite(v) || hide?.[i]) continue;
    if (v < least) least = v;
    if (v > most) most = v;
  }
  return least <= most ? [least, most] : undefined;
}

/** How many finite values lie below and above a range: said past the break of the strip. */
export function stripCounts(values: ArrayLike<number>, range: readonly [number, number], hide?: ArrayLike<number>): { below: number; above: number } {
  let below = 0;
  let above = 0;
  for (let i = 0; i < values.length; i++) {
    const v = values[i] ?? NaN;
    if (!Number.isFinite(v) || hide?.[i]) continue;
    if (v < range[0]) below++;
    else if (v > range[1]) above++;
  }
  return { below, above };
}

/** Where a value stands on a strip `width` wide: the ends keep 3.7 % of room, as a lone tick at the edge reads as a frame. */
export function stripPlace(value: number, range: readonly [number, number], width: number): number {
  const span = range[1] - range[0];
  if (span === 0) return width / 2;
  return width * (0.037 + 0.926 * ((value - range[0]) / span));
}

/** How many samples of each class stand on each pixel of a strip, by the class's place in the page's sequence. */
export function crowds(
  values: ArrayLike<number>,
  range: readonly [number, number],
  width: number,
  classOf?: (index: number) => number,
  hide?: ArrayLike<number>,
): Map<number, Uint32Array> {
  const found = new Map<number, Uint32Array>();
  for (let i = 0; i < values.length; i++) {
    const v = values[i] ?? NaN;
    if (!(v >= range[0] && v <= range[1]) || hide?.[i]) continue;
    const index = classOf?.(i) ?? -1;
    let counts = found.get(index);
    if (counts === undefined) found.set(index, (counts = new Uint32Array(Math.ceil(width))));
    const pixel = Math.floor(stripPlace(v, range, width));
    counts[pixel] = (counts[pixel] ?? 0) + 1;
  }
  return found;
}

function resolveColor(canvas: HTMLCanvasElement, css: string): string {
  const name = /^var\((--[\w-]+)\)$/.exec(css)?.[1];
  return name === undefined ? css : getComputedStyle(canvas).getPropertyValue(name).trim();
}

/**
 * One tick a sample, at its value, in its class's colour. Drawn on a canvas, so that twenty thousand samples in twenty
 * columns stay smooth.
 */
export function TickStrip({ values, classOf, hide, picked, range, marks, height = 20, label, className }: TickStripProps) {
  const canvasRef = useRef<HTMLCanvasElement>(null);
  const [box, size] = useSize<HTMLDivElement>();
  const light = useLight();
  const width = size.width;
  useEffect(() => {
    const canvas = canvasRef.current;
    const context = canvas?.getContext("2d");
    if (!canvas || !context || width === 0) return;
    const ratio = window.devicePixelRatio || 1;
    canvas.width = Math.round(width * ratio);
    canvas.height = Math.round(height * ratio);
    context.scale(ratio, ratio);
    context.clearRect(0, 0, width, height);
    const colors = new Map<number, string>();
    const colorOf = (index: number): string => {
      const known = colors.get(index);
      if (known !== undefined) return known;
      const color = resolveColor(canvas, classLine(index));
      colors.set(index, color);
      return color;
    };
    context.fillStyle = resolveColor(canvas, "var(--axis)");
    context.fillRect(0, height - 1, width, 1);
    const shown = range ?? stripRange(values, hide);
    if (shown === undefined) return;
    const pickedSet = new Set(picked);
    if (values.length > width) {
      // More samples than pixels: where they crowd a tick is darker. One rectangle a pixel and class, however many samples.
      const alpha = Math.max(0.15, Math.min(1, (2 * width) / values.length));
      for (const [index, counts] of crowds(values, shown, width, classOf, hide)) {
        context.fillStyle = colorOf(index);
        counts.forEach((count, pixel) => {
          if (count === 0) return;
          context.globalAlpha = 1 - (1 - alpha) ** count;
          context.fillRect(pixel, height * 0.25, 1, height * 0.75);
        });
      }
    } else
      for (let i = 0; i < values.length; i++) {
        const v = values[i] ?? NaN;
        if (!Number.isFinite(v) || hide?.[i] || v < shown[0] || v > shown[1] || pickedSet.has(i)) continue;
        context.fillStyle = colorOf(classOf?.(i) ?? -1);
        context.fillRect(stripPlace(v, shown, width) - 0.7, height * 0.25, 1.4, height * 0.75);
      }
    context.globalAlpha = 1;
    context.fillStyle = resolveColor(canvas, "var(--indigo)");
    for (const i of pickedSet) {
      const v = values[i] ?? NaN;
      if (Number.isFinite(v) && v >= shown[0] && v <= shown[1]) context.fillRect(stripPlace(v, shown, width) - 1, 0, 2, height);
    }
    context.fillStyle = resolveColor(canvas, "var(--ink)");
    for (const mark of marks ?? [])
      if (mark.value >= shown[0] && mark.value <= shown[1]) context.fillRect(stripPlace(mark.value, shown, width) - 0.5, height - 4, 1, 4);
  }, [values, classOf, hide, picked, range, marks, height, width, light]);
  return (
    <div ref={box} className={`relative ${className ?? ""}`} style={{ height }}>
      <canvas ref={canvasRef} role="img" aria-label={label} style={{ width: "100%", height }} className="absolute inset-0 block" />
    </div>
  );
}
