import * as decoding from "lib0/decoding";
import { inject } from "vitest";
import { WebSocket } from "ws";
import * as Y from "yjs";
import { CLIENT_VERSION, encodeSync, Message, readReceipt, Sync } from "@/realtime/protocol";

/** A socket to a page without any of the page's own code: what somebody would write who wants past it. */
export interface RawSocket {
  /** The document as the server has it now. */
  sync(): Promise<Y.Doc>;
  /** Sends a change of a document; resolves once the server has answered it or closed the socket. */
  edit(doc: Y.Doc, change: (doc: Y.Doc) => void): Promise<{ readonly refused: boolean; readonly reason: string }>;
  close(): void;
}

export async function rawSocket(pageId: string, epoch: number, cookie: string): Promise<RawSocket> {
  const address = `ws://127.0.0.1:${inject("realtimePort")}/pages/${pageId}?epoch=${epoch}&edit=0&version=${CLIENT_VERSION}`;
  const socket = new WebSocket(address, { headers: { cookie, origin: inject("url") } });
  socket.binaryType = "arraybuffer";
  await new Promise((resolve, reject) => {
    socket.once("open", resolve);
    socket.once("error", reject);
  });
  const waitFor = <T>(read: (decoder: decoding.Decoder) => T | undefined, onClose: (code: number, reason: string) => T): Promise<T> =>
    new Promise((resolve) => {
      const onMessage = (data: ArrayBuffer): void => {
        const found = read(decoding.createDecoder(new Uint8Array(data)));
        if (found !== undefined) done(found);
      };
      const onGone = (code: number, reason: Buffer): void => done(onClose(code, reason.toString()));
      const done = (value: T): void => {
        socket.off("message", onMessage);
        socket.off("close", onGone);
        resolve(value);
      };
      socket.on("message", onMessage);
      socket.on("close", onGone);
    });
  return {
    async sync() {
      const doc = new Y.Doc();
      const answer = waitFor(
        (decoder) =>
          decoding.readVarUint(decoder) === Message.sync && decoding.readVarUint(decoder) === Sync.step2 ? decoding.readVarUint8Array(decoder) : undefined,
        (code, reason) => {
          throw new Error(`the socket closed with ${code}: ${reason}`);
        },
      );
      socket.send(encodeSync(Sync.step1, Y.encodeStateVector(doc)));
      Y.applyUpdate(doc, await answer);
      return doc;
    },
    async edit(doc, change) {
      const before = Y.encodeStateVector(doc);
      change(doc);
      const answer = waitFor(
        (decoder) => {
          if (decoding.readVarUint(decoder) !== Message.receipt) return undefined;
          const receipt = readReceipt(decoder);
          return receipt.is === "refused" ? { refused: true, reason: receipt.reason } : { refused: false, reason: "" };
        },
        (code, reason) => ({ refused: true, reason: `${code} ${reason}` }),
      );
      socket.send(encodeSync(Sync.update, Y.encodeStateAsUpdate(doc, before)));
      return answer;
    },
    close: () => socket.close(),
  };
}
