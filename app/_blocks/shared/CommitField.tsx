"use client";

import { useState, type ReactNode } from "react";
import { TextField } from "@/app/_ui/TextField";

export interface CommitFieldProps {
  readonly label: ReactNode;
  readonly value: string;
  /** Called when the person is done (Enter, or leaving the field) and the text is another one. */
  onCommit(text: string): void;
  readonly hint?: ReactNode;
  readonly problem?: string | null | undefined;
  readonly mono?: boolean;
  readonly placeholder?: string;
  readonly inputMode?: "decimal" | "text";
  readonly className?: string;
  readonly disabled?: boolean;
}

/** A field whose text counts when the person is done with it: a half-written expression is nobody's calculation. Escape takes it back. */
export function CommitField({ value, onCommit, className, problem = null, ...rest }: CommitFieldProps) {
  const [draft, setDraft] = useState<string | null>(null);
  const commit = (): void => {
    if (draft !== null && draft !== value) onCommit(draft);
    setDraft(null);
  };
  return (
    <TextField
      {...rest}
      problem={problem}
      {...(className === undefined ? {} : { fieldClassName: className })}
      value={draft ?? value}
      spellCheck={false}
      autoComplete="off"
      onText={setDraft}
      onBlur={commit}
      onKeyDown={(event) => {
        if (event.key === "Enter") commit();
        else if (event.key === "Escape" && draft !== null) {
          event.stopPropagation();
          setDraft(null);
        }
      }}
    />
  );
}
