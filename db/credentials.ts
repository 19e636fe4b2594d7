import { hashToken } from "./tokens";

/**
 * The two cookies that say who somebody is, shared by the web and the realtime process.
 *
 * Over https the names carry `__Secure-`, which a browser accepts from a secure origin alone.
 */
export function cookieNames(secure: boolean): { readonly session: string; readonly reading: string } {
  const prefix = secure ? "__Secure-" : "";
  return { session: `${prefix}cotectic-session`, reading: `${prefix}cotectic-reading` };
}

/** True where the product is reached over https, as `NEXTAUTH_URL` says. */
export function isSecure(url: string | undefined = process.env.NEXTAUTH_URL): boolean {
  return url?.startsWith("https://") ?? false;
}

/** How many reading links one browser keeps open at once; the oldest is forgotten first. */
export const READING_TOKENS = 6;

/** Secrets of the reading links a browser has opened, newest first, as its cookie holds them. */
export function readingTokens(cookie: string | undefined): string[] {
  return (cookie ?? "")
    .split(".")
    .filter((token) => /^[A-Za-z0-9_-]{20,100}$/.test(token))
    .slice(0, READING_TOKENS);
}

/** The value of the reading cookie after one more link was opened. */
export function withReadingToken(cookie: string | undefined, token: string): string {
  return [token, ...readingTokens(cookie).filter((other) => other !== token)].slice(0, READING_TOKENS).join(".");
}

/** The hashes of what a request brought; nothing in it has been checked against the database yet. */
export interface Credentials {
  readonly sessionHash: string | null;
  readonly readingHashes: readonly string[];
}

/** Credentials from a `Cookie` header. */
export function credentialsFromCookies(header: string | undefined, secure: boolean = isSecure()): Credentials {
  const names = cookieNames(secure);
  const cookies = new Map<string, string>();
  for (const part of (header ?? "").split(";")) {
    const equals = part.indexOf("=");
    if (equals > 0) cookies.set(part.slice(0, equals).trim(), part.slice(equals + 1).trim());
  }
  return credentialsFrom(cookies.get(names.session), cookies.get(names.reading));
}

/** Credentials from the two cookies' values. */
export function credentialsFrom(session: string | undefined, reading: string | undefined): Credentials {
  return { sessionHash: session ? hashToken(session) : null, readingHashes: readingTokens(reading).map(hashToken) };
}
