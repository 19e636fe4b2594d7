import { RangeSetBuilder, type Extension } from "@codemirror/state";
import { Decoration, ViewPlugin, type DecorationSet, type EditorView, type ViewUpdate } from "@codemirror/view";

const comment = Decoration.mark({ class: "cm-comment" });
const text = Decoration.mark({ class: "cm-text" });
const call = Decoration.mark({ class: "cm-call" });

// A comment, a quoted class name, a header in backticks (left plain), or a name that is called.
const token = /(#.*$)|("[^"]*"?)|(`[^`]*`?)|([\p{L}_][\p{L}\p{N}_]*)(?=\s*\()/gu;

function colour(view: EditorView): DecorationSet {
  const builder = new RangeSetBuilder<Decoration>();
  for (const { from, to } of view.visibleRanges) {
    for (let at = from; at <= to;) {
      const line = view.state.doc.lineAt(at);
      for (const match of line.text.matchAll(token)) {
        const start = line.from + match.index;
        const mark = match[1] !== undefined ? comment : match[2] !== undefined ? text : match[4] !== undefined ? call : undefined;
        if (mark !== undefined && match[0].length > 0) builder.add(start, start + match[0].length, mark);
      }
      at = line.to + 1;
    }
  }
  return builder.finish();
}

/** Quiet colouring of formulas: comments, class names and function names; everything else is the second ink. */
export const formulaHighlight: Extension = ViewPlugin.fromClass(
  class {
    decorations: DecorationSet;
    constructor(view: EditorView) {
      this.decorations = colour(view);
    }
    update(update: ViewUpdate): void {
      if (update.docChanged || update.viewportChanged) this.decorations = colour(update.view);
    }
  },
  { decorations: (plugin) => plugin.decorations },
);
