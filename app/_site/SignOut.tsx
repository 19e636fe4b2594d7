"use client";

import { startTransition, useActionState, useState } from "react";
import { Button } from "@/app/_ui/Button";
import { counted } from "@/app/_ui/concise";
import { Dialog } from "@/app/_ui/Dialog";

interface SignOutProps {
  readonly action: (before: { problem?: string }, form: FormData) => Promise<{ problem?: string }>;
  readonly label: string;
  readonly userId: string;
}

/** A button that signs out. What this browser keeps of pages goes with it, so edits that no server has are asked about first. */
export function SignOut({ action, label, userId }: SignOutProps) {
  const [state, send, pending] = useActionState(action, {});
  const [unsent, setUnsent] = useState(0);
  const leave = async (loses: boolean) => {
    // Loaded only now: no other part of this screen needs the live page's code.
    const { purgeUnsentEdits, unsentEdits } = await import("@/realtime/client");
    const waiting = unsentEdits(userId);
    if (waiting > 0 && !loses) return setUnsent(waiting);
    await purgeUnsentEdits(userId);
    setUnsent(0);
    startTransition(() => send(new FormData()));
  };
  return (
    <form action={() => void leave(false)}>
      <Button type="submit" disabled={pending}>
        {label}
      </Button>
      {state.problem ? (
        <p role="alert" className="text-vermilion">
          {state.problem}
        </p>
      ) : null}
      <Dialog
        open={unsent > 0}
        onClose={() => setUnsent(0)}
        title={`${counted(unsent, "edit")} would be lost`}
        actions={
          <>
            <Button look="danger" onClick={() => void leave(true)}>
              Sign out and lose them
            </Button>
            <Button look="main" onClick={() => setUnsent(0)}>
              Stay signed in
            </Button>
          </>
        }
      >
        <p>
          This browser holds edits that have not reached the server, and signing out deletes them. To keep them, stay signed in, open their page while online
          and wait until it says Saved.
        </p>
      </Dialog>
    </form>
  );
}
