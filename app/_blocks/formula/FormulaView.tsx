"use client";

import type { EditorView } from "@codemirror/view";
import { completionKeymap } from "@codemirror/autocomplete";
import { keymap } from "@codemirror/view";
import { useEffect, useMemo, useRef, useState, useSyncExternalStore } from "react";
import { createPortal } from "react-dom";
import type { BlockViewProps } from "@/app/_page/contract";
import { createCodeEditor } from "@/app/_blocks/shared/codeEditor";
import { pickedIndices } from "@/app/_blocks/shared/picks";
import { SimulateControl } from "@/app/_blocks/shared/SimulateControl";
import { resultOf, tableOf } from "@/app/_blocks/shared/tableOf";
import { useSharedText } from "@/app/_blocks/shared/useSharedText";
import type { FormulaBlock } from "@/cells";
import { formulaCompletion } from "./completion";
import { lineDecorations, placedProblems, setProblems } from "./decorations";
import { formulaLook } from "./formulaLook";
import { createHeadHosts } from "./headHosts";
import { formulaHighlight } from "./highlight";
import { LineHead } from "./LineHead";
import { fitsText, formulaLines, resultFor } from "./lines";
import { suggestionsFor } from "./suggestions";
import { watchText } from "./watchText";

export { stateInWords } from "./headWords";

/** A formula block: one editor on the shared text, in which every line stands under its result. */
export function FormulaView({ blockKey, block, view }: BlockViewProps<FormulaBlock>) {
  const parent = useRef<HTMLDivElement>(null);
  const [editor, setEditor] = useState<EditorView | null>(null);
  const [hosts] = useState(createHeadHosts);
  const [written, setWritten] = useState(block.text);
  const places = useSyncExternalStore(hosts.subscribe, hosts.snapshot, hosts.snapshot);
  const text = useSharedText(view, blockKey);
  const awareness = view.live?.awareness ?? null;
  const undoManager = view.live?.undoManager ?? null;
  const result = resultOf(view.results, block.id, "formula");
  const table = tableOf(view.results, block.data);
  const picked = useMemo(() => pickedIndices(table, view.picked), [table, view.picked]);
  const lines = useMemo(() => formulaLines(written), [written]);
  // The text as it was when the present result arrived: lines that have changed since are shown dimmed until the next one.
  const [answered, setAnswered] = useState({ result, text: written });
  if (answered.result !== result) setAnswered({ result, text: written });
  const answeredLines = useMemo(() => new Set(formulaLines(answered.text).map((line) => answered.text.slice(line.from, line.to).trim())), [answered]);

  // The editor outlives renders; what it asks of the page it asks of the latest one.
  const latest = useRef({ block, view });
  useEffect(() => {
    latest.current = { block, view };
  });

  const isReadOnly = text === null;
  const label = `Formulas of ${block.name ?? block.id}`;
  const initial = useRef(block.text);
  useEffect(() => {
    if (parent.current === null) return;
    const made = createCodeEditor(parent.current, {
      text,
      initial: initial.current,
      awareness,
      undoManager,
      label,
      extensions: [
        lineDecorations(hosts),
        formulaHighlight,
        formulaLook,
        isReadOnly
          ? []
          : [
              formulaCompletion(() =>
                suggestionsFor(latest.current.block, latest.current.view.results, latest.current.view.bodies, latest.current.view.ownBodies),
              ),
              keymap.of(completionKeymap),
            ],
        watchText(setWritten),
      ],
    });
    setWritten(made.state.doc.toString());
    setEditor(made);
    return () => {
      made.destroy();
      setEditor(null);
    };
  }, [text, awareness, undoManager, label, hosts, isReadOnly]);

  useEffect(() => {
    initial.current = block.text;
    if (editor === null || !isReadOnly || editor.state.doc.toString() === block.text) return;
    editor.dispatch({ changes: { from: 0, to: editor.state.doc.length, insert: block.text } });
  }, [editor, isReadOnly, block.text]);

  // Places in results are places in the text they were made from. While a newer text is being calculated, the old marks move
  // along with the typing instead.
  const problems = result?.problems;
  useEffect(() => {
    if (editor === null || !fitsText(formulaLines(editor.state.doc.toString()), result?.lines ?? [])) return;
    editor.dispatch({ effects: setProblems.of(placedProblems(result?.problems ?? [])) });
  }, [editor, result]);
  useEffect(() => editor?.requestMeasure(), [editor, result, places, picked]);

  const elsewhere = (problems ?? []).filter((p) => p.span === undefined || (p.field !== undefined && p.field !== "text"));
  const reachesMargin = block.width === undefined || block.width === 12;
  return (
    <div className="min-w-0">
      <div ref={parent} />
      {lines.map((line) => {
        const host = places.get(line.ordinal);
        if (host === undefined) return null;
        return createPortal(
          <LineHead
            block={block.id}
            line={line}
            result={resultFor(line, result?.lines ?? [])}
            table={table}
            picked={picked}
            view={view}
            reachesMargin={reachesMargin}
            isStale={!answeredLines.has(written.slice(line.from, line.to).trim())}
          />,
          host,
          String(line.ordinal),
        );
      })}
      {written.trim() === "" && (
        <p className="pointer-events-none -mt-6 pl-6 text-second">
          {isReadOnly ? "No formula is written here." : "Write a line: a name, an equals sign, an expression. For example mg_si = Mg / Si"}
        </p>
      )}
      {lines.length > 0 && <SimulateControl blockKey={blockKey} handle={block.id} wish={block.simulate} view={view} />}
      {elsewhere.map((p, index) => (
        <p key={index} className={p.severity === "error" ? "mt-2 text-vermilion" : "mt-2 text-margin text-second"}>
          {p.text}
        </p>
      ))}
      <p className="sr-only" aria-live="polite">
        {(problems ?? [])
          .filter((p) => p.severity === "error" && !elsewhere.includes(p))
          .map((p) => p.text)
          .join(" ")}
      </p>
    </div>
  );
}
