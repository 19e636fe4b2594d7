import type { PageDocument } from "@/cells";

/** What the server hands to the screens of a page. Plain data only: it crosses from server to browser. */

export type PageRole = "lead" | "analyst" | "reader" | "guest";

/** The last snapshot of a page, for the sentence under its title. */
export interface LastSnapshot {
  readonly id: string;
  readonly number: number;
  readonly hash: string;
  /** ISO 8601, UTC. */
  readonly frozenAt: string;
}

export interface LivePageProps {
  readonly page: { readonly id: string; readonly groupId: string; readonly groupName: string; readonly epoch: number; readonly title: string };
  /** null for guests. */
  readonly me: { readonly id: string; readonly name: string } | null;
  readonly role: PageRole;
  /** ws:// or wss:// address of the realtime server; a path ("/live") or a port (":3001") alone is one of the page's own host. */
  readonly realtimeUrl: string;
  /** Version of the client, told to the realtime server at the upgrade. */
  readonly version: string;
  /** The document as the database has it, for the first paint; the live one replaces it. */
  readonly initialDocument?: PageDocument | null;
  readonly lastSnapshot?: LastSnapshot | null;
  /** For guests: until when the link is good, ISO 8601. */
  readonly guestUntil?: string | null;
  /** Names of the group's people by id, for amendments and their reasons; left out for guests. */
  readonly people?: Readonly<Record<string, string>>;
}

export interface SnapshotFile {
  readonly path: string;
  readonly size: number;
}

export interface FrozenPageProps {
  readonly snapshot: {
    readonly id: string;
    readonly pageId: string;
    readonly number: number;
    readonly title: string;
    /** SHA-256 of the manifest, hexadecimal. */
    readonly hash: string;
    readonly previous?: { readonly number: number; readonly hash: string; readonly frozenAt: string } | null;
    /** ISO 8601, UTC. */
    readonly frozenAt: string;
    readonly engine: string;
    readonly note?: string | null;
    /** Credited names, where their owners chose so. */
    readonly people?: readonly string[];
  };
  readonly groupName: string;
  readonly groupId: string;
  readonly role: PageRole;
  readonly me: { readonly id: string; readonly name: string } | null;
  readonly document: PageDocument;
  /** Files of the bundle; sources are fetched from `/api/snapshots/[id]/files/…` by their path. */
  readonly files: readonly SnapshotFile[];
  /** For guests: until when the link is good, ISO 8601. */
  readonly guestUntil?: string | null;
}
