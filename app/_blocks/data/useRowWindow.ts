"use client";

import { useCallback, useEffect, useMemo, useRef, useState, type UIEvent } from "react";

export const ROW_HEIGHT = 24;
/** Rows drawn beyond what is seen, so that a flick shows no blanks. */
const BEYOND = 8;

export interface RowWindow {
  readonly first: number;
  /** One past the last row drawn. */
  readonly end: number;
  readonly onScroll: (event: UIEvent<HTMLElement>) => void;
  readonly scroller: React.RefObject<HTMLDivElement | null>;
  /** Scrolls so that a row is seen. */
  readonly reveal: (row: number) => void;
}

/**
 * Which rows of a long table are drawn. All rows are equally high, so a window is a division, and 20,000 rows cost what 40 do.
 *
 * @param seen how many rows the scrolling part shows at once
 */
export function useRowWindow(rows: number, seen: number, headHeight: number): RowWindow {
  const scroller = useRef<HTMLDivElement>(null);
  const [top, setTop] = useState(0);
  const frame = useRef(0);
  useEffect(() => () => cancelAnimationFrame(frame.current), []);
  const onScroll = useCallback((event: UIEvent<HTMLElement>) => {
    const element = event.currentTarget;
    cancelAnimationFrame(frame.current);
    frame.current = requestAnimationFrame(() => setTop(Math.floor(element.scrollTop / ROW_HEIGHT)));
  }, []);
  const reveal = useCallback(
    (row: number) => {
      const element = scroller.current;
      if (element === null) return;
      const from = row * ROW_HEIGHT;
      const height = element.clientHeight - headHeight;
      if (from < element.scrollTop) element.scrollTop = from;
      else if (from + ROW_HEIGHT > element.scrollTop + height) element.scrollTop = from + ROW_HEIGHT - height;
    },
    [headHeight],
  );
  const first = Math.max(0, Math.min(top, rows) - BEYOND);
  const end = Math.min(rows, top + seen + BEYOND);
  return useMemo(() => ({ first, end, onScroll, scroller, reveal }), [first, end, onScroll, reveal]);
}
