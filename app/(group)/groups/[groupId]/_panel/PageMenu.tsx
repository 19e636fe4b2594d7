"use client";

import { startTransition, useActionState, useState } from "react";
import { archivePage, duplicatePage } from "@/app/_server/actions/pages";
import { IconButton } from "@/app/_ui/IconButton";
import { IconMore } from "@/app/_ui/icons";
import { Menu } from "@/app/_ui/Menu";
import { RenameDialog } from "./RenameDialog";

export interface PageMenuProps {
  readonly pageId: string;
  readonly title: string;
  readonly archived: boolean;
}

/** What can be done with a page from outside it. */
export function PageMenu({ pageId, title, archived }: PageMenuProps) {
  const [renaming, setRenaming] = useState(false);
  const [copied, copy] = useActionState(duplicatePage, {});
  const [put, archive] = useActionState(archivePage, {});
  const form = (fields: Record<string, string>) => {
    const data = new FormData();
    for (const [name, value] of Object.entries({ pageId, ...fields })) data.set(name, value);
    return data;
  };
  const problem = copied.problem ?? put.problem;
  return (
    <>
      <Menu
        items={[
          { label: "Rename", opens: true, onChoose: () => setRenaming(true), disabled: archived },
          { label: "Duplicate", onChoose: () => startTransition(() => copy(form({}))) },
          { line: true },
          {
            label: archived ? "Take out of the archive" : "Archive",
            onChoose: () => startTransition(() => archive(form({ archived: archived ? "no" : "yes" }))),
          },
        ]}
      >
        <IconButton look="quiet" label={`Actions for ${title}`}>
          <IconMore />
        </IconButton>
      </Menu>
      {renaming ? <RenameDialog pageId={pageId} title={title} onClose={() => setRenaming(false)} /> : null}
      {problem ? (
        <span role="alert" className="text-vermilion">
          {problem}
        </span>
      ) : null}
    </>
  );
}
