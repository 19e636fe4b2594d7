"use client";

import { useActionState } from "react";
import { Button } from "@/app/_ui/Button";

interface SignOutProps {
  readonly action: (before: { problem?: string }, form: FormData) => Promise<{ problem?: string }>;
  readonly label: string;
}

/** A button that signs out. */
export function SignOut({ action, label }: SignOutProps) {
  const [state, send, pending] = useActionState(action, {});
  return (
    <form action={send}>
      <Button type="submit" disabled={pending}>
        {label}
      </Button>
      {state.problem ? (
        <p role="alert" className="text-vermilion">
          {state.problem}
        </p>
      ) : null}
    </form>
  );
}
