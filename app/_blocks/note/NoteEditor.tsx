"use client";

import { useEffect, useRef } from "react";
import type { Text } from "yjs";
import type { LiveText } from "@/app/_page/contract";
import { createCodeEditor } from "@/app/_blocks/shared/codeEditor";
import { EditorView } from "@codemirror/view";
import { noteLook } from "./noteLook";

export interface NoteEditorProps {
  readonly text: Text;
  readonly live: LiveText | null;
  readonly label: string;
  /** Called when the editor is left, by Escape or by going elsewhere; `byKey` when the focus has to be given back. */
  onLeave(byKey: boolean): void;
}

/** The source of a note, on its shared text. Has the focus as soon as it is there. */
export function NoteEditor({ text, live, label, onLeave }: NoteEditorProps) {
  const parent = useRef<HTMLDivElement>(null);
  const leave = useRef(onLeave);
  useEffect(() => {
    leave.current = onLeave;
  });
  const awareness = live?.awareness ?? null;
  const undoManager = live?.undoManager ?? null;
  useEffect(() => {
    if (parent.current === null) return;
    let escaped = false;
    const handlers = EditorView.domEventHandlers({
      keydown: (event) => {
        if (event.key === "Escape") escaped = true;
        return false;
      },
      blur: (event, view) => {
        // A browser that only loses its window keeps the editor open.
        if (document.hasFocus() && !view.dom.contains(event.relatedTarget as Node | null)) leave.current(escaped);
      },
    });
    const editor = createCodeEditor(parent.current, { text, initial: "", awareness, undoManager, label, extensions: [noteLook, handlers] });
    editor.focus();
    editor.dispatch({ selection: { anchor: editor.state.doc.length } });
    return () => editor.destroy();
  }, [text, awareness, undoManager, label]);
  return <div ref={parent} />;
}
