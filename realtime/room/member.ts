import type { CloseCode } from "../protocol";

/** One open socket on a page, as the page sees it. */
export interface Member {
  /** The person; `null` for a guest. */
  readonly userId: string | null;
  /** True once its step 1 has been answered: from then on it is told every edit. */
  isTold: boolean;
  /** False once it was closed; nothing of it is taken any more. */
  readonly isOpen: boolean;
  send(bytes: Uint8Array): void;
  /** Every update and step 2 message up to this number is on the disk, or was in no need of it (rule S2). */
  stored(upTo: number): void;
  /** A message is refused; unless it is a reader's, the connection is closed with the same code and sentence. */
  refuse(number: number, code: CloseCode, reason: string): void;
  close(code: CloseCode, reason?: string): void;
}
