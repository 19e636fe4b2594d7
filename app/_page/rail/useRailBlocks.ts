"use client";

import { useEffect, useState } from "react";
import { sameEntries } from "../structure";

/** Where a block's frame stands on the page. */
export interface FramePlace {
  readonly key: string;
  readonly top: number;
  readonly height: number;
  readonly width: number;
}

/** Attribute by which the rail finds the frames of blocks. */
export const FRAME_ATTRIBUTE = "data-block-key";

function samePlace(a: FramePlace | undefined, b: FramePlace): boolean {
  return a?.key === b.key && Math.abs(a.top - b.top) < 0.5 && Math.abs(a.height - b.height) < 0.5 && Math.abs(a.width - b.width) < 0.5;
}

/**
 * Places of all blocks' frames, measured anew when a frame or the page changes its size.
 *
 * @param keys keys in the page's order, joined: a change of them is a new measurement
 */
export function useFramePlaces(keys: string): readonly FramePlace[] {
  const [places, setPlaces] = useState<readonly FramePlace[]>([]);
  useEffect(() => {
    let frame = 0;
    const measure = () => {
      frame = 0;
      const found = Array.from(document.querySelectorAll<HTMLElement>(`[${FRAME_ATTRIBUTE}]`), (element): FramePlace => {
        const box = element.getBoundingClientRect();
        return { key: element.getAttribute(FRAME_ATTRIBUTE) ?? "", top: box.top + window.scrollY, height: box.height, width: box.width };
      });
      setPlaces((old) => {
        const next = found.map((place, i) => (samePlace(old[i], place) ? (old[i] ?? place) : place));
        return sameEntries(old, next) ? old : next;
      });
    };
    const later = () => {
      if (frame === 0) frame = requestAnimationFrame(measure);
    };
    const observer = new ResizeObserver(later);
    for (const element of document.querySelectorAll(`[${FRAME_ATTRIBUTE}]`)) observer.observe(element);
    observer.observe(document.body);
    later();
    return () => {
      observer.disconnect();
      cancelAnimationFrame(frame);
    };
  }, [keys]);
  return places;
}

/** What of the page is on the screen: from and to, in pixels from its top. */
export function useScreenPart(headHeight: number): readonly [number, number] {
  const [part, setPart] = useState<readonly [number, number]>([0, 0]);
  useEffect(() => {
    let frame = 0;
    const read = () => {
      frame = 0;
      const from = window.scrollY + headHeight;
      const to = window.scrollY + window.innerHeight;
      setPart((old) => (old[0] === from && old[1] === to ? old : [from, to]));
    };
    const later = () => {
      if (frame === 0) frame = requestAnimationFrame(read);
    };
    later();
    window.addEventListener("scroll", later, { passive: true });
    window.addEventListener("resize", later);
    return () => {
      window.removeEventListener("scroll", later);
      window.removeEventListener("resize", later);
      cancelAnimationFrame(frame);
    };
  }, [headHeight]);
  return part;
}
