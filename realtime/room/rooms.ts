import type { Bus } from "../bus/bus";
import type { RealtimeTimes } from "../config";
import type { PageStorage } from "../storage/pageStorage";
import { Close } from "../protocol";
import { Flusher } from "./flusher";
import { Room } from "./room";

/** The pages in memory. Loading one twice at once is one load; a page leaves memory only after its last flush (rule S5). */
export class Rooms {
  private readonly open = new Map<string, Promise<Room | null>>();
  private readonly present = new Map<string, Room>();
  /** Pages dropped while something of theirs was on its way: what becomes of it is waited for. */
  private readonly leaving = new Map<string, Promise<void>>();
  private readonly bans = new Map<string, number>();
  private readonly evictions = new Map<Room, NodeJS.Timeout>();
  private readonly flusher: Flusher;

  constructor(
    private readonly storage: PageStorage,
    private readonly bus: Bus,
    private readonly node: string,
    private readonly times: RealtimeTimes,
  ) {
    this.flusher = new Flusher(storage);
  }

  /** The page, loaded before anyone syncs with it; `null` where there is none. */
  get(pageId: string): Promise<Room | null> {
    let room = this.open.get(pageId);
    if (room === undefined) {
      room = this.load(pageId);
      this.open.set(pageId, room);
      const forget = (): void => {
        if (this.open.get(pageId) === room) this.open.delete(pageId);
      };
      room.then((found) => found ?? forget(), forget);
    }
    return room;
  }

  /** Pages in memory now. */
  get all(): readonly Room[] {
    return [...this.present.values()];
  }

  find(pageId: string): Room | undefined {
    return this.present.get(pageId);
  }

  private async load(pageId: string): Promise<Room | null> {
    await this.leaving.get(pageId);
    const stored = await this.storage.load(pageId);
    if (stored === null) return null;
    const room = new Room(pageId, stored, {
      storage: this.storage,
      flusher: this.flusher,
      bus: this.bus,
      node: this.node,
      compactRows: this.times.compactRows,
      discard: (gone) => {
        this.open.delete(pageId);
        if (this.present.get(pageId) === gone) this.present.delete(pageId);
        clearTimeout(this.evictions.get(gone));
        this.evictions.delete(gone);
        this.awaitLast(gone);
      },
      ban: (page, user) => void this.bans.set(`${page}/${user}`, Date.now() + this.times.banMs),
    });
    this.present.set(pageId, room);
    this.leaveSoon(room);
    return room;
  }

  /** A page that is loaded again must not miss an edit that is just being committed. */
  private awaitLast(gone: Room): void {
    if (!this.flusher.isBusy(gone)) return;
    const last = this.flusher.idle(gone).finally(() => {
      if (this.leaving.get(gone.pageId) === last) this.leaving.delete(gone.pageId);
    });
    this.leaving.set(gone.pageId, last);
  }

  /** Milliseconds for which somebody is kept out of a page; 0 for nearly everybody. */
  bannedFor(pageId: string, userId: string): number {
    const until = this.bans.get(`${pageId}/${userId}`) ?? 0;
    if (until <= Date.now()) this.bans.delete(`${pageId}/${userId}`);
    return Math.max(0, until - Date.now());
  }

  /** Lets a page go from memory a while after the last person left it. */
  leaveSoon(room: Room): void {
    clearTimeout(this.evictions.get(room));
    const timer = setTimeout(() => void this.evict(room), this.times.lingerMs);
    timer.unref();
    this.evictions.set(room, timer);
  }

  private async evict(room: Room): Promise<void> {
    this.evictions.delete(room);
    if (room.isRemoved || room.members.size > 0) return;
    await this.flusher.idle(room);
    await room.fold();
    // Somebody may have come, and worked, while it was folded.
    if (room.isRemoved || room.members.size > 0) return;
    if (room.isBusy) this.leaveSoon(room);
    else room.remove();
  }

  /** Stores what is on its way and shows everybody out, to come back. */
  async close(): Promise<void> {
    await Promise.all(this.all.map((room) => this.flusher.idle(room)));
    for (const room of this.all) room.fail(Close.restarting, null);
  }
}
