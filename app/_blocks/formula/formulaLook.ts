import { EditorView } from "@codemirror/view";

/** The look of formula lines: the reasoning in second ink, indented under its result. */
export const formulaLook = EditorView.theme({
  "&": { fontSize: "13px" },
  ".cm-content": { fontFamily: '"IBM Plex Mono", Menlo, monospace', lineHeight: "20px", paddingTop: "0", paddingBottom: "4px" },
  ".cm-line": { padding: "0 0 0 24px", color: "var(--second)" },
  ".cm-name, .cm-text": { color: "var(--ink)" },
  ".cm-comment": { fontFamily: '"IBM Plex Sans", sans-serif', fontStyle: "italic" },
  ".cm-call": { color: "var(--ink)" },
  ".cm-head": { cursor: "default", userSelect: "text", whiteSpace: "normal" },
  ".cm-problem.cm-problem-error": { borderBottom: "2px solid var(--vermilion)", color: "var(--vermilion)" },
  ".cm-problem.cm-problem-warning, .cm-problem.cm-problem-note": { borderBottom: "1px dashed var(--second)" },
  ".cm-problem-text": { display: "flex", paddingLeft: "24px", whiteSpace: "normal", cursor: "default" },
  ".cm-problem-text.cm-problem-error": { color: "var(--vermilion)" },
  ".cm-problem-text.cm-problem-warning, .cm-problem-text.cm-problem-note": { color: "var(--second)" },
  ".cm-problem-lead": { flex: "none", height: "11px", borderRight: "1px solid currentColor" },
  ".cm-problem-sentence": { font: '400 13px/20px "IBM Plex Sans", sans-serif', paddingLeft: "12px", maxWidth: "572px" },
  "@media (max-width: 719px)": {
    ".cm-line": { paddingLeft: "16px" },
    ".cm-problem-text": { display: "block", paddingLeft: "16px" },
    ".cm-problem-lead": { display: "block", height: "8px" },
    ".cm-problem-sentence": { display: "block", paddingLeft: "0" },
  },
});
