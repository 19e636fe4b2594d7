"use client";

import { useEffect, useRef, type RefObject } from "react";
import type { CloudView } from "./cloud";
import { paintCloud, type Painting } from "./paintCloud";

export interface CloudCanvasProps {
  readonly view: CloudView;
  /** Holds the latest painting, for finding what is under the pointer. */
  readonly painting: RefObject<Painting | null>;
}

/** Samples painted as pixels, under Plotly's axes and lines. */
export function CloudCanvas({ view, painting }: CloudCanvasProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  useEffect(() => {
    // In a task of its own: painting must not lengthen the one that drew the page.
    const frame = requestAnimationFrame(() => {
      const context = canvas.current?.getContext("2d");
      if (canvas.current === null || context === null || context === undefined) return;
      const made = paintCloud(view, Math.min(2, window.devicePixelRatio || 1));
      if (canvas.current.width !== made.width) canvas.current.width = made.width;
      if (canvas.current.height !== made.height) canvas.current.height = made.height;
      context.putImageData(new ImageData(made.pixels, made.width, made.height), 0, 0);
      painting.current = made;
      // What is painted now, for whoever waits for it.
      canvas.current.dataset.view = JSON.stringify(view.frame.view);
    });
    return () => cancelAnimationFrame(frame);
  }, [view, painting]);
  return <canvas ref={canvas} aria-hidden="true" className="absolute top-0 left-0" style={{ width: view.frame.width, height: view.frame.height }} />;
}
