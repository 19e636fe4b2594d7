"use client";

import { use, type InputHTMLAttributes, type ReactNode } from "react";
import { Field } from "@/app/_ui/Field";
import { classNames } from "@/app/_ui/classNames";
import { IconDown } from "@/app/_ui/icons";
import { controlLook } from "@/app/_ui/TextField";
import { SentValues } from "./formContext";

export interface FormFieldProps extends Omit<InputHTMLAttributes<HTMLInputElement>, "onChange" | "children"> {
  readonly name: string;
  readonly label: ReactNode;
  readonly hint?: ReactNode;
}

/** A text field of an {@link ActionForm}; keeps what was typed when the form comes back. */
export function FormField({ name, label, hint, className, defaultValue, ...rest }: FormFieldProps) {
  const sent = use(SentValues)[name];
  return (
    <Field label={label} hint={hint} className={className}>
      {({ "aria-invalid": _, ...ids }) => <input name={name} {...ids} {...rest} key={sent} defaultValue={sent ?? defaultValue} className={controlLook} />}
    </Field>
  );
}

export interface FormChoiceProps {
  readonly name: string;
  readonly label: ReactNode;
  readonly options: readonly { readonly value: string; readonly label: string }[];
  readonly defaultValue?: string;
  readonly className?: string;
  /** The label is read out and not shown, where what stands beside the control says the same. */
  readonly bare?: boolean;
}

/** A choice out of a list, in an {@link ActionForm}. */
export function FormChoice({ name, label, options, defaultValue, className, bare }: FormChoiceProps) {
  const sent = use(SentValues)[name];
  return (
    <Field label={bare ? <span className="sr-only">{label}</span> : label} className={className}>
      {({ "aria-invalid": _, ...ids }) => (
        <span className="relative block">
          <select
            name={name}
            {...ids}
            key={sent ?? defaultValue}
            defaultValue={sent ?? defaultValue}
            className={classNames(controlLook, "appearance-none pr-5")}
          >
            {options.map((option) => (
              <option key={option.value} value={option.value} className="bg-surface text-ink">
                {option.label}
              </option>
            ))}
          </select>
          <IconDown size={12} className="pointer-events-none absolute top-1/2 right-0 -translate-y-1/2 text-second" />
        </span>
      )}
    </Field>
  );
}
