import type { Heading, ListName, RecordLine } from "../document";

/** A page as storage holds it: the compacted base and the log since, read at one moment. */
export interface StoredPage {
  readonly groupId: string;
  readonly epoch: number;
  readonly archived: boolean;
  /** Everything whose log rows are gone; `null` for a page never compacted. */
  readonly base: Uint8Array | null;
  readonly updates: readonly Uint8Array[];
  /** Which person each Yjs client id belongs to. */
  readonly owners: ReadonlyMap<number, string | null>;
}

/** One accepted edit, to be committed. */
export interface EditRow {
  readonly pageId: string;
  readonly epoch: number;
  readonly userId: string;
  readonly update: Uint8Array;
  /** Yjs client ids that are this person's from now on. */
  readonly clients: readonly number[];
  readonly record: readonly RecordLine[];
  /** Title and outline, where this edit changed them. */
  readonly heading: Heading | null;
}

/** What became of a batch: all of it is committed, or nothing of it. */
export type Appended = { readonly is: "stored"; readonly seqs: readonly bigint[] } | { readonly is: "refused"; readonly rows: readonly number[] };

/**
 * Where pages are kept. Every implementation passes one suite of tests.
 *
 * A promise that is fulfilled means that the disk has it.
 */
export interface PageStorage {
  /** Reads a page at one moment (rule S5); `null` where there is none. */
  load(pageId: string): Promise<StoredPage | null>;
  /**
   * Commits edits, their record, owners and headings in one transaction. If one of them is by somebody who may not edit the
   * page at this moment, or meant for another epoch, nothing is written and those rows are named.
   */
  append(rows: readonly EditRow[]): Promise<Appended>;
  /** Updates by their sequence numbers, in order. */
  fetch(pageId: string, seqs: readonly bigint[]): Promise<readonly Uint8Array[]>;
  /** Whether an entry of an attributed list was on this page at some time, word for word. */
  isOnRecord(pageId: string, list: ListName, entry: Readonly<Record<string, unknown>>): Promise<boolean>;
  /** Folds the log into the base (rule S6); returns how many rows it covered, 0 where there was nothing or somebody else is at it. */
  compact(pageId: string): Promise<number>;
  close(): Promise<void>;
}
