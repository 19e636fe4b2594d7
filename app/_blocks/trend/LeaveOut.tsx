"use client";

import { useState } from "react";
import { Button } from "@/app/_ui/Button";
import { TextField } from "@/app/_ui/TextField";

/** Asks for the reason without which nothing is left out. */
export function LeaveOut({ what, onLeaveOut }: { readonly what: string; onLeaveOut(reason: string): void }) {
  const [reason, setReason] = useState("");
  const [asked, setAsked] = useState(false);
  const isEmpty = reason.trim() === "";
  return (
    <form
      className="grid gap-2"
      onSubmit={(event) => {
        event.preventDefault();
        if (isEmpty) setAsked(true);
        else onLeaveOut(reason.trim());
      }}
    >
      <TextField
        label={`Why ${what} is left out of this fit`}
        value={reason}
        onText={setReason}
        maxLength={2000}
        problem={asked && isEmpty ? "Give a reason: whoever reads this page later needs it." : null}
      />
      <Button type="submit" look="main" className="justify-self-start">
        Leave out of this fit
      </Button>
    </form>
  );
}
