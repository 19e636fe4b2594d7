/** Channel on which other processes tell what happened to a page: edits they committed, a restored moment, a new remark. */
export const PAGES_CHANNEL = "pages";

export type PageNotice =
  | { readonly pageId: string; readonly kind: "edits"; readonly seqs: readonly string[] }
  | { readonly pageId: string; readonly kind: "epoch" }
  | { readonly pageId: string; readonly kind: "remarks" };

/** A notice as it came over the channel; `null` for what is none. */
export function readPageNotice(payload: unknown): PageNotice | null {
  if (typeof payload !== "object" || payload === null) return null;
  const { pageId, kind, seqs } = payload as Readonly<Record<string, unknown>>;
  if (typeof pageId !== "string") return null;
  if (kind === "epoch" || kind === "remarks") return { pageId, kind };
  if (kind !== "edits" || !Array.isArray(seqs) || !seqs.every((seq) => typeof seq === "string" && /^\d{1,19}$/.test(seq))) return null;
  return { pageId, kind, seqs };
}
