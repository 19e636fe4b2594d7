"use client";

import { useId, type ReactNode } from "react";

export interface FieldProps {
  readonly label: ReactNode;
  /** A sentence under the control. */
  readonly hint?: ReactNode;
  /** What is wrong, in words that say what to do. */
  readonly problem?: string | null | undefined;
  readonly className?: string | undefined;
  /** Draws the control with the ids it needs to be named and described. */
  readonly children: (ids: { id: string; "aria-describedby": string | undefined; "aria-invalid": boolean | undefined }) => ReactNode;
}

/** A label over a control, with its hint and its problem tied to it for screen readers. */
export function Field({ label, hint, problem, className, children }: FieldProps) {
  const id = useId();
  const said = problem ? `${id}-problem` : hint ? `${id}-hint` : undefined;
  return (
    <div className={className}>
      <label htmlFor={id} className="block text-margin text-second">
        {label}
      </label>
      {children({ id, "aria-describedby": said, "aria-invalid": problem ? true : undefined })}
      {problem ? (
        <p id={`${id}-problem`} role="alert" className="mt-1 text-margin text-vermilion">
          {problem}
        </p>
      ) : hint ? (
        <p id={`${id}-hint`} className="mt-1 text-margin text-second">
          {hint}
        </p>
      ) : null}
    </div>
  );
}
