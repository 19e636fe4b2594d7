import { database } from "@/app/_server/database";
import { plainPage } from "@/app/_server/plainPage";
import { findLink } from "@/db/queries/links";

interface Context {
  readonly params: Promise<{ token: string }>;
}

/** Says that a reading link is over, with the status that says so to programs too. */
export async function GET(request: Request, { params }: Context): Promise<Response> {
  const { token } = await params;
  const link = await findLink(database(), token);
  if (link?.state === "expired")
    return plainPage(
      request,
      410,
      "This reading link has run out",
      `It was good until ${link.expiresAt.toISOString().slice(0, 10)}. Ask the group ${link.group} for a new one if you still need to read it.`,
    );
  if (link?.state === "withdrawn")
    return plainPage(
      request,
      410,
      "This reading link was withdrawn",
      `The group ${link.group} has closed it. Ask them for a new one if you still need to read it.`,
    );
  return plainPage(
    request,
    410,
    "This reading link is over",
    "It has run out or was withdrawn. Open the link you were given again to see which, or ask the group for a new one.",
  );
}
