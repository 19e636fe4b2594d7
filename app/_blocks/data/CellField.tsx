"use client";

import { useEffect, useRef, useState, type KeyboardEvent } from "react";

export interface CellFieldProps {
  readonly initial: string;
  readonly label: string;
  /** Called with the text, or null where it was given up, and where to go next; answers with a sentence where it is refused. */
  readonly onDone: (text: string | null, move: "down" | "right" | "left" | null) => string | null;
}

/** The field of a typed cell: Enter goes down, Tab to the right, Escape leaves the cell as it was. */
export function CellField({ initial, label, onDone }: CellFieldProps) {
  const [text, setText] = useState(initial);
  const [fault, setFault] = useState<string | null>(null);
  const input = useRef<HTMLInputElement>(null);
  const done = useRef(false);
  useEffect(() => {
    input.current?.focus();
  }, []);
  const finish = (value: string | null, move: "down" | "right" | "left" | null) => {
    if (done.current) return;
    // Moving on takes the focus from here at once, and leaving the field must not count as a second answer.
    done.current = true;
    const refused = onDone(value, move);
    if (refused === null) return;
    done.current = false;
    setFault(refused);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    event.stopPropagation();
    const move = event.key === "Enter" ? "down" : event.key === "Tab" ? (event.shiftKey ? "left" : "right") : undefined;
    if (move !== undefined) {
      event.preventDefault();
      finish(text, move);
    } else if (event.key === "Escape") finish(null, null);
  };
  return (
    <>
      <input
        ref={input}
        value={text}
        aria-label={label}
        aria-invalid={fault !== null}
        onChange={(event) => {
          setText(event.target.value);
          setFault(null);
        }}
        onKeyDown={onKeyDown}
        onBlur={() => finish(text, null)}
        className="grid-input"
      />
      {fault === null ? null : (
        <span
          role="alert"
          className="fixed bottom-4 left-1/2 z-50 max-w-[80ch] -translate-x-1/2 border border-vermilion bg-surface px-3 py-2 font-sans text-ui whitespace-normal text-vermilion"
        >
          {fault}
        </span>
      )}
    </>
  );
}
