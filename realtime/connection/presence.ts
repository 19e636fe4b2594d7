import { AWARENESS_PER_SECOND, encodeAwareness, type AwarenessEntry } from "../protocol";
import { colorOf } from "../personColor";

/** Somebody who can be seen on a page. */
export interface Visible {
  readonly userId: string | null;
  readonly name: string;
  send(bytes: Uint8Array): void;
}

interface Seen {
  owner: Visible;
  /** As the browser counts; and as the others were told, which never goes back. */
  said: number;
  clock: number;
  state: AwarenessEntry["state"];
  lastTold: number;
  timer: NodeJS.Timeout | null;
}

/**
 * Who is on a page (rule A4). A state belongs to a person and a tab; its newest connection wins, so that a half-open old one
 * cannot block a reconnect. Name and colour are the server's, whatever the browser says. States that change too quickly are
 * told at the pace allowed, the latest always.
 */
export class Presence {
  private readonly seen = new Map<number, Seen>();
  private readonly viewers = new Set<Visible>();
  /** Last clock told of those who left: a browser that comes back counts on from where it was, the others from here. */
  private readonly past = new Map<number, number>();

  constructor(private readonly intervalMs = 1000 / AWARENESS_PER_SECOND) {}

  get viewerCount(): number {
    return this.viewers.size;
  }

  /** From now on this one sees the others; guests neither see nor are seen. */
  join(viewer: Visible): void {
    if (viewer.userId === null) return;
    this.viewers.add(viewer);
    this.tellAll(viewer);
  }

  /** Tells one viewer about everybody. */
  tellAll(viewer: Visible): void {
    if (!this.viewers.has(viewer)) return;
    // A browser that lost its connection forgot these states and not their clocks: told at the old one, it would not listen.
    const entries = [...this.seen].map(([clientId, seen]) => ({ clientId, clock: ++seen.clock, state: seen.state }));
    if (entries.length > 0) viewer.send(encodeAwareness(entries));
  }

  /** Takes what a browser says. What it says of others than itself is dropped: browsers repeat what they heard. */
  say(from: Visible, entries: readonly AwarenessEntry[]): void {
    if (from.userId === null || !this.viewers.has(from)) return;
    const own = this.clientOf(from);
    for (const { clientId, clock, state } of entries) {
      const seen = this.seen.get(clientId);
      if (seen === undefined ? own !== undefined || state === null : seen.owner.userId !== from.userId) continue;
      if (own !== undefined && own !== clientId) continue;
      if (seen !== undefined && seen.owner === from && clock <= seen.said) continue;
      this.put(clientId, from, clock, state);
    }
  }

  private clientOf(owner: Visible): number | undefined {
    for (const [clientId, seen] of this.seen) if (seen.owner === owner) return clientId;
    return undefined;
  }

  private put(clientId: number, owner: Visible, said: number, stated: AwarenessEntry["state"]): void {
    if (stated === null) {
      this.take(clientId);
      return;
    }
    const id = owner.userId ?? "";
    const state = { ...stated, user: { id, name: owner.name, color: colorOf(id) } };
    const clock = Math.max(said, this.lastClock(clientId) + 1);
    const seen = this.seen.get(clientId) ?? { owner, said, clock, state, lastTold: 0, timer: null };
    Object.assign(seen, { owner, said, clock, state });
    this.seen.set(clientId, seen);
    if (seen.timer !== null) return;
    const wait = seen.lastTold + this.intervalMs - Date.now();
    if (wait <= 0) this.tell(clientId, seen);
    else seen.timer = setTimeout(() => this.tell(clientId, seen), wait);
  }

  private lastClock(clientId: number): number {
    return this.seen.get(clientId)?.clock ?? this.past.get(clientId) ?? -1;
  }

  private tell(clientId: number, seen: Seen): void {
    seen.timer = null;
    seen.lastTold = Date.now();
    this.send(clientId, seen.clock, seen.state, seen.owner);
  }

  private take(clientId: number): void {
    const seen = this.seen.get(clientId);
    if (seen === undefined) return;
    if (seen.timer !== null) clearTimeout(seen.timer);
    const clock = seen.clock + 1;
    this.past.set(clientId, clock);
    this.seen.delete(clientId);
    this.send(clientId, clock, null, seen.owner);
  }

  private send(clientId: number, clock: number, state: AwarenessEntry["state"], except: Visible): void {
    const message = encodeAwareness([{ clientId, clock, state }]);
    for (const viewer of this.viewers) if (viewer !== except) viewer.send(message);
  }

  /** This connection is gone; its state with it, unless a newer connection has taken it over. */
  leave(viewer: Visible): void {
    this.viewers.delete(viewer);
    const own = this.clientOf(viewer);
    if (own !== undefined) this.take(own);
    if (this.viewers.size === 0) this.past.clear();
  }
}
