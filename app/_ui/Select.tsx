"use client";

import type { ReactNode, SelectHTMLAttributes } from "react";
import { classNames } from "./classNames";
import { Field } from "./Field";
import { IconDown } from "./icons";

export interface Option<T extends string = string> {
  readonly value: T;
  readonly label: string;
}

export interface SelectProps<T extends string = string> extends Omit<SelectHTMLAttributes<HTMLSelectElement>, "onChange" | "value"> {
  readonly value: T;
  readonly options: readonly Option<T>[];
  readonly onChoose: (value: T) => void;
  /** Drawn above the control; for controls in a table, give `aria-label` in its place. */
  readonly label?: ReactNode;
  readonly hint?: ReactNode;
  readonly mono?: boolean;
}

/** A choice out of a list. The browser's own list opens, so that it works with every keyboard, reader and phone. */
export function Select<T extends string = string>({ value, options, onChoose, label, hint, mono, className, ...rest }: SelectProps<T>) {
  const drawn = (ids: { id?: string; "aria-describedby"?: string | undefined }) => (
    <span className={classNames("relative block", className)}>
      <select
        {...ids}
        {...rest}
        value={value}
        onChange={(event) => {
          const chosen = options.find((o) => o.value === event.target.value);
          if (chosen !== undefined) onChoose(chosen.value);
        }}
        className={classNames(
          "w-full appearance-none truncate border-0 border-b border-axis bg-transparent py-1 pr-5 pl-0 text-ui text-ink focus:border-indigo focus-visible:shadow-[inset_0_-1px_0_var(--indigo)] focus-visible:outline-none disabled:text-second",
          mono && "font-mono text-cell",
        )}
      >
        {options.map((option) => (
          <option key={option.value} value={option.value} className="bg-surface text-ink">
            {option.label}
          </option>
        ))}
      </select>
      <IconDown size={12} className="pointer-events-none absolute top-1/2 right-0 -translate-y-1/2 text-second" />
    </span>
  );
  if (label === undefined) return drawn({});
  return (
    <Field label={label} hint={hint}>
      {(ids) => drawn({ id: ids.id, "aria-describedby": ids["aria-describedby"] })}
    </Field>
  );
}
