"use client";

import { useActionState, useId, useState } from "react";
import { renamePage } from "@/app/_server/actions/pages";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { TextField } from "@/app/_ui/TextField";

export interface RenameDialogProps {
  readonly pageId: string;
  readonly title: string;
  readonly onClose: () => void;
}

/** Asks for a page's new title. Whoever has the page open sees it change. */
export function RenameDialog({ pageId, title, onClose }: RenameDialogProps) {
  const form = useId();
  const [text, setText] = useState(title);
  const [state, send, pending] = useActionState(async (before: object, fields: FormData) => {
    const answer = await renamePage(before, fields);
    if (answer.problem === undefined) onClose();
    return answer;
  }, {});
  return (
    <Dialog
      open
      onClose={onClose}
      title="Rename this page"
      actions={
        <>
          <Button onClick={onClose}>Leave it</Button>
          <Button look="main" type="submit" form={form} disabled={pending || text.trim() === ""}>
            Rename
          </Button>
        </>
      }
    >
      <form id={form} action={send}>
        <input type="hidden" name="pageId" value={pageId} />
        <TextField label="Title" name="title" value={text} onText={setText} maxLength={300} autoFocus required problem={state.problem} />
      </form>
    </Dialog>
  );
}
