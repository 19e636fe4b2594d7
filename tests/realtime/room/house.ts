import * as decoding from "lib0/decoding";
import * as Y from "yjs";
import { InProcessBus } from "@/realtime/bus/inProcess";
import { usualTimes, type RealtimeTimes } from "@/realtime/config";
import { encodeNewPage } from "@/realtime/document";
import { Sync } from "@/realtime/protocol";
import type { Member } from "@/realtime/room/member";
import type { Room } from "@/realtime/room/room";
import { Rooms } from "@/realtime/room/rooms";
import { MemoryStorage } from "@/realtime/storage/memory";
import type { Appended, EditRow, StoredPage } from "@/realtime/storage/pageStorage";
import { samplePage } from "../support/live";
import { changed, textOf } from "../support/rawSocket";

/** Pages in memory, whose commits wait until a test lets them through, or fail where it says so. */
export class GatedStorage extends MemoryStorage {
  /** Batches under way or done: the pages of their rows. */
  readonly batches: string[][] = [];
  loads = 0;
  isHeld = false;
  readonly failing = new Set<string>();
  private waiting: (() => void)[] = [];

  hold(): void {
    this.isHeld = true;
  }

  /** Lets one commit through, or all from now on. */
  release(all = true): void {
    if (all) this.isHeld = false;
    const waiting = all ? this.waiting.splice(0) : this.waiting.splice(0, 1);
    for (const go of waiting) go();
  }

  override async load(pageId: string): Promise<StoredPage | null> {
    this.loads += 1;
    await new Promise((resolve) => setTimeout(resolve, 5));
    return super.load(pageId);
  }

  override async append(rows: readonly EditRow[]): Promise<Appended> {
    this.batches.push(rows.map((row) => row.pageId));
    if (this.isHeld) await new Promise<void>((resolve) => this.waiting.push(resolve));
    if (rows.some((row) => this.failing.has(row.pageId))) throw new Error("the disk is full");
    return super.append(rows);
  }
}

/** Somebody on a page, without a socket. */
export class TestMember implements Member {
  readonly doc = new Y.Doc();
  isTold = false;
  isOpen = true;
  storedUpTo = 0;
  closedWith: number | null = null;
  readonly refusals: { number: number; code: number; reason: string }[] = [];
  heard: number[] = [];
  private sent = 0;

  constructor(
    readonly userId: string | null,
    readonly room: Room,
  ) {
    room.join(this);
    room.answer(this, Y.encodeStateVector(this.doc));
  }

  send(bytes: Uint8Array): void {
    const decoder = decoding.createDecoder(bytes);
    decoding.readVarUint(decoder);
    const kind = decoding.readVarUint(decoder);
    this.heard.push(kind);
    if (kind !== Sync.step1) Y.applyUpdate(this.doc, decoding.readVarUint8Array(decoder), "server");
  }

  stored(upTo: number): void {
    this.storedUpTo = Math.max(this.storedUpTo, upTo);
  }

  refuse(number: number, code: number, reason: string): void {
    this.refusals.push({ number, code, reason });
    this.close(code);
  }

  close(code: number): void {
    this.closedWith ??= code;
    this.isOpen = false;
    this.room.leave(this);
  }

  type(text: string): number {
    const update = changed(this.doc, (doc) => textOf(doc, "remark").insert(textOf(doc, "remark").length, text));
    this.room.receive(this, ++this.sent, update, false);
    return this.sent;
  }

  get text(): string {
    return textOf(this.doc, "remark").toString();
  }
}

export function house(times: Partial<RealtimeTimes> = {}) {
  const storage = new GatedStorage();
  const bus = new InProcessBus();
  const rooms = new Rooms(storage, bus, "node", { ...usualTimes, ...times });
  const update = encodeNewPage(samplePage);
  const open = async (pageId: string): Promise<Room> => {
    const room = await rooms.get(pageId);
    if (room === null) throw new Error("no such page");
    return room;
  };
  const addPage = (pageId: string) => {
    storage.addPage(pageId, "group", update);
    return open(pageId);
  };
  storage.setEditor("group", "ada", true);
  storage.setEditor("group", "ben", true);
  return { storage, bus, rooms, open, addPage };
}

export const soon = (ms = 10): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));
