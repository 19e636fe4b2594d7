/**
 * Address of the realtime server for a page to connect to: `REALTIME_PUBLIC_URL`, else `:3001`, a port on whichever host the
 * browser has the page from. Only the browser knows that host: where a form leads to a page, the framework asks for the page
 * by its own address.
 */
export function realtimeAddressOnPage(): string {
  const { REALTIME_PUBLIC_URL, REALTIME_PORT = "3001" } = process.env;
  return REALTIME_PUBLIC_URL || `:${REALTIME_PORT}`;
}

/**
 * Address of the realtime server as a browser reaches it: `REALTIME_PUBLIC_URL`, else the host the browser asked for, since
 * the session cookie must travel to both, with the realtime server's port.
 *
 * @param host the request's `Host`; the framework's own idea of the host turns 127.0.0.1 into localhost
 */
export function realtimeAddress(host: string | null): string {
  const { REALTIME_PUBLIC_URL, REALTIME_PORT = "3001", NEXTAUTH_URL } = process.env;
  if (REALTIME_PUBLIC_URL) return REALTIME_PUBLIC_URL;
  const asked = `http://${host ?? ""}`;
  const name = URL.canParse(asked) ? new URL(asked).hostname : "localhost";
  return `${NEXTAUTH_URL?.startsWith("https://") ? "wss" : "ws"}://${name}:${REALTIME_PORT}`;
}
