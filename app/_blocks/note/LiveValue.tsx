"use client";

import { formatValue, withUnit } from "@/app/_ui/concise";
import type { PageView } from "@/app/_page/contract";
import type { NoteValue } from "@/cells";

const look = "font-mono text-[0.86em] whitespace-nowrap underline decoration-dotted underline-offset-4";

/** A value of the page inside a sentence: live, and asked where it comes from by a click. */
export function LiveValue({ value, view }: { readonly value: NoteValue | undefined; readonly view: PageView }) {
  if (value === undefined) return null;
  if (value.shown === null) {
    return (
      <span className={`${look} decoration-vermilion text-vermilion`} title="Nothing on this page has this name">
        {`{{${value.name}}}`}
      </span>
    );
  }
  const text = withUnit(
    value.value !== null && value.sigma !== null ? formatValue(value.value, value.sigma, { form: view.settings.uncertainty }) : value.shown,
    value.unit,
  );
  const { trace } = value;
  if (trace === undefined) return <span className={`${look} decoration-second`}>{text}</span>;
  return (
    <button
      type="button"
      className={`${look} decoration-second hover:decoration-indigo hover:text-indigo`}
      aria-label={`${text}, ${value.name}. Trace`}
      onClick={(event) => {
        event.stopPropagation();
        view.trace(trace);
      }}
    >
      {text}
    </button>
  );
}
