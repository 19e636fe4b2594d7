import { useEffect, useRef } from "react";
import { SHOW_ROW_EVENT, type ShowRow } from "@/app/_page/goTo";
import { FRAME_ATTRIBUTE } from "@/app/_page/rail/useRailBlocks";

/** Unfolds a table that somebody is led into, and then says again which cell is meant: the rows are there to hear it only now. */
export function useShownWhenFolded(blockKey: string, isFolded: boolean, unfold: () => void): void {
  const sought = useRef<ShowRow | null>(null);
  useEffect(() => {
    const frame = document.querySelector(`[${FRAME_ATTRIBUTE}="${CSS.escape(blockKey)}"]`);
    if (!isFolded) {
      const detail = sought.current;
      sought.current = null;
      if (detail !== null) frame?.dispatchEvent(new CustomEvent<ShowRow>(SHOW_ROW_EVENT, { detail }));
      return;
    }
    const show = (event: Event): void => {
      sought.current = (event as CustomEvent<ShowRow>).detail;
      unfold();
    };
    frame?.addEventListener(SHOW_ROW_EVENT, show);
    return () => frame?.removeEventListener(SHOW_ROW_EVENT, show);
  });
}
