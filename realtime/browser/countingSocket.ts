import { Message, Sync } from "../protocol";

export interface SocketWatch {
  /** A socket is being made; what it sends is counted anew. */
  opened(): void;
  /** A step 2 or an update is about to go; false keeps it. */
  sending(kind: typeof Sync.step2 | typeof Sync.update): boolean;
}

/** A WebSocket that has what it sends counted (rule S2). */
export function countingSocket(Base: typeof WebSocket, watch: SocketWatch): typeof WebSocket {
  return class extends Base {
    constructor(url: string | URL, protocols?: string | string[]) {
      super(url, protocols);
      watch.opened();
    }

    override send(data: string | ArrayBufferLike | Blob | ArrayBufferView<ArrayBuffer>): void {
      const kind = data instanceof Uint8Array && data[0] === Message.sync ? data[1] : undefined;
      if ((kind === Sync.step2 || kind === Sync.update) && !watch.sending(kind)) return;
      super.send(data as ArrayBuffer);
    }
  };
}
