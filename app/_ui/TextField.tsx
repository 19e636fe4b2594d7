"use client";

import type { InputHTMLAttributes, ReactNode, Ref, TextareaHTMLAttributes } from "react";
import { classNames } from "./classNames";
import { Field } from "./Field";

/** The line that all text controls stand on. */
export const controlLook =
  "w-full border-0 border-b border-axis bg-transparent px-0 py-1 text-ui text-ink placeholder:text-second focus:border-indigo focus-visible:shadow-[inset_0_-1px_0_var(--indigo)] focus-visible:outline-none aria-[invalid]:border-vermilion disabled:text-second";

export interface TextFieldProps extends Omit<InputHTMLAttributes<HTMLInputElement>, "onChange"> {
  readonly label: ReactNode;
  readonly hint?: ReactNode;
  readonly problem?: string | null | undefined;
  readonly onText?: (text: string) => void;
  readonly mono?: boolean;
  readonly fieldClassName?: string;
  readonly ref?: Ref<HTMLInputElement>;
}

export function TextField({ label, hint, problem, onText, mono, className, fieldClassName, ref, ...rest }: TextFieldProps) {
  return (
    <Field label={label} hint={hint} problem={problem} className={fieldClassName}>
      {(ids) => (
        <input
          ref={ref}
          {...ids}
          {...rest}
          onChange={(event) => onText?.(event.target.value)}
          className={classNames(controlLook, mono && "font-mono", className)}
        />
      )}
    </Field>
  );
}

export interface TextAreaProps extends Omit<TextareaHTMLAttributes<HTMLTextAreaElement>, "onChange"> {
  readonly label: ReactNode;
  readonly hint?: ReactNode;
  readonly problem?: string | null | undefined;
  readonly onText?: (text: string) => void;
  readonly mono?: boolean;
  readonly ref?: Ref<HTMLTextAreaElement>;
}

export function TextArea({ label, hint, problem, onText, mono, className, ref, ...rest }: TextAreaProps) {
  return (
    <Field label={label} hint={hint} problem={problem}>
      {(ids) => (
        <textarea
          ref={ref}
          rows={2}
          {...ids}
          {...rest}
          onChange={(event) => onText?.(event.target.value)}
          className={classNames(controlLook, mono && "font-mono", className)}
        />
      )}
    </Field>
  );
}
