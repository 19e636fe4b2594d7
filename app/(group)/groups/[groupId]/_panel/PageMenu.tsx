"use client";

import { useRouter } from "next/navigation";
import { startTransition, useActionState } from "react";
import { archivePage, duplicatePage } from "@/app/_server/actions/pages";
import { IconButton } from "@/app/_ui/IconButton";
import { IconMore } from "@/app/_ui/icons";
import { Menu } from "@/app/_ui/Menu";

export interface PageMenuProps {
  readonly pageId: string;
  readonly title: string;
  readonly archived: boolean;
}

/** What can be done with a page from outside it. Its title is edited on the page, where everybody sees it change. */
export function PageMenu({ pageId, title, archived }: PageMenuProps) {
  const router = useRouter();
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
          { label: "Rename", onChoose: () => router.push(`/pages/${pageId}`), disabled: archived },
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
      {problem ? (
        <span role="alert" className="text-vermilion">
          {problem}
        </span>
      ) : null}
    </>
  );
}
