"use client";

import { useMemo } from "react";
import type { Text } from "yjs";
import type { PageView } from "@/app/_page/contract";

/** The shared text of a block, where the page is live and may be edited; null where it is only read. */
export function useSharedText(view: PageView, blockKey: string): Text | null {
  const edits = view.mode === "edit" ? view.edits : null;
  return useMemo(() => edits?.text(blockKey) ?? null, [edits, blockKey]);
}
