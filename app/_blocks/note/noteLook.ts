import { EditorView } from "@codemirror/view";

/** The look of a note while it is written: the same type and measure as when it is read. */
export const noteLook = EditorView.theme({
  "&": { fontSize: "inherit" },
  ".cm-content": { fontFamily: '"STIX Two Text", "Times New Roman", serif' },
});
