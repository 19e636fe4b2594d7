import { Refusal } from "./problem";

/**
 * Refuses a state-changing request that did not come from a page of ours.
 *
 * Browsers send `Origin` with every such request; under a `no-referrer` policy a plain form sends `null`, and then
 * `Sec-Fetch-Site`, which no page can set, must say that the request came from our own origin. Neither
 * `X-Forwarded-Host` nor a missing header is believed.
 *
 * @param headers of the request
 * @param ours the address people use, `NEXTAUTH_URL`
 */
export function assertOwnOrigin(headers: Pick<Headers, "get">, ours: string | undefined = process.env.NEXTAUTH_URL): void {
  const origin = headers.get("origin");
  const from = origin === null || origin === "null" ? null : origin;
  if (from === null ? headers.get("sec-fetch-site") === "same-origin" : isOurs(from, ours)) return;
  throw new Refusal(403, "Sent from somewhere else", `This request came from ${from ?? "an unnamed place"}, not from a page of this server. Open the page here and try again.`);
}

function isOurs(origin: string, ours: string | undefined): boolean {
  if (!ours || !URL.canParse(ours)) return false;
  return origin === new URL(ours).origin;
}
