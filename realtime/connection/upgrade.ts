import type { IncomingMessage } from "node:http";
import { credentialsFromCookies, type Credentials } from "@/db/credentials";
import { Close, closeSentences, OLDEST_CLIENT, type CloseCode } from "../protocol";

/** What an upgrade asks for, read from its address and headers; nothing of it has been checked against the database. */
export interface Asked {
  readonly is: "asked";
  readonly pageId: string;
  readonly epoch: number;
  /** The page on the screen was opened to be edited. */
  readonly toEdit: boolean;
  readonly credentials: Credentials;
}
export interface Refused {
  readonly is: "refused";
  readonly code: CloseCode;
  readonly reason: string;
}

const refused = (code: CloseCode, reason: string = closeSentences[code]): Refused => ({ is: "refused", code, reason });
const page = /^(?:\/[A-Za-z0-9_-]+)*\/pages\/([0-9a-fA-F-]{36})\/?$/;

/**
 * Reads an upgrade (rule A1): `/pages/<id>?epoch=…&version=…&edit=…`, below any path that a proxy puts before it. The cookies say
 * who it is; no secret is in the address. A browser names the origin its page came from, and only ours may open sockets.
 */
export function readUpgrade(request: IncomingMessage, origins: readonly string[], secure: boolean): Asked | Refused {
  const { origin, host, cookie } = request.headers;
  if (origin === undefined || !origins.includes(origin)) {
    return refused(Close.forbidden, `Pages opened at ${origin?.slice(0, 60) ?? "an unnamed address"} may not connect here.`);
  }
  const address = `http://${host ?? "localhost"}${request.url ?? "/"}`;
  if (!URL.canParse(address)) return refused(Close.notFound);
  const { pathname, searchParams } = new URL(address);
  const pageId = page.exec(pathname)?.[1];
  if (pageId === undefined) return refused(Close.notFound);
  const version = Number(searchParams.get("version"));
  if (!Number.isInteger(version) || version < OLDEST_CLIENT) return refused(Close.reload);
  return {
    is: "asked",
    pageId: pageId.toLowerCase(),
    epoch: Number(searchParams.get("epoch")),
    toEdit: searchParams.get("edit") === "1",
    credentials: credentialsFromCookies(cookie, secure),
  };
}
