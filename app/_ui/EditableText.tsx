"use client";

import { useEffect, useRef, useState, type KeyboardEvent } from "react";
import { classNames } from "./classNames";

export interface EditableTextProps {
  readonly text: string;
  /** What the field is called for a screen reader: "Title of the page". */
  readonly label: string;
  readonly placeholder?: string;
  /** Called once, when the person is done and the text is another one. Left out: only shown. */
  readonly onCommit?: ((text: string) => void) | undefined;
  readonly maxLength?: number;
  readonly className?: string;
  /** Enter starts a new line in long titles never; it commits. */
  readonly autoFocus?: boolean;
  readonly onDone?: () => void;
}

/**
 * Text that is edited where it stands: it looks like the text it is until it has the focus. Enter and leaving commit, Escape
 * takes the change back. The field grows with its text.
 */
export function EditableText({ text, label, placeholder = "", onCommit, maxLength = 200, className, autoFocus, onDone }: EditableTextProps) {
  const [draft, setDraft] = useState<string | null>(null);
  const field = useRef<HTMLTextAreaElement>(null);
  useEffect(() => {
    if (autoFocus) {
      field.current?.focus();
      field.current?.select();
    }
  }, [autoFocus]);
  if (onCommit === undefined) return <span className={className}>{text === "" ? placeholder : text}</span>;
  const shown = draft ?? text;
  const commit = () => {
    const next = draft?.trim();
    setDraft(null);
    if (next !== undefined && next !== text) onCommit(next);
    onDone?.();
  };
  const onKeyDown = (event: KeyboardEvent<HTMLTextAreaElement>) => {
    if (event.key === "Enter") {
      event.preventDefault();
      field.current?.blur();
    } else if (event.key === "Escape") {
      event.stopPropagation();
      setDraft(null);
      requestAnimationFrame(() => field.current?.blur());
    }
  };
  return (
    // A hidden copy of the text gives the field its size; both lie in one grid cell.
    <span className={classNames("inline-grid max-w-full", className)}>
      <span aria-hidden="true" className="invisible col-start-1 row-start-1 min-w-[2ch] break-words whitespace-pre-wrap">
        {shown === "" ? placeholder || " " : shown}
        {shown.endsWith("\n") ? " " : ""}
      </span>
      <textarea
        ref={field}
        rows={1}
        cols={1}
        value={shown}
        maxLength={maxLength}
        placeholder={placeholder}
        aria-label={label}
        spellCheck={false}
        onChange={(event) => setDraft(event.target.value.replace(/[\r\n]+/g, " "))}
        onBlur={commit}
        onKeyDown={onKeyDown}
        className="col-start-1 row-start-1 w-full min-w-0 resize-none overflow-hidden border-0 bg-transparent p-0 placeholder:text-second hover:bg-wash focus:bg-surface focus:outline-2 focus:outline-offset-2 focus:outline-indigo"
        style={{ font: "inherit", letterSpacing: "inherit", lineHeight: "inherit", color: "inherit" }}
      />
    </span>
  );
}
