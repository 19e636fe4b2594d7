"use client";

import { useEffect } from "react";

/** What the keys of a page do; left out where a page cannot do it. */
export interface ShortcutActions {
  readonly undo?: (() => void) | undefined;
  readonly redo?: (() => void) | undefined;
  readonly projector: () => void;
  readonly shortcuts: () => void;
  readonly step: (by: 1 | -1) => void;
  readonly letGo: () => void;
}

/** The list that "?" shows; kept beside what the keys do. */
export const shortcutList: readonly (readonly [keys: string, does: string])[] = [
  ["?", "this list"],
  ["J, K", "next block, block before"],
  ["P", "projector: read from the back of the room"],
  ["Escape", "let go of picked samples, close the trace, leave a field"],
  ["Ctrl Z, Ctrl Shift Z", "undo and redo your own edits"],
  ["Alt ↑, Alt ↓", "move the block you are in"],
  ["arrows, Home, End, Page ↑ ↓", "move in a table; with Ctrl to its ends"],
  ["Space, Shift Space", "pick a row of a table, or a range"],
  ["Enter, F2", "amend a value of a source, edit a typed cell"],
  ["Delete", "empty a typed cell"],
  ["arrows on the rail", "from layer to layer; Enter goes there"],
];

function isTyping(target: EventTarget | null): boolean {
  return (
    target instanceof HTMLElement &&
    (target.isContentEditable || target instanceof HTMLInputElement || target instanceof HTMLTextAreaElement || target instanceof HTMLSelectElement)
  );
}

/** Keys that work anywhere on the page, except while somebody types. */
export function useShortcuts(actions: ShortcutActions): void {
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      // Editors and dialogs take their own keys.
      if (event.defaultPrevented || isTyping(event.target) || document.querySelector('[role="dialog"]') !== null) return;
      const key = event.key.toLowerCase();
      if ((event.ctrlKey || event.metaKey) && !event.altKey && (key === "z" || key === "y")) {
        const act = key === "y" || event.shiftKey ? actions.redo : actions.undo;
        if (act === undefined) return;
        event.preventDefault();
        return act();
      }
      if (event.ctrlKey || event.metaKey || event.altKey) return;
      // In a typed table a letter begins a cell's text.
      const inGrid = event.target instanceof Element && event.target.closest('[role="grid"]') !== null;
      if (event.key === "Escape") return actions.letGo();
      if (inGrid) return;
      if (event.key === "?") actions.shortcuts();
      else if (key === "p") actions.projector();
      else if (key === "j") actions.step(1);
      else if (key === "k") actions.step(-1);
      else return;
      event.preventDefault();
    };
    window.addEventListener("keydown", onKey);
    return () => window.removeEventListener("keydown", onKey);
  }, [actions]);
}
