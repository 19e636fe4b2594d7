"use client";

import { Button } from "@/app/_ui/Button";
import { counted } from "@/app/_ui/concise";
import type { Draft } from "@/realtime/client";
import { usePage, usePageStore } from "./pageContext";

/** Hands a draft to the person as a page document, as a file of their own. */
function download(draft: Draft): void {
  const url = URL.createObjectURL(new Blob([JSON.stringify(draft.document, null, 2)], { type: "application/json" }));
  const link = document.createElement("a");
  link.href = url;
  link.download = `${draft.document.title.replace(/[^\p{L}\p{N}]+/gu, "-").replace(/^-|-$/g, "") || "page"}-unsent.json`;
  link.click();
  setTimeout(() => URL.revokeObjectURL(url), 10_000);
}

/** Work that was never stored and never will be by itself: to keep as a file or to discard. */
export function DraftNotice() {
  const store = usePageStore();
  const drafts = usePage((s) => s.drafts);
  if (drafts.length === 0) return null;
  return (
    <ul role="alert" className="mb-8 max-w-[936px] border-t border-vermilion">
      {drafts.map((draft, n) => (
        <li key={n} className="flex flex-wrap items-baseline gap-x-6 gap-y-1 border-b border-hairline py-2">
          <span className="min-w-0 flex-1">
            {draft.edits > 0 ? `${counted(draft.edits, "edit")} of yours did not reach this page.` : "Work of yours did not reach this page."} {draft.why} It is
            kept in this browser only.
          </span>
          <Button onClick={() => download(draft)}>Download it</Button>
          <Button
            look="danger"
            onClick={() => {
              store.set({ drafts: drafts.filter((other) => other !== draft) });
              void draft.discard();
            }}
          >
            Discard it
          </Button>
        </li>
      ))}
    </ul>
  );
}
