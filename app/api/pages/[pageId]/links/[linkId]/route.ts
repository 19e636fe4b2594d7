import { allow } from "@/app/_server/authorise";
import { database } from "@/app/_server/database";
import { Refusal } from "@/app/_server/problem";
import { json, route } from "@/app/_server/route";
import { notifyAccess } from "@/db/queries/accessEvents";
import { linksOf, withdrawLink } from "@/db/queries/links";

/** Withdraws a reading link; whoever reads by it is shut out at once. */
export const DELETE = route<{ pageId: string; linkId: string }>(async (_request, { pageId, linkId }) => {
  const { object } = await allow("page", pageId, "share");
  const link = (await linksOf(database(), pageId)).find((one) => one.id === linkId);
  if (!link) throw new Refusal(404, "No such link", "This page has no such reading link.");
  if (!(await withdrawLink(database(), object.groupId, link.id))) throw new Refusal(409, "Withdrawn already", "This reading link was withdrawn before.");
  await notifyAccess(database(), { linkId: link.id });
  return json({ withdrawn: link.id });
});
