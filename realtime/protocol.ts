import * as decoding from "lib0/decoding";
import * as encoding from "lib0/encoding";

/** What travels between a page in a browser and the realtime server; the rules are in PROTOCOL.md. Shared by both sides. */

/** Version of the client. The server tells anything older than {@link OLDEST_CLIENT} to reload. */
export const CLIENT_VERSION = 1;
export const OLDEST_CLIENT = 1;

/** First number of a message. 0, 1 and 3 are those of y-protocols. */
export const Message = { sync: 0, awareness: 1, askAwareness: 3, receipt: 10, alive: 11, announcement: 12 } as const;
/** First number of a sync message. */
export const Sync = { step1: 0, step2: 1, update: 2 } as const;

export const MOST_LIVE_BYTES = 1 << 20;
export const MOST_STEP2_BYTES = 8 << 20;
export const MOST_PAGE_BYTES = 10 << 20;
export const MOST_AWARENESS_BYTES = 4096;
/** Sustained messages a second, and how many may come at once. */
export const MESSAGE_RATE = { perSecond: 50, burst: 200 } as const;
export const AWARENESS_PER_SECOND = 20;
export const HEARTBEAT_MS = 15_000;

/** Codes with which the server closes a socket. 44xx are final and explained on the screen; 45xx mean: try again. */
export const Close = {
  malformed: 4400,
  signedOut: 4401,
  forbidden: 4403,
  notFound: 4404,
  roleChanged: 4405,
  epochChanged: 4409,
  tooLarge: 4413,
  refused: 4422,
  reload: 4426,
  restarting: 4500,
  notDurable: 4503,
  outOfStep: 4522,
  tooFast: 4529,
} as const;
export type CloseCode = (typeof Close)[keyof typeof Close];

/** What each close code says to the person at the screen, where the server gives no sentence of its own. */
export const closeSentences: Readonly<Record<CloseCode, string>> = {
  4400: "The server could not read what this page sent. Reload the page.",
  4401: "You are signed out. Sign in again to go on editing.",
  4403: "You have no access to this page any more. Ask a lead of the group.",
  4404: "This page does not exist.",
  4405: "Your role in the group was changed. Reload the page to go on with it.",
  4409: "The page was set back to an earlier moment. Reload it; what you had not sent is offered to you.",
  4413: "This change is too large for a page. Make it in smaller parts.",
  4422: "The server refused a change.",
  4426: "This page was opened with an older version. Reload it.",
  4500: "The server is starting anew. The page connects again by itself.",
  4503: "The change could not be stored just now. The page connects again and sends it once more.",
  4522: "Something is missing before this change. The page connects again and sends everything.",
  4529: "Too many changes at once. The page connects again in a moment.",
};

/** Final closes end a connection for good: the browser does not try again. */
export const isFinal = (code: number): boolean => code >= 4400 && code < 4500;

/** Numbers of updates and step 2 messages, counted on each socket from 1 (rule S2). */
export type Receipt =
  { readonly is: "stored"; readonly upTo: number } | { readonly is: "refused"; readonly number: number; readonly code: CloseCode; readonly reason: string };

/** Something that happened beside the document, such as a new remark (rule A7). */
export interface Announcement {
  readonly kind: string;
  readonly [detail: string]: unknown;
}

export function encodeReceipt(receipt: Receipt): Uint8Array {
  const encoder = encoding.createEncoder();
  encoding.writeVarUint(encoder, Message.receipt);
  if (receipt.is === "stored") {
    encoding.writeVarUint(encoder, 0);
    encoding.writeVarUint(encoder, receipt.upTo);
  } else {
    encoding.writeVarUint(encoder, 1);
    encoding.writeVarUint(encoder, receipt.number);
    encoding.writeVarUint(encoder, receipt.code);
    encoding.writeVarString(encoder, receipt.reason);
  }
  return encoding.toUint8Array(encoder);
}

/** Reads a receipt whose message type has been read. */
export function readReceipt(decoder: decoding.Decoder): Receipt {
  if (decoding.readVarUint(decoder) === 0) return { is: "stored", upTo: decoding.readVarUint(decoder) };
  const number = decoding.readVarUint(decoder);
  return { is: "refused", number, code: decoding.readVarUint(decoder) as CloseCode, reason: decoding.readVarString(decoder) };
}

export function encodeAlive(): Uint8Array {
  return Uint8Array.of(Message.alive);
}

export function encodeAnnouncement(announcement: Announcement): Uint8Array {
  const encoder = encoding.createEncoder();
  encoding.writeVarUint(encoder, Message.announcement);
  encoding.writeVarString(encoder, JSON.stringify(announcement));
  return encoding.toUint8Array(encoder);
}

/** Reads an announcement whose message type has been read; `null` for one that cannot be read. */
export function readAnnouncement(decoder: decoding.Decoder): Announcement | null {
  try {
    const value: unknown = JSON.parse(decoding.readVarString(decoder));
    return typeof value === "object" && value !== null && "kind" in value && typeof value.kind === "string" ? (value as Announcement) : null;
  } catch {
    return null;
  }
}

/** A sync message: its kind and its bytes. */
export function encodeSync(kind: (typeof Sync)[keyof typeof Sync], bytes: Uint8Array): Uint8Array {
  const encoder = encoding.createEncoder();
  encoding.writeVarUint(encoder, Message.sync);
  encoding.writeVarUint(encoder, kind);
  encoding.writeVarUint8Array(encoder, bytes);
  return encoding.toUint8Array(encoder);
}

/** One person's entry in an awareness message. */
export interface AwarenessEntry {
  readonly clientId: number;
  readonly clock: number;
  readonly state: Readonly<Record<string, unknown>> | null;
}

/** An awareness message as y-protocols writes it. */
export function encodeAwareness(entries: readonly AwarenessEntry[]): Uint8Array {
  const inner = encoding.createEncoder();
  encoding.writeVarUint(inner, entries.length);
  for (const { clientId, clock, state } of entries) {
    encoding.writeVarUint(inner, clientId);
    encoding.writeVarUint(inner, clock);
    encoding.writeVarString(inner, JSON.stringify(state));
  }
  const encoder = encoding.createEncoder();
  encoding.writeVarUint(encoder, Message.awareness);
  encoding.writeVarUint8Array(encoder, encoding.toUint8Array(inner));
  return encoding.toUint8Array(encoder);
}

/** Reads an awareness message whose type has been read. @throws Error where it is damaged */
export function readAwareness(decoder: decoding.Decoder): readonly AwarenessEntry[] {
  const inner = decoding.createDecoder(decoding.readVarUint8Array(decoder));
  const count = decoding.readVarUint(inner);
  const entries: AwarenessEntry[] = [];
  for (let n = 0; n < count; n++) {
    const clientId = decoding.readVarUint(inner);
    const clock = decoding.readVarUint(inner);
    const state: unknown = JSON.parse(decoding.readVarString(inner));
    if (typeof state !== "object" || Array.isArray(state)) throw new Error("an awareness state is an object or null");
    entries.push({ clientId, clock, state: state as AwarenessEntry["state"] });
  }
  return entries;
}
