import { Refusal } from "./problem";

/**
 * Refuses a state-changing request that did not come from a page of ours.
 *
 * Browsers send `Origin` with every such request; under a `no-referrer` policy a plain form sends `null`, and then
 * `Sec-Fetch-Site`, which no page can set, must say that the request came from our own origin. Neither
 * `X-Forwarded-Host` nor a missing header is believed.
 *
 * @param headers of the request
 * @param ours the addresses people use, apart by commas: `APP_ORIGIN`, or `NEXTAUTH_URL` where that is not set
 */
export function assertOwnOrigin(headers: Pick<Headers, "get">, ours: string | undefined = process.env.APP_ORIGIN ?? process.env.NEXTAUTH_URL): void {
  const origin = headers.get("origin");
  const from = origin === null || origin === "null" ? null : origin;
  if (from === null ? headers.get("sec-fetch-site") === "same-origin" : isOurs(from, ours)) return;
  throw new Refusal(
    403,
    "Sent from somewhere else",
    `This request came from ${from ?? "an unnamed place"}, not from a page of this server. Open the page here and try again.`,
  );
}

function isOurs(origin: string, ours: string | undefined): boolean {
  return (ours ?? "").split(",").some((address) => URL.canParse(address.trim()) && new URL(address.trim()).origin === origin);
}
