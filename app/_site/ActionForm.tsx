"use client";

import { useActionState, type ReactNode } from "react";
import { Button, type ButtonLook } from "@/app/_ui/Button";
import { classNames } from "@/app/_ui/classNames";
import { SentValues } from "./formContext";

/** What a form's action gives back; see app/_server/action.ts. */
interface FormState {
  readonly problem?: string;
  readonly done?: string;
  readonly values?: Readonly<Record<string, string>>;
}

export interface ActionFormProps {
  readonly action: (before: FormState, form: FormData) => Promise<FormState>;
  /** What the button says. */
  readonly submit: string;
  readonly look?: ButtonLook;
  /** Button beside the fields instead of under them. */
  readonly inline?: boolean;
  readonly className?: string;
  /** Named for screen readers where the page has several forms. */
  readonly label?: string;
  readonly children?: ReactNode;
}

/** A form over a server action: works before its script has loaded, keeps what was typed, and says in words what is wrong. */
export function ActionForm({ action, submit, look = "main", inline, className, label, children }: ActionFormProps) {
  const [state, send, pending] = useActionState(action, {});
  return (
    <form action={send} aria-label={label} className={classNames(inline ? "flex flex-wrap items-end gap-x-4 gap-y-2" : "grid gap-4", className)}>
      <SentValues value={state.values ?? {}}>{children}</SentValues>
      <div className="flex items-baseline gap-4">
        <Button type="submit" look={look} disabled={pending}>
          {submit}
        </Button>
        {state.done ? (
          <p role="status" className="text-green">
            {state.done}
          </p>
        ) : null}
      </div>
      {state.problem ? (
        <p role="alert" className="basis-full text-vermilion">
          {state.problem}
        </p>
      ) : null}
    </form>
  );
}
