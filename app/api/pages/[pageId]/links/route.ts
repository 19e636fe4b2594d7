import { z } from "zod";
import { allow } from "@/app/_server/authorise";
import { database } from "@/app/_server/database";
import { address } from "@/app/_server/mail";
import { Refusal } from "@/app/_server/problem";
import { json, readJson, route } from "@/app/_server/route";
import { addLink, linksOf } from "@/db/queries/links";
import { findSnapshot } from "@/db/queries/snapshots";

const body = z
  .strictObject({
    kind: z.enum(["snapshot", "page"]),
    snapshotId: z.uuid().optional(),
    days: z.number().int().min(1).max(730),
    label: z.string().trim().max(120).optional(),
  })
  .refine((link) => (link.kind === "snapshot") === (link.snapshotId !== undefined), "a link to a snapshot names it, a link to a page names none");

/** Reading links to this page and its snapshots. */
export const GET = route<{ pageId: string }>(async (_request, { pageId }) => {
  await allow("page", pageId, "share");
  return json({ links: await linksOf(database(), pageId) });
});

/** Makes a reading link. Its address is told this once and can never be looked up again. */
export const POST = route<{ pageId: string }>(async (request, { pageId }) => {
  const { object, userId } = await allow("page", pageId, "share");
  if (userId === null) throw new Refusal(403, "Not yours to do", "A guest cannot hand out reading links.");
  const { snapshotId, days, label = "" } = await readJson(request, body);
  if (snapshotId && (await findSnapshot(database(), snapshotId))?.pageId !== pageId)
    throw new Refusal(404, "No such snapshot", "This page has no such snapshot.");
  const target = snapshotId ? ({ kind: "snapshot", snapshotId } as const) : ({ kind: "page", pageId } as const);
  const { id, token, expiresAt } = await addLink(database(), { groupId: object.groupId, target, days, label, by: userId });
  return json({ id, url: address(`/read/${token}`), expiresAt }, 201);
});
