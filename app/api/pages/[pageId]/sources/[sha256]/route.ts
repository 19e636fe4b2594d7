import { allow } from "@/app/_server/authorise";
import { database } from "@/app/_server/database";
import { bytesResponse } from "@/app/_server/download";
import { loadPage } from "@/app/_server/documents";
import { Refusal } from "@/app/_server/problem";
import { route } from "@/app/_server/route";
import { sourceBytes } from "@/db/queries/sources";

/** A source, byte for byte as it was uploaded. A guest gets those that stand on the page they may read, and no others. */
export const GET = route<{ pageId: string; sha256: string }>(async (_request, { pageId, sha256 }) => {
  const { subject, object } = await allow("page", pageId, "read source");
  const missing = () => new Refusal(404, "No such source", "This page has no source with that hash.");
  if (subject.role === "guest" && !(await isOnPage(pageId, sha256))) throw missing();
  const source = await sourceBytes(database(), object.groupId, sha256);
  if (!source) throw missing();
  return bytesResponse(source.bytes, { name: source.name, mediaType: source.mediaType, immutable: true });
});

async function isOnPage(pageId: string, sha256: string): Promise<boolean> {
  const { page } = await loadPage(pageId);
  return page.blocks.some((block) => block.kind === "data" && block.source?.sha256 === sha256);
}
