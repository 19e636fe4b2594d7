"use client";

import { useCallback, useState } from "react";

export interface Size {
  readonly width: number;
  readonly height: number;
}

/**
 * Size of an element, kept up to date.
 *
 * @returns a callback to hand to `ref`, and the size, 0 × 0 until the element is on the screen.
 */
export function useSize<E extends Element>(): [(element: E | null) => (() => void) | undefined, Size] {
  const [size, setSize] = useState<Size>({ width: 0, height: 0 });
  const ref = useCallback((element: E | null) => {
    if (element === null) return undefined;
    const observer = new ResizeObserver(([entry]) => {
      if (entry === undefined) return;
      const { width, height } = entry.contentRect;
      setSize((old) => (old.width === width && old.height === height ? old : { width, height }));
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return [ref, size];
}
