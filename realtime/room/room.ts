import * as Y from "yjs";
import type { Bus, Flushed } from "../bus/bus";
import { emptyDoc, headingOf } from "../document";
import { Close, encodeSync, MOST_LIVE_BYTES, MOST_PAGE_BYTES, MOST_STEP2_BYTES, Sync } from "../protocol";
import type { EditRow, PageStorage, StoredPage } from "../storage/pageStorage";
import { applyAndWatch, type Applied } from "./capture";
import type { Flusher, FlushTarget } from "./flusher";
import { judge } from "./judge";
import type { Member } from "./member";
import { SerialTasks } from "./serialTasks";

type RoomPending = { readonly is: "edit"; readonly row: EditRow; readonly member: Member; readonly number: number } | { readonly is: "marker"; done(): void };

/** What a room works with. */
export interface RoomSetting {
  readonly storage: PageStorage;
  readonly flusher: Flusher;
  readonly bus: Bus;
  /** Name of this process on the bus. */
  readonly node: string;
  readonly compactRows: number;
  /** Takes the room out of the house; nobody finds it any more. */
  discard(room: Room): void;
  /** Keeps somebody out of this page for a while. */
  ban(pageId: string, userId: string): void;
}

const mebibytes = (bytes: number): string => `${(bytes / (1 << 20)).toFixed(1)} MiB`;

/**
 * One page in memory: the one document every edit is applied to, and the sockets that are on it.
 *
 * An edit is applied on receipt, judged, and queued; others see it, and its sender is told so, only when it is on the disk
 * (rule S1). Whatever cannot be judged at once makes everything behind it wait, so that the order of edits is the order of
 * receipt.
 */
export class Room implements FlushTarget<RoomPending> {
  readonly pending: RoomPending[] = [];
  readonly members = new Set<Member>();
  private doc: Y.Doc;
  private owners: Map<number, string | null>;
  private bytes: number;
  private rows: number;
  private isGone = false;
  private isFolding = false;
  private readonly tasks = new SerialTasks((error) => {
    this.fail(Close.notDurable, error);
  });
  private readonly unlisten: () => void;

  readonly groupId: string;
  readonly epoch: number;

  constructor(
    readonly pageId: string,
    stored: StoredPage,
    private readonly setting: RoomSetting,
  ) {
    this.groupId = stored.groupId;
    this.epoch = stored.epoch;
    ({ doc: this.doc, owners: this.owners, bytes: this.bytes } = open(stored));
    this.rows = stored.updates.length;
    this.unlisten = setting.bus.listen(pageId, (flushed) => {
      this.hear(flushed);
    });
  }

  join(member: Member): void {
    this.members.add(member);
  }

  leave(member: Member): void {
    this.members.delete(member);
  }

  /** Asks a member for what it has and this page has not. */
  ask(member: Member): void {
    this.tasks.run(() => {
      member.send(encodeSync(Sync.step1, Y.encodeStateVector(this.doc)));
    });
  }

  /** Answers a member's step 1, once everything in the answer is on the disk. */
  answer(member: Member, stateVector: Uint8Array): void {
    this.tasks.run(() => {
      let difference: Uint8Array;
      try {
        difference = Y.encodeStateAsUpdate(this.doc, stateVector);
      } catch {
        member.close(Close.malformed);
        return;
      }
      member.isTold = true;
      this.afterAllBefore(() => {
        member.send(encodeSync(Sync.step2, difference));
      });
    });
  }

  /**
   * Takes an edit.
   *
   * @param number of the message on its socket
   * @param isStep2 true for the answer to a step 1, which may be larger
   */
  receive(member: Member, number: number, update: Uint8Array, isStep2: boolean): void {
    const most = isStep2 ? MOST_STEP2_BYTES : MOST_LIVE_BYTES;
    if (update.length > most) {
      member.refuse(
        number,
        Close.tooLarge,
        `This change is too large (${mebibytes(update.length)}; a page takes ${mebibytes(most)} at once). Make it in smaller parts.`,
      );
      return;
    }
    this.tasks.run(() => (member.isOpen && member.userId !== null ? this.take(member, member.userId, number, update, true) : undefined));
  }

  private take(member: Member, userId: string, number: number, update: Uint8Array, mayFetch: boolean): void | Promise<void> {
    const judgement = judge(this.doc, this.owners, userId, update);
    switch (judgement.is) {
      case "malformed":
        member.refuse(number, Close.malformed, judgement.reason);
        return undefined;
      case "foreign":
        member.refuse(number, Close.refused, "This edit carries the mark of another person's browser. Reload the page and make it again.");
        return undefined;
      case "gap":
        if (!mayFetch) {
          member.close(Close.outOfStep);
          return undefined;
        }
        return this.catchUp().then(() => this.take(member, userId, number, update, false));
      case "fine":
        break;
    }
    if (this.isTooLarge(update)) {
      member.refuse(
        number,
        Close.tooLarge,
        `A page holds at most ${mebibytes(MOST_PAGE_BYTES)} of work, and this change would pass that. Start a second page, or empty the bin.`,
      );
      return undefined;
    }
    const applied = applyAndWatch(this.doc, update, userId);
    if (applied.fault !== null) return this.expel(member, number, applied.fault);
    if (applied.foreign.length > 0) return this.checkRecord(member, userId, number, applied, judgement.clients);
    this.accept(member, userId, number, applied, judgement.clients);
    return undefined;
  }

  private isTooLarge(update: Uint8Array): boolean {
    if (this.bytes + update.length <= MOST_PAGE_BYTES) return false;
    // The sum of all updates is an upper bound; look again before refusing.
    this.bytes = Y.encodeStateAsUpdate(this.doc).length;
    return this.bytes + update.length > MOST_PAGE_BYTES;
  }

  private accept(member: Member, userId: string, number: number, applied: Applied, clients: readonly number[]): void {
    const { update, record } = applied;
    if (update === null) {
      this.afterAllBefore(() => {
        member.stored(number);
      });
      return;
    }
    for (const client of clients) this.owners.set(client, userId);
    this.bytes += update.length;
    const row: EditRow = {
      pageId: this.pageId,
      epoch: this.epoch,
      userId,
      update,
      clients,
      record,
      heading: applied.touchesHeading ? headingOf(this.doc) : null,
    };
    this.pending.push({ is: "edit", row, member, number });
    this.setting.flusher.wake(this);
  }

  /** An entry by somebody else is taken only if it was on this page before, word for word (rule D6). */
  private async checkRecord(member: Member, userId: string, number: number, applied: Applied, clients: readonly number[]): Promise<void> {
    for (const { list, entry } of applied.foreign) {
      if (await this.setting.storage.isOnRecord(this.pageId, list, entry)) continue;
      await this.expel(member, number, "An amendment, a set-aside or an assumed σ carries the name of the person who made it. This one names somebody else.");
      return;
    }
    this.accept(member, userId, number, applied, clients);
  }

  /** Bad shape (rules D3, H2): what was applied is forgotten, its sender is shown out, the others notice nothing. */
  private async expel(member: Member, number: number, reason: string): Promise<void> {
    if (member.userId !== null) this.setting.ban(this.pageId, member.userId);
    member.refuse(number, Close.refused, reason);
    await this.setting.flusher.idle(this);
    if (this.isGone) return;
    const stored = await this.setting.storage.load(this.pageId);
    if (stored === null) throw new Error(`The page ${this.pageId} is no longer there.`);
    this.doc.destroy();
    ({ doc: this.doc, owners: this.owners, bytes: this.bytes } = open(stored));
  }

  /** Takes over what the database has and this process has not. */
  private async catchUp(): Promise<void> {
    const stored = await this.setting.storage.load(this.pageId);
    if (stored === null) throw new Error(`The page ${this.pageId} is no longer there.`);
    for (const [client, user] of stored.owners) this.owners.set(client, user);
    this.apply([...(stored.base === null ? [] : [stored.base]), ...stored.updates]);
  }

  /** Takes over and passes on what the database has by now; for when notices may have been missed. */
  refresh(): void {
    this.tasks.run(() => this.catchUp());
  }

  /** Takes over edits that were committed elsewhere, by their sequence numbers. */
  takeCommitted(seqs: readonly bigint[]): void {
    this.tasks.run(async () => {
      const updates = await this.setting.storage.fetch(this.pageId, seqs);
      // Some may be in the base by now.
      if (updates.length < seqs.length) await this.catchUp();
      else this.apply(updates);
    });
  }

  /** Applies what is committed and tells everybody what was new in it. */
  private apply(updates: readonly Uint8Array[]): void {
    const news: Uint8Array[] = [];
    const onUpdate = (update: Uint8Array): void => void news.push(update);
    this.doc.on("update", onUpdate);
    try {
      this.doc.transact(() => {
        for (const update of updates) Y.applyUpdate(this.doc, update, "database");
      }, "database");
    } finally {
      this.doc.off("update", onUpdate);
    }
    for (const update of news) this.tell(update, null);
  }

  private hear(flushed: Flushed): void {
    if (flushed.from === this.setting.node) return;
    this.tasks.run(() => {
      this.apply(flushed.updates);
    });
  }

  /** Runs once everything that was applied up to now is on the disk. */
  private afterAllBefore(done: () => void): void {
    if (!this.setting.flusher.isBusy(this)) {
      done();
      return;
    }
    this.pending.push({ is: "marker", done });
    this.setting.flusher.wake(this);
  }

  private tell(update: Uint8Array, except: Member | null): void {
    const message = encodeSync(Sync.update, update);
    for (const member of this.members) if (member !== except && member.isTold) member.send(message);
  }

  committed(items: readonly RoomPending[], seqs: readonly bigint[]): void {
    const edits = items.filter((item) => item.is === "edit");
    const [first] = edits;
    if (first !== undefined) {
      const updates = edits.map((edit) => edit.row.update);
      this.rows += edits.length;
      // One message for all that was flushed together; a sender alone in it knows it already.
      const sender = edits.every((edit) => edit.member === first.member) ? first.member : null;
      this.tell(updates.length === 1 ? first.row.update : Y.mergeUpdates(updates), sender);
      this.setting.bus.publish({ pageId: this.pageId, from: this.setting.node, seqs, updates });
    }
    const upTo = new Map<Member, number>();
    for (const edit of edits) upTo.set(edit.member, edit.number);
    for (const [member, number] of upTo) member.stored(number);
    for (const item of items) if (item.is === "marker") item.done();
    if (this.rows >= this.setting.compactRows) void this.fold();
  }

  failed(items: readonly RoomPending[], refused: readonly number[], error: unknown): void {
    const edits = items.filter((item) => item.is === "edit");
    for (const n of refused) edits[n]?.member.refuse(edits[n].number, Close.forbidden, "You may not edit this page any more. Your change was not stored.");
    this.fail(Close.notDurable, error);
  }

  /** Drops the page from memory: what is in it may not be on the disk. Browsers connect again and send what they have. */
  fail(code: typeof Close.notDurable | typeof Close.restarting | typeof Close.epochChanged, error: unknown): void {
    if (this.isGone) return;
    if (error !== null && error !== undefined) console.error(`The page ${this.pageId} is dropped from memory:`, error instanceof Error ? error.message : error);
    this.remove();
    for (const member of [...this.members]) member.close(code);
    this.members.clear();
  }

  /** Forgets the page; nothing is on its way and nobody is on it. */
  remove(): void {
    this.isGone = true;
    this.pending.length = 0;
    this.tasks.stop();
    this.unlisten();
    this.setting.discard(this);
    this.doc.destroy();
  }

  get isRemoved(): boolean {
    return this.isGone;
  }

  /** True while something waits to be judged or stored. */
  get isBusy(): boolean {
    return this.tasks.isBusy || this.setting.flusher.isBusy(this);
  }

  /** Folds the log of this page into its base (rule S6). */
  async fold(): Promise<void> {
    if (this.isFolding || this.rows === 0) return;
    this.isFolding = true;
    try {
      this.rows = Math.max(0, this.rows - (await this.setting.storage.compact(this.pageId)));
    } catch (error) {
      console.error(`The page ${this.pageId} could not be folded; it will be tried again:`, error instanceof Error ? error.message : error);
      this.rows = 0;
    } finally {
      this.isFolding = false;
    }
  }
}

/** A stored page as a document. */
function open(stored: StoredPage): { doc: Y.Doc; owners: Map<number, string | null>; bytes: number } {
  const doc = emptyDoc();
  if (stored.base !== null) Y.applyUpdate(doc, stored.base, "database");
  doc.transact(() => {
    for (const update of stored.updates) Y.applyUpdate(doc, update, "database");
  }, "database");
  const bytes = (stored.base?.length ?? 0) + stored.updates.reduce((sum, update) => sum + update.length, 0);
  return { doc, owners: new Map(stored.owners), bytes };
}
