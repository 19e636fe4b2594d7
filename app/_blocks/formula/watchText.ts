import type { Extension } from "@codemirror/state";
import { EditorView } from "@codemirror/view";

/** Tells the whole text after every change, of one's own or of others. */
export function watchText(changed: (text: string) => void): Extension {
  return EditorView.updateListener.of((update) => {
    if (update.docChanged) changed(update.state.doc.toString());
  });
}
