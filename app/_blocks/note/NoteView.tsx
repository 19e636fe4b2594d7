"use client";

import { useRef, useState, type KeyboardEvent, type MouseEvent } from "react";
import type { BlockViewProps } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { classNames } from "@/app/_ui/classNames";
import { resultOf } from "@/app/_blocks/shared/tableOf";
import { useSharedText } from "@/app/_blocks/shared/useSharedText";
import type { NoteBlock, NoteResult, NoteValue } from "@/cells";
import { NoteEditor } from "./NoteEditor";
import { NoteText } from "./NoteText";

const noValues: readonly NoteValue[] = [];

/** What the head of a note says: which of its values cannot be found. */
export function stateInWords(result: NoteResult | undefined): { readonly text: string; readonly problem: boolean } {
  const lost = result?.values.filter((v) => v.shown === null).length ?? 0;
  if (lost === 0) return { text: "", problem: false };
  return { text: `${lost} value${lost === 1 ? "" : "s"} not found`, problem: true };
}

function isAction(target: EventTarget): boolean {
  return target instanceof Element && target.closest("a, button, summary") !== null;
}

/** A note: read as set text, written as Markdown where it stands. A click or Enter begins, Escape ends. */
export function NoteView({ blockKey, block, view }: BlockViewProps<NoteBlock>) {
  const [writing, setWriting] = useState(false);
  const frame = useRef<HTMLDivElement>(null);
  const text = useSharedText(view, blockKey);
  const values = resultOf(view.results, block.id, "note")?.values ?? noValues;
  const problems = resultOf(view.results, block.id, "note")?.problems ?? [];
  const isNarrow = block.width !== undefined && block.width < 12;
  const type = classNames("font-serif", isNarrow ? "text-note-narrow" : "text-note max-[719px]:leading-[26px]");
  const label = `Note ${block.name ?? block.id}`;

  if (writing && text !== null) {
    return (
      <div className={type}>
        <NoteEditor
          text={text}
          live={view.live ?? null}
          label={label}
          onLeave={(byKey) => {
            setWriting(false);
            if (byKey) requestAnimationFrame(() => frame.current?.querySelector<HTMLElement>("[data-write]")?.focus());
          }}
        />
        <p className="mt-1 font-sans text-margin text-second">Markdown; {"{{block.name}}"} is a live value, $…$ is maths. Esc ends.</p>
      </div>
    );
  }
  const mayWrite = text !== null;
  const begin = (event: MouseEvent | KeyboardEvent): void => {
    // A click that selected words or met a link was not meant to open the editor.
    if (!mayWrite || isAction(event.target) || (window.getSelection()?.toString() ?? "") !== "") return;
    setWriting(true);
  };
  return (
    <div ref={frame} className="group relative">
      {/* The pointer may begin anywhere in the text; the keyboard begins at the button, which lies behind it. */}
      <div className={classNames(type, "[&>p+p]:mt-2", mayWrite && "cursor-text")} onClick={begin}>
        {block.text.trim() === "" ? (
          <p className="text-second">{mayWrite ? "Write here." : "Nothing is written here."}</p>
        ) : (
          <NoteText text={block.text} values={values} view={view} />
        )}
      </div>
      {mayWrite && (
        <Button
          data-write
          className="text-margin opacity-0 group-hover:opacity-100 focus-visible:opacity-100 [@media(hover:none)]:opacity-100"
          aria-label={`Write in ${label}`}
          onClick={() => setWriting(true)}
        >
          Write
        </Button>
      )}
      {problems
        .filter((p) => p.severity === "error")
        .map((p, index) => (
          <p key={index} className="mt-1 text-margin text-vermilion">
            {p.text}
          </p>
        ))}
    </div>
  );
}
