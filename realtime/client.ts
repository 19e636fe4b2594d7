import type * as decoding from "lib0/decoding";
import { IndexeddbPersistence } from "y-indexeddb";
import { Awareness } from "y-protocols/awareness";
import { WebsocketProvider } from "y-websocket";
import type * as Y from "yjs";
import { countingSocket } from "./browser/countingSocket";
import { readDrafts, setAsideOthers, type Draft } from "./browser/drafts";
import { clearMarks, databaseName, keepPage, markUnsent, setAside, unsentIn, unsentMarks, type KeptPage } from "./browser/keptPages";
import { SaveLedger, type Save } from "./browser/saveLedger";
import { emptyDoc, holdsPage } from "./document";
import { Close, CLIENT_VERSION, closeSentences, isFinal, Message, readAnnouncement, readReceipt, type Announcement, type CloseCode } from "./protocol";

export { hasUnsentEdits, purgeUnsentEdits, unsentEdits } from "./browser/keptPages";
export type { Draft } from "./browser/drafts";
export type { Save } from "./browser/saveLedger";

/** Longest we wait for this browser's own store before connecting without it. */
const STORE_WAIT_MS = 5000;

export interface PageAddress {
  /** `ws://` or `wss://` address of the realtime server; a path alone ("/live") stands for the page's own host. */
  readonly url: string;
  readonly pageId: string;
  readonly epoch: number;
  /** `null` for a guest. */
  readonly user: { readonly id: string; readonly name: string } | null;
  readonly mayEdit: boolean;
  /** Version of the client; that of this release unless told otherwise. */
  readonly version?: number;
  /** What sockets are made of; the browser's own unless told otherwise. */
  readonly socket?: typeof WebSocket;
}

export interface PageEvents {
  /** With every change of what "Saved" says. */
  readonly onSave: (save: Save) => void;
  /** Once: the document holds the page, from the server or from this browser's own store. */
  readonly onReady: () => void;
  /** The connection is over for good; the sentence says why. What is shown stays, and nothing more is stored. */
  readonly onEnded: (sentence: string, code: CloseCode) => void;
  /** Something happened beside the document, such as a new remark. */
  readonly onAnnouncement?: (announcement: Announcement) => void;
  /** This browser keeps unsent work on this page that must not merge by itself (rule A6). */
  readonly onDrafts?: (drafts: readonly Draft[]) => void;
}

export interface LivePage {
  readonly doc: Y.Doc;
  readonly awareness: Awareness;
  /** What "Saved" says now. */
  readonly save: Save;
  /** Ends it; unsent edits stay in this browser and go with the next stay. */
  close(): void;
}

/** Closes after which unsent edits must not merge by themselves when this page is opened the next time. */
const setsAside: ReadonlySet<number> = new Set([Close.forbidden, Close.roleChanged]);

function absolute(url: string): string {
  if (/^wss?:/.test(url)) return url;
  const address = new URL(url, location.href);
  address.protocol = address.protocol === "https:" ? "wss:" : "ws:";
  return address.href.replace(/\/$/, "");
}

/** Whether this browser lets us keep anything. */
function canKeep(): Promise<boolean> {
  if (typeof indexedDB === "undefined") return Promise.resolve(false);
  return new Promise((resolve) => {
    try {
      const request = indexedDB.open("cotectic/probe");
      request.onsuccess = () => {
        request.result.close();
        resolve(true);
      };
      request.onerror = request.onblocked = () => resolve(false);
    } catch {
      resolve(false);
    }
  });
}

/**
 * Connects to a live page: the shared document, who is there, and what became of one's own edits. Connects again by itself
 * for as long as the server does not end it for good.
 */
export function connectPage(address: PageAddress, events: PageEvents): LivePage {
  return new PageConnection(address, events);
}

class PageConnection implements LivePage {
  readonly doc = emptyDoc();
  readonly awareness = new Awareness(this.doc);
  private readonly kept: KeptPage | null;
  private readonly takenOver: readonly string[];
  /** Unsent edits of earlier stays, noted as theirs until everything is stored. */
  private inherited: number;
  private readonly tab = Math.random().toString(36).slice(2, 10);
  private readonly ledger: SaveLedger;
  private readonly provider: WebsocketProvider;
  private persistence: IndexeddbPersistence | null = null;
  private said: Save | null = null;
  private isReady = false;
  private isClosed = false;
  private isEnded = false;

  constructor(
    private readonly address: PageAddress,
    private readonly events: PageEvents,
  ) {
    const { pageId, epoch, user, mayEdit, version = CLIENT_VERSION } = address;
    // Readers and guests store nothing (rule S4).
    this.kept = mayEdit && user !== null ? keepPage(pageId, epoch, user.id) : null;
    this.takenOver = this.kept === null ? [] : unsentMarks(this.kept);
    this.inherited = this.kept === null ? 0 : unsentIn(this.kept);
    this.ledger = new SaveLedger(this.inherited);
    if (user === null) this.awareness.setLocalState(null);
    // Before the provider's own listener: an edit is counted before it is sent.
    this.doc.on("update", this.onUpdate);
    this.provider = new WebsocketProvider(`${absolute(address.url)}/pages`, pageId, this.doc, {
      connect: false,
      // Its channel between tabs would pass by receipts and access (rule A5).
      disableBc: true,
      awareness: this.awareness,
      params: { epoch: epoch.toString(), version: version.toString(), edit: mayEdit ? "1" : "0" },
      WebSocketPolyfill: countingSocket(address.socket ?? WebSocket, {
        opened: () => this.ledger.opened(),
        sending: (kind) => this.ledger.sending(kind),
      }),
    });
    this.listen();
    void this.start();
  }

  get save(): Save {
    return this.ledger.save(this.address.mayEdit);
  }

  private listen(): void {
    const { provider } = this;
    provider.messageHandlers[Message.receipt] = (_, decoder) => this.receive(decoder);
    // That it came is all it says: the provider connects again after half a minute of silence (rule H4).
    provider.messageHandlers[Message.alive] = () => undefined;
    provider.messageHandlers[Message.announcement] = (_, decoder) => {
      const announcement = readAnnouncement(decoder);
      if (announcement !== null) this.events.onAnnouncement?.(announcement);
    };
    // Only what this browser says of itself; the provider would repeat to the server whatever it hears of others.
    this.awareness.off("update", provider._awarenessUpdateHandler);
    this.awareness.on("update", (changes: unknown, origin: unknown) => {
      if (origin === "local") provider._awarenessUpdateHandler(changes, origin);
    });
    provider.on("status", ({ status }) => {
      if (status === "connected") this.tell();
    });
    provider.on("sync", (isSynced) => {
      if (isSynced) this.ready();
      this.tell();
    });
    provider.on("connection-close", (event) => {
      this.ledger.closed();
      if (event !== null && isFinal(event.code)) this.end(event.code as CloseCode, event.reason);
      this.tell();
    });
  }

  private async start(): Promise<void> {
    const { user } = this.address;
    if (await canKeep()) {
      if (this.isClosed) return;
      if (user !== null) this.offerDrafts(user.id);
      if (this.kept !== null) {
        this.persistence = new IndexeddbPersistence(databaseName(this.kept), this.doc);
        await Promise.race([this.persistence.whenSynced, new Promise((resolve) => setTimeout(resolve, STORE_WAIT_MS))]);
        if (holdsPage(this.doc)) this.ready();
      }
    }
    if (!this.isClosed) this.provider.connect();
  }

  private offerDrafts(userId: string): void {
    const aside = setAsideOthers(this.address.pageId, userId, this.kept);
    if (aside.length === 0) return;
    readDrafts(aside).then(
      (drafts) => {
        if (!this.isClosed) this.events.onDrafts?.(drafts);
      },
      (error: unknown) => console.error("Work kept in this browser could not be read:", error),
    );
  }

  private readonly onUpdate = (_update: Uint8Array, origin: unknown): void => {
    // An edit that names no origin is this person's too.
    const isTheirs = origin === this.provider || (origin !== null && origin === this.persistence);
    if (isTheirs || !this.address.mayEdit) return;
    this.ledger.edited();
    this.tell();
  };

  private receive(decoder: decoding.Decoder): void {
    const receipt = readReceipt(decoder);
    this.ledger.receive(receipt);
    // What was refused once would be refused at every opening: it becomes a draft.
    if (receipt.is === "refused" && this.kept !== null) setAside(this.kept, `These edits were refused: ${receipt.reason}`);
    if (this.ledger.waiting === 0 && this.inherited > 0) {
      clearMarks(this.takenOver);
      this.inherited = 0;
    }
    this.tell();
  }

  private ready(): void {
    if (this.isReady || this.isClosed) return;
    this.isReady = true;
    this.events.onReady();
  }

  private end(code: CloseCode, reason: string): void {
    if (this.isEnded || this.isClosed) return;
    this.isEnded = true;
    const sentence = this.ledger.ended(reason === "" ? (closeSentences[code] ?? "The server ended the connection. Reload the page.") : reason);
    if (this.kept !== null && setsAside.has(code) && this.ledger.waiting > 0) setAside(this.kept, `These edits were not stored: ${sentence}`);
    this.tell();
    this.events.onEnded(sentence, code);
  }

  private tell(): void {
    if (this.isClosed) return;
    const { save } = this;
    if (this.said?.waiting === save.waiting && this.said.text === save.text) return;
    if (this.kept !== null && this.said?.waiting !== save.waiting) this.mark(save.waiting);
    this.said = save;
    this.events.onSave(save);
  }

  /** Notes what is unsent where the next stay, and signing out, can read it. */
  private mark(waiting: number): void {
    if (this.kept !== null) markUnsent(this.kept, this.tab, Math.max(0, waiting - this.inherited));
  }

  close(): void {
    if (this.isClosed) return;
    this.isClosed = true;
    this.doc.off("update", this.onUpdate);
    this.provider.destroy();
    void this.persistence?.destroy();
    this.awareness.destroy();
    this.doc.destroy();
  }
}
