"use client";

import { standardKeymap } from "@codemirror/commands";
import { EditorState, type Extension } from "@codemirror/state";
import { drawSelection, EditorView, keymap } from "@codemirror/view";
import { yCollab, yUndoManagerKeymap } from "y-codemirror.next";
import type { Text } from "yjs";
import type { LiveText } from "@/app/_page/contract";
import { pageNonce } from "@/app/_ui/nonce";

/** The look that every text editor of a page shares: no gutter, no box, the page's own ink, carets with their person's name. */
const look = EditorView.theme({
  "&": { backgroundColor: "transparent", color: "var(--ink)" },
  "&.cm-focused": { outline: "none" },
  ".cm-scroller": { fontFamily: "inherit", lineHeight: "inherit", overflow: "visible" },
  ".cm-content": { padding: "0", caretColor: "var(--ink)" },
  ".cm-line": { padding: "0" },
  ".cm-cursor": { borderLeftColor: "var(--ink)" },
  "&.cm-focused > .cm-scroller > .cm-selectionLayer .cm-selectionBackground, .cm-selectionBackground": {
    background: "color-mix(in srgb, var(--indigo) 24%, transparent)",
  },
  ".cm-ySelectionInfo": {
    font: '500 11px/14px "IBM Plex Sans", sans-serif',
    color: "var(--ink)",
    background: "var(--surface)",
    padding: "0 3px",
    opacity: "1",
    top: "-1.2em",
  },
  ".cm-ySelectionCaretDot": { display: "none" },
  ".cm-tooltip": { border: "1px solid var(--ink)", background: "var(--surface)", color: "var(--ink)", font: '400 13px/20px "IBM Plex Sans", sans-serif' },
  ".cm-tooltip.cm-tooltip-autocomplete > ul": { font: '400 13px/20px "IBM Plex Mono", monospace', maxHeight: "14em" },
  ".cm-tooltip.cm-tooltip-autocomplete > ul > li": { padding: "2px 12px" },
  ".cm-tooltip.cm-tooltip-autocomplete > ul > li[aria-selected]": { background: "var(--wash)", color: "var(--ink)", boxShadow: "inset 2px 0 var(--indigo)" },
  ".cm-completionMatchedText": { textDecoration: "none", fontWeight: "500" },
  ".cm-completionDetail": { font: '400 12px/20px "IBM Plex Sans", sans-serif', fontStyle: "normal", color: "var(--second)", marginLeft: "16px" },
  ".cm-tooltip.cm-completionInfo": { padding: "8px 12px", maxWidth: "320px", font: '400 12px/16px "IBM Plex Sans", sans-serif' },
});

export interface CodeEditorOptions {
  /** null: the text is only read, and `initial` is what it is. */
  readonly text: Text | null;
  readonly initial: string;
  readonly awareness: LiveText["awareness"] | null;
  readonly undoManager: LiveText["undoManager"] | null;
  readonly label: string;
  readonly extensions: Extension;
}

/** Leaves the editor by Escape, so that the keyboard is never held in it. */
const leave = keymap.of([
  {
    key: "Escape",
    run: (view) => {
      view.contentDOM.blur();
      return true;
    },
  },
]);

/**
 * An editor on a shared text, or on a plain one that can only be read. Undo is the page's, so it takes back one's own edits
 * and nobody else's. The caller destroys the view.
 */
export function createCodeEditor(parent: HTMLElement, { text, initial, awareness, undoManager, label, extensions }: CodeEditorOptions): EditorView {
  const shared =
    text === null
      ? [EditorState.readOnly.of(true), EditorView.editable.of(false)]
      : [keymap.of(yUndoManagerKeymap), yCollab(text, awareness, { undoManager: undoManager ?? false })];
  return new EditorView({
    parent,
    state: EditorState.create({
      doc: text === null ? initial : text.toString(),
      extensions: [
        EditorView.cspNonce.of(pageNonce()),
        EditorView.lineWrapping,
        EditorView.contentAttributes.of({ "aria-label": label, spellcheck: "false", autocorrect: "off", autocapitalize: "off" }),
        extensions,
        shared,
        keymap.of(standardKeymap),
        leave,
        drawSelection(),
        look,
      ],
    }),
  });
}
