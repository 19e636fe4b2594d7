import * as decoding from "lib0/decoding";
import type { WebSocket } from "ws";
import type { Credentials } from "@/db/credentials";
import type { Admission } from "../access/door";
import {
  Close,
  closeSentences,
  encodeAlive,
  encodeReceipt,
  isFinal,
  Message,
  MESSAGE_RATE,
  MOST_AWARENESS_BYTES,
  MOST_LIVE_BYTES,
  readAwareness,
  Sync,
  type CloseCode,
} from "../protocol";
import type { Member } from "../room/member";
import type { Room } from "../room/room";
import type { Presence } from "./presence";
import { Rate } from "./rate";

/** Longest a timer can wait; a later end is looked at again. */
const LONGEST_TIMER = 2 ** 31 - 1;
/** Reasons of a close frame have at most 123 bytes. */
const MOST_REASON = 123;

/** Where messages of a connection go. */
export interface Place {
  readonly room: Room;
  readonly presence: Presence;
}

/**
 * One open socket: what comes in is counted, measured and read here, and nothing it says can harm anybody else
 * (rules A2, H1, H4).
 */
export class Connection implements Member {
  isTold = false;
  isOpen = true;
  admission: Admission;
  private received = 0;
  private place: Place | null = null;
  private expiry: NodeJS.Timeout | null = null;
  private heardSinceBeat = true;
  private readonly rate = new Rate(MESSAGE_RATE.perSecond, MESSAGE_RATE.burst);
  private readonly step1Rate = new Rate(1, 20);
  // Many browsers repeat to the server what they heard of others; that many are no offence.
  private readonly awarenessRate = new Rate(400, 1000);

  constructor(
    private readonly socket: WebSocket,
    readonly pageId: string,
    readonly credentials: Credentials,
    admission: Admission,
    private readonly onExpiry: (connection: Connection) => void,
  ) {
    this.admission = admission;
    this.renew(admission);
  }

  get userId(): string | null {
    return this.admission.userId;
  }

  get name(): string {
    return this.admission.name;
  }

  /** Takes over what a new look at somebody's access said. */
  renew(admission: Admission): void {
    this.admission = admission;
    if (this.expiry !== null) clearTimeout(this.expiry);
    // A little after, so that the clock that decides agrees.
    const wait = Math.min(LONGEST_TIMER, Math.max(0, admission.until.getTime() - Date.now()) + 20);
    this.expiry = setTimeout(() => {
      this.onExpiry(this);
    }, wait);
    this.expiry.unref();
  }

  /** The page is loaded; the socket is read from now on. */
  enter(place: Place): void {
    this.place = place;
    place.room.join(this);
    place.presence.join(this);
    if (this.admission.mayEdit) place.room.ask(this);
  }

  /** A frame from the browser. */
  take(frame: Uint8Array, isBinary: boolean): void {
    if (!this.isOpen) return;
    this.heardSinceBeat = true;
    if (!isBinary) {
      this.close(Close.malformed);
      return;
    }
    const isAwareness = frame[0] === Message.awareness;
    if (!(isAwareness ? this.awarenessRate : this.rate).take()) {
      this.close(Close.tooFast);
      return;
    }
    if (this.place !== null) this.read(frame, this.place);
  }

  private read(frame: Uint8Array, place: Place): void {
    if (!this.isOpen) return;
    try {
      const decoder = decoding.createDecoder(frame);
      switch (decoding.readVarUint(decoder)) {
        case Message.sync:
          this.readSync(decoder, place.room);
          return;
        case Message.awareness:
          if (frame.length <= MOST_AWARENESS_BYTES) place.presence.say(this, readAwareness(decoder));
          return;
        case Message.askAwareness:
          place.presence.tellAll(this);
          return;
        default:
          this.close(Close.malformed);
      }
    } catch {
      this.close(Close.malformed);
    }
  }

  private readSync(decoder: decoding.Decoder, room: Room): void {
    const kind = decoding.readVarUint(decoder);
    if (kind === Sync.step1) {
      const vector = decoding.readVarUint8Array(decoder);
      if (vector.length > MOST_LIVE_BYTES) this.close(Close.tooLarge);
      // Each is answered with what may be a whole page; browsers ask once a connection.
      else if (!this.step1Rate.take()) this.close(Close.tooFast);
      else room.answer(this, vector);
      return;
    }
    if (kind !== Sync.step2 && kind !== Sync.update) {
      this.close(Close.malformed);
      return;
    }
    this.received += 1;
    // Before a byte of it is decoded.
    if (!this.admission.mayEdit) {
      const reason = this.admission.role === "guest" ? "A reading link lets you read this page, not change it." : "You may read this page, not change it.";
      this.send(encodeReceipt({ is: "refused", number: this.received, code: Close.forbidden, reason }));
      return;
    }
    // A copy: the frame's memory is not ours to keep.
    room.receive(this, this.received, decoding.readVarUint8Array(decoder).slice(), kind === Sync.step2);
  }

  send(bytes: Uint8Array): void {
    if (this.isOpen && this.socket.readyState === this.socket.OPEN) this.socket.send(bytes);
  }

  stored(upTo: number): void {
    this.send(encodeReceipt({ is: "stored", upTo }));
  }

  refuse(number: number, code: CloseCode, reason: string): void {
    this.send(encodeReceipt({ is: "refused", number, code, reason }));
    this.close(code, reason);
  }

  close(code: CloseCode, reason: string = closeSentences[code]): void {
    if (!this.isOpen) return;
    this.socket.close(code, closeReason(reason));
    this.gone();
    // A browser that does not answer the close is not waited for.
    setTimeout(() => this.socket.terminate(), isFinal(code) ? 5000 : 2000).unref();
  }

  /** The socket is closed, by whichever side. */
  gone(): void {
    if (!this.isOpen) return;
    this.isOpen = false;
    if (this.expiry !== null) clearTimeout(this.expiry);
    this.place?.presence.leave(this);
    this.place?.room.leave(this);
  }

  /** Tells the browser that the server is alive, and ends a connection whose browser has not been for two beats (rule H4). */
  beat(): void {
    if (!this.isOpen) return;
    if (!this.heardSinceBeat) {
      this.socket.terminate();
      this.gone();
      return;
    }
    this.heardSinceBeat = false;
    this.send(encodeAlive());
    this.socket.ping();
  }

  /** The browser answered a ping. */
  heard(): void {
    this.heardSinceBeat = true;
  }
}

/** A sentence as a close frame can carry it. */
export function closeReason(reason: string): string {
  const bytes = new TextEncoder();
  let text = reason;
  while (bytes.encode(text).length > MOST_REASON) text = `${text.slice(0, -2).trimEnd()}…`.replace(/…+$/, "…");
  return text;
}
