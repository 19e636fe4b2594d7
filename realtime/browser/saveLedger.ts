import { Sync, type Receipt } from "../protocol";

/** What "Saved" says of one's own edits. */
export interface Save {
  readonly kind: "saved" | "saving" | "offline" | "refused";
  /** For the screen. */
  readonly text: string;
  /** Own edits that no receipt has covered yet. */
  readonly waiting: number;
}

const edits = (count: number): string => `${count.toString()} edit${count === 1 ? "" : "s"}`;

/**
 * Counts what this browser's edits come to (rule S2): an edit is saved when a receipt covers the message that carried it.
 *
 * Messages are counted on each socket from 1. The first that carries edits on a socket is the step 2 that answers the
 * server's step 1: it brings everything the server has not, so whatever would go before it is held back, and a receipt for
 * it covers all edits made until then.
 */
export class SaveLedger {
  private made: number;
  private stored = 0;
  private sent = 0;
  /** For each message under way, how many edits were made when it went. */
  private covers = new Map<number, number>();
  private answered = false;
  private isEven = false;
  private isOpen = false;
  private refusal: string | null = null;

  /** @param waiting edits of an earlier stay that were never acknowledged */
  constructor(waiting: number) {
    this.made = waiting;
  }

  edited(): void {
    this.made += 1;
  }

  opened(): void {
    this.sent = 0;
    this.covers = new Map();
    this.answered = false;
    this.isEven = false;
    this.isOpen = true;
  }

  closed(): void {
    this.isOpen = false;
  }

  /** A step 2 or an update is about to go; false where it must not, since a step 2 that holds it too is still to come. */
  sending(kind: typeof Sync.step2 | typeof Sync.update): boolean {
    if (kind === Sync.step2) this.answered = true;
    if (!this.answered) return false;
    this.sent += 1;
    this.covers.set(this.sent, this.made);
    return true;
  }

  receive(receipt: Receipt): void {
    if (receipt.is === "refused") {
      this.refusal = receipt.reason;
      return;
    }
    for (const [number, made] of this.covers) {
      if (number > receipt.upTo) break;
      this.stored = Math.max(this.stored, made);
      this.covers.delete(number);
      this.isEven = true;
    }
  }

  /** The connection is over for good. Gives the sentence that says why: a receipt's, where it was a refusal, is not cut short. */
  ended(reason: string): string {
    this.isOpen = false;
    return (this.refusal ??= reason);
  }

  get waiting(): number {
    return this.made - this.stored;
  }

  /** @param mayEdit false for somebody who only reads: what they see is what is stored */
  save(mayEdit: boolean): Save {
    const { waiting } = this;
    if (this.refusal !== null) return { kind: "refused", text: `Refused: ${this.refusal}`, waiting };
    if (!this.isOpen) return { kind: "offline", text: waiting === 0 ? "Offline" : `Offline, ${edits(waiting)} waiting`, waiting };
    if (mayEdit && (waiting > 0 || !this.isEven)) return { kind: "saving", text: "Saving", waiting };
    return { kind: "saved", text: "Saved", waiting };
  }
}
