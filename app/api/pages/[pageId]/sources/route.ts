import { allow } from "@/app/_server/authorise";
import { countTry } from "@/app/_server/limits";
import { json, route } from "@/app/_server/route";
import { keepUpload } from "@/app/_server/upload";

/** Keeps a table: raw bytes in the body, the file's name URI-encoded in `x-file-name`. */
export const POST = route<{ pageId: string }>(async (request, { pageId }) => {
  const { object, userId } = await allow("page", pageId, "upload source");
  await countTry("upload", object.groupId);
  return json(await keepUpload(request, object.groupId, userId), 201);
});
