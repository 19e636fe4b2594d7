import { goToBlock } from "./goTo";
import { FRAME_ATTRIBUTE } from "./rail/useRailBlocks";

/** Goes to the next block or the one before, from the one that has the focus or is at the top of the screen. */
export function stepFrom(keys: readonly string[], by: 1 | -1): void {
  const frames = keys.map((key) => document.querySelector(`[${FRAME_ATTRIBUTE}="${CSS.escape(key)}"]`));
  const focused = frames.findIndex((frame) => frame?.contains(document.activeElement) === true);
  const at = focused >= 0 ? focused : frames.findIndex((frame) => (frame?.getBoundingClientRect().bottom ?? -1) > 64) - (by === 1 ? 1 : 0);
  const next = keys[Math.max(0, Math.min(keys.length - 1, at + by))];
  if (next !== undefined) goToBlock(next);
}
