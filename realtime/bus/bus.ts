/** A flush as it is told to every process that serves pages: which page, and the updates that are committed by now. */
export interface Flushed {
  readonly pageId: string;
  /** The process that committed it. */
  readonly from: string;
  readonly seqs: readonly bigint[];
  readonly updates: readonly Uint8Array[];
}

export type FlushListener = (flushed: Flushed) => void;

/**
 * What carries committed edits between processes (rule M1). Every implementation passes one suite of tests: each listener
 * of a page hears each flush once, those of one process in the order they were published, its own included; a listener that
 * fails harms no other.
 */
export interface Bus {
  publish(flushed: Flushed): void;
  /** Listens to one page; the function returned ends it. */
  listen(pageId: string, listener: FlushListener): () => void;
  close(): Promise<void>;
}
