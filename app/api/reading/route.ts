import { cookies } from "next/headers";
import { database } from "@/app/_server/database";
import { countTry, placeOf } from "@/app/_server/limits";
import { route } from "@/app/_server/route";
import { cookieOptions } from "@/app/_server/session";
import { cookieNames, isSecure, withReadingToken } from "@/db/credentials";
import { exchangeLink, findLink } from "@/db/queries/links";

/**
 * The button of a reading link: exchanges the link for a cookie that opens this one thing and nothing else, and goes there.
 * A plain form sends it, so that it works without scripts.
 */
export const POST = route(async (request) => {
  await countTry("reading link from", placeOf(request.headers));
  const token = String((await request.formData()).get("token") ?? "");
  const link = await findLink(database(), token);
  const opened = link && (await exchangeLink(database(), link.id));
  if (!link || !opened) return see(`/read/${encodeURIComponent(token || "none")}/ended`);
  const jar = await cookies();
  const { reading } = cookieNames(isSecure());
  jar.set(reading, withReadingToken(jar.get(reading)?.value, opened.token), cookieOptions(new Date(Date.now() + 400 * 86_400_000)));
  return see(link.snapshotId ? `/snapshots/${link.snapshotId}` : `/pages/${link.pageId ?? ""}`);
});

/** "See other", relative, so that it holds behind any proxy. */
function see(location: string): Response {
  return new Response(null, { status: 303, headers: { location, "cache-control": "no-store" } });
}
