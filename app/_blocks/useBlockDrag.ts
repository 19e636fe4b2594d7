"use client";

import { useCallback, useEffect, useRef, type PointerEvent } from "react";
import { FRAME_ATTRIBUTE } from "@/app/_page/rail/useRailBlocks";

const MARKS = ["block-drop", "block-drop-before", "block-drop-after"];
/** So near to the edge of the window the page scrolls along. */
const SCROLL_ZONE = 64;

interface Target {
  readonly element: Element;
  readonly key: string;
  readonly before: boolean;
}

function targetAt(x: number, y: number, moving: string): Target | null {
  const element = document.elementFromPoint(x, y)?.closest(`[${FRAME_ATTRIBUTE}]`) ?? nearestTo(y);
  const key = element?.getAttribute(FRAME_ATTRIBUTE);
  if (!element || key === null || key === undefined || key === moving) return null;
  const box = element.getBoundingClientRect();
  return { element, key, before: y < box.top + box.height / 2 };
}

/** Between rows and beside the sheet, the frame whose middle is nearest. */
function nearestTo(y: number): Element | null {
  let best: Element | null = null;
  let distance = Infinity;
  for (const element of document.querySelectorAll(`[${FRAME_ATTRIBUTE}]`)) {
    const box = element.getBoundingClientRect();
    const d = y < box.top ? box.top - y : y > box.bottom ? y - box.bottom : 0;
    if (d < distance) {
      distance = d;
      best = element;
    }
  }
  return best;
}

/**
 * Moves a block by pointer: a line shows where it would stand; Escape lets it lie. The keyboard has Alt and the arrows.
 *
 * @param order keys of the page's blocks, in order
 * @returns what to hand to the handle's `onPointerDown`
 */
export function useBlockDrag(key: string, order: readonly string[], move: (afterKey: string | null) => void): (event: PointerEvent<HTMLElement>) => void {
  const latest = useRef({ order, move });
  useEffect(() => {
    latest.current = { order, move };
  });
  const stop = useRef<(() => void) | null>(null);
  useEffect(() => () => stop.current?.(), []);
  return useCallback(
    (event) => {
      if (event.button !== 0) return;
      event.preventDefault();
      const began = { x: event.clientX, y: event.clientY };
      let target: Target | null = null;
      let moved = false;
      let scrolling = 0;
      let pointer = began;
      const unmark = () => target?.element.classList.remove(...MARKS);
      const look = () => {
        const next = targetAt(pointer.x, pointer.y, key);
        unmark();
        target = next;
        next?.element.classList.add("block-drop", next.before ? "block-drop-before" : "block-drop-after");
      };
      const scroll = () => {
        const by = pointer.y < SCROLL_ZONE + 48 ? -12 : pointer.y > window.innerHeight - SCROLL_ZONE ? 12 : 0;
        if (by !== 0) {
          window.scrollBy(0, by);
          look();
        }
        scrolling = requestAnimationFrame(scroll);
      };
      const onMove = (e: globalThis.PointerEvent) => {
        pointer = { x: e.clientX, y: e.clientY };
        if (!moved && Math.hypot(pointer.x - began.x, pointer.y - began.y) < 5) return;
        if (!moved) scrolling = requestAnimationFrame(scroll);
        moved = true;
        document.body.style.cursor = "grabbing";
        look();
      };
      const end = () => {
        unmark();
        cancelAnimationFrame(scrolling);
        document.body.style.cursor = "";
        window.removeEventListener("pointermove", onMove);
        window.removeEventListener("pointerup", onUp);
        window.removeEventListener("pointercancel", end);
        window.removeEventListener("keydown", onKey, true);
        stop.current = null;
      };
      const onUp = () => {
        const dropped = moved ? target : null;
        end();
        if (dropped === null) return;
        const others = latest.current.order.filter((k) => k !== key);
        const at = others.indexOf(dropped.key);
        latest.current.move(dropped.before ? (others[at - 1] ?? null) : dropped.key);
      };
      const onKey = (e: KeyboardEvent) => {
        if (e.key !== "Escape") return;
        e.stopPropagation();
        end();
      };
      stop.current = end;
      window.addEventListener("pointermove", onMove);
      window.addEventListener("pointerup", onUp);
      window.addEventListener("pointercancel", end);
      window.addEventListener("keydown", onKey, true);
    },
    [key],
  );
}
