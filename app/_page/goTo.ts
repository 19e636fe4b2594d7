import type { PagePlace } from "./contract";
import { FRAME_ATTRIBUTE } from "./rail/useRailBlocks";

function calm(): boolean {
  return matchMedia("(prefers-reduced-motion: reduce)").matches;
}

/** Scrolls to a block and gives it the focus, so that the keyboard goes on from there. */
export function goToBlock(key: string): void {
  const frame = document.querySelector<HTMLElement>(`[${FRAME_ATTRIBUTE}="${CSS.escape(key)}"]`);
  if (frame === null) return;
  frame.focus({ preventScroll: true });
  frame.scrollIntoView({ behavior: calm() ? "auto" : "smooth", block: "start" });
}

/** Tells the table of a block to bring a row on the screen: tables draw only the rows that are seen. */
export const SHOW_ROW_EVENT = "cotectic:show-row";

export interface ShowRow {
  readonly row: string | number;
  readonly column?: string;
}

/** Leads to a place on the page: a block, or a cell of its table. */
export function goToPlace(key: string, place: PagePlace): void {
  goToBlock(key);
  if (place.row === undefined) return;
  const detail: ShowRow = place.column === undefined ? { row: place.row } : { row: place.row, column: place.column };
  document.querySelector(`[${FRAME_ATTRIBUTE}="${CSS.escape(key)}"]`)?.dispatchEvent(new CustomEvent<ShowRow>(SHOW_ROW_EVENT, { detail }));
}
