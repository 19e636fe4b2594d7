import * as decoding from "lib0/decoding";
import { WebSocket } from "ws";
import * as Y from "yjs";
import { blocksOf } from "@/realtime/document/shape";
import {
  encodeSync,
  Message,
  readAnnouncement,
  readAwareness,
  readReceipt,
  Sync,
  type Announcement,
  type AwarenessEntry,
  type Receipt,
} from "@/realtime/protocol";
import { ORIGIN } from "./live";

export interface Ask {
  readonly port: number;
  readonly pageId: string;
  readonly cookie?: string | undefined;
  readonly origin?: string | null;
  readonly epoch?: number;
  readonly version?: number;
  readonly edit?: boolean;
  /** Path before the query, where it is not the page's. */
  readonly path?: string;
}

type Heard =
  | { readonly is: "sync"; readonly kind: number; readonly bytes: Uint8Array }
  | { readonly is: "receipt"; readonly receipt: Receipt }
  | { readonly is: "awareness"; readonly entries: readonly AwarenessEntry[] }
  | { readonly is: "announcement"; readonly announcement: Announcement | null }
  | { readonly is: "alive" };

/** A socket that says exactly what a test wants said, and keeps what it hears. */
export class RawSocket {
  readonly doc = new Y.Doc();
  readonly heard: Heard[] = [];
  readonly closed: Promise<{ code: number; reason: string }>;
  isClosed = false;
  sent = 0;
  /** Answers the server's step 1; switched off by tests that do not want to. */
  answers = true;
  private readonly socket: WebSocket;
  private waiters: (() => void)[] = [];

  constructor(ask: Ask) {
    const query = `epoch=${(ask.epoch ?? 1).toString()}&version=${(ask.version ?? 1).toString()}${ask.edit === true ? "&edit=1" : ""}`;
    const headers = { ...(ask.cookie === undefined ? {} : { cookie: ask.cookie }), ...(ask.origin === null ? {} : { origin: ask.origin ?? ORIGIN }) };
    this.socket = new WebSocket(`ws://127.0.0.1:${ask.port.toString()}${ask.path ?? `/pages/${ask.pageId}`}?${query}`, { headers });
    this.socket.on("message", (data: Buffer) => this.hear(new Uint8Array(data)));
    this.closed = new Promise((resolve) => {
      this.socket.on("close", (code, reason) => {
        this.isClosed = true;
        resolve({ code, reason: reason.toString() });
        this.wake();
      });
    });
    this.socket.on("error", () => undefined);
  }

  /** Opens a socket and brings its document up to date. */
  static async synced(ask: Ask): Promise<RawSocket> {
    const socket = new RawSocket(ask);
    await socket.opened();
    await socket.sync();
    return socket;
  }

  async opened(): Promise<void> {
    if (this.socket.readyState === WebSocket.OPEN) return;
    await new Promise<void>((resolve, reject) => {
      this.socket.once("open", resolve);
      this.socket.once("error", reject);
      this.socket.once("close", () => reject(new Error("closed before it was open")));
    });
  }

  async sync(): Promise<void> {
    const before = this.heard.length;
    this.send(encodeSync(Sync.step1, Y.encodeStateVector(this.doc)));
    await this.until(() => this.heard.slice(before).some((h) => h.is === "sync" && h.kind === Sync.step2));
  }

  private hear(frame: Uint8Array): void {
    const decoder = decoding.createDecoder(frame);
    const type = decoding.readVarUint(decoder);
    if (type === Message.sync) {
      const kind = decoding.readVarUint(decoder);
      const bytes = decoding.readVarUint8Array(decoder).slice();
      if (kind === Sync.step1) {
        if (this.answers) this.send(encodeSync(Sync.step2, Y.encodeStateAsUpdate(this.doc, bytes)));
      } else Y.applyUpdate(this.doc, bytes, "server");
      this.heard.push({ is: "sync", kind, bytes });
    } else if (type === Message.receipt) this.heard.push({ is: "receipt", receipt: readReceipt(decoder) });
    else if (type === Message.awareness) this.heard.push({ is: "awareness", entries: readAwareness(decoder) });
    else if (type === Message.announcement) this.heard.push({ is: "announcement", announcement: readAnnouncement(decoder) });
    else if (type === Message.alive) this.heard.push({ is: "alive" });
    else throw new Error(`a message of type ${type.toString()}`);
    this.wake();
  }

  private wake(): void {
    const waiters = this.waiters;
    this.waiters = [];
    for (const waiter of waiters) waiter();
  }

  /** Waits until something holds, looked at after each frame and each close. */
  async until(holds: () => boolean, ms = 5000): Promise<void> {
    const deadline = Date.now() + ms;
    while (!holds()) {
      const left = deadline - Date.now();
      if (left <= 0) throw new Error(`waited in vain; heard ${JSON.stringify(this.heard.map((h) => (h.is === "receipt" ? h.receipt : h.is)))}`);
      await new Promise<void>((resolve) => {
        const timer = setTimeout(resolve, Math.min(left, 50));
        this.waiters.push(() => {
          clearTimeout(timer);
          resolve();
        });
      });
    }
  }

  send(frame: Uint8Array): void {
    const kind = frame[0] === Message.sync ? frame[1] : undefined;
    if (kind === Sync.step2 || kind === Sync.update) this.sent += 1;
    this.socket.send(frame);
  }

  /** As text, which no browser of ours sends. */
  sendText(text: string): void {
    this.socket.send(text);
  }

  /** Sends an update as it is; returns its number. */
  update(bytes: Uint8Array): number {
    this.send(encodeSync(Sync.update, bytes));
    return this.sent;
  }

  /** Changes the document and sends what changed; returns the number of the message. */
  edit(change: (doc: Y.Doc) => void): number {
    return this.update(changed(this.doc, change));
  }

  /** Appends to the text of the block with that handle. */
  type(handle: string, text: string): number {
    return this.edit((doc) => {
      const found = textOf(doc, handle);
      found.insert(found.length, text);
    });
  }

  textOf(handle: string): string {
    return textOf(this.doc, handle).toString();
  }

  get storedUpTo(): number {
    return Math.max(0, ...this.heard.map((h) => (h.is === "receipt" && h.receipt.is === "stored" ? h.receipt.upTo : 0)));
  }

  get refusals(): readonly Extract<Receipt, { is: "refused" }>[] {
    return this.heard.flatMap((h) => (h.is === "receipt" && h.receipt.is === "refused" ? [h.receipt] : []));
  }

  stored(number: number, ms?: number): Promise<void> {
    return this.until(() => this.storedUpTo >= number, ms);
  }

  get waitingBytes(): number {
    return this.socket.bufferedAmount;
  }

  /** Stops reading, as a browser that sleeps. */
  pause(): void {
    this.socket.pause();
  }

  async close(): Promise<void> {
    this.socket.close();
    await this.closed;
  }

  drop(): void {
    this.socket.terminate();
  }
}

/** One update with what a change does to a document. */
export function changed(doc: Y.Doc, change: (doc: Y.Doc) => void): Uint8Array {
  const updates: Uint8Array[] = [];
  const keep = (update: Uint8Array) => void updates.push(update);
  doc.on("update", keep);
  doc.transact(() => change(doc), "test");
  doc.off("update", keep);
  return updates.length === 1 && updates[0] !== undefined ? updates[0] : Y.mergeUpdates(updates);
}

export function keyOf(doc: Y.Doc, handle: string): string {
  for (const [key, block] of blocksOf(doc).entries()) if (block.get("id") === handle) return key;
  throw new Error(`no block ${handle}`);
}

export function textOf(doc: Y.Doc, handle: string): Y.Text {
  const text = blocksOf(doc).get(keyOf(doc, handle))?.get("text");
  if (!(text instanceof Y.Text)) throw new Error(`no text in ${handle}`);
  return text;
}

export const pause = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));
