import { ownBodyId } from "@/cells";
import { allow } from "@/app/_server/authorise";
import { database } from "@/app/_server/database";
import { json, route } from "@/app/_server/route";
import { bodiesOfGroup } from "@/db/queries/bodies";

/** The own bodies of the page's group, every version by its id, for whoever may put one on the page. */
export const GET = route<{ pageId: string }>(async (_request, { pageId }) => {
  const { object } = await allow("page", pageId, "edit");
  const bodies = await bodiesOfGroup(database(), object.groupId);
  return json({ bodies: bodies.map(({ code, version, body }) => ({ id: ownBodyId(code, version), code, version, body })) });
});
