import { WebSocket as NodeSocket } from "ws";
import { connectPage, type LivePage, type PageAddress, type PageEvents, type Save } from "@/realtime/client";
import { ORIGIN } from "./live";
import { textOf } from "./rawSocket";

/** The browser's client in this process: its sockets carry the cookie and origin that a browser would send. */
function socketWith(cookie: string): typeof WebSocket {
  return class extends NodeSocket {
    constructor(url: string | URL) {
      super(url, { headers: { cookie, origin: ORIGIN } });
    }
  } as unknown as typeof WebSocket;
}

export interface NodeClient extends LivePage {
  readonly saves: readonly Save[];
  readonly ended: { sentence: string; code: number } | null;
  readonly isReady: boolean;
  /** Inserts at the end of the text of that block. */
  type(handle: string, text: string): void;
  textOf(handle: string): string;
  until(holds: () => boolean, ms?: number): Promise<void>;
}

export function nodeClient(
  ask: { port: number; pageId: string; cookie: string } & Partial<Omit<PageAddress, "url" | "socket">>,
  events: Partial<PageEvents> = {},
): NodeClient {
  const { port, cookie, ...rest } = ask;
  const saves: Save[] = [];
  let ended: NodeClient["ended"] = null;
  let isReady = false;
  const page = connectPage(
    { epoch: 1, user: { id: "me", name: "Me" }, mayEdit: true, ...rest, url: `ws://127.0.0.1:${port.toString()}`, socket: socketWith(cookie) },
    {
      onSave: (save) => void saves.push(save),
      onReady: () => void (isReady = true),
      onEnded: (sentence, code) => void (ended = { sentence, code }),
      ...events,
    },
  );
  return {
    doc: page.doc,
    awareness: page.awareness,
    get save() {
      return page.save;
    },
    close: () => page.close(),
    saves,
    get ended() {
      return ended;
    },
    get isReady() {
      return isReady;
    },
    type: (handle, text) => {
      const found = textOf(page.doc, handle);
      found.insert(found.length, text);
    },
    textOf: (handle) => textOf(page.doc, handle).toString(),
    until: async (holds, ms = 8000) => {
      const deadline = Date.now() + ms;
      while (!holds()) {
        if (Date.now() > deadline) throw new Error(`waited in vain; ${JSON.stringify({ save: page.save, ended, isReady })}`);
        await new Promise((resolve) => setTimeout(resolve, 10));
      }
    },
  };
}
