import type { Appended, EditRow, PageStorage } from "../storage/pageStorage";

/** An accepted edit on its way to the disk. */
export interface PendingEdit {
  readonly is: "edit";
  readonly row: EditRow;
}
/** Something that waits until everything before it is on the disk. */
export interface PendingMarker {
  readonly is: "marker";
  done(): void;
}
export type Pending = PendingEdit | PendingMarker;

/** A page as the flusher sees it: a queue, and somebody who wants to know. */
export interface FlushTarget<P extends Pending = Pending> {
  /** What waits, in order. The flusher takes from its front. */
  readonly pending: P[];
  /** These are committed, in this order. */
  committed(items: readonly P[], seqs: readonly bigint[]): void;
  /** These are not, and will not be; `refused` are rows of people who may not edit, by place among the edits. */
  failed(items: readonly P[], refused: readonly number[], error: unknown): void;
}

const MOST_ROWS = 256;
const MOST_BYTES = 1 << 20;

interface Batch {
  readonly target: FlushTarget;
  readonly items: Pending[];
}

const rowsOf = (batch: Batch): EditRow[] => batch.items.flatMap((item) => (item.is === "edit" ? [item.row] : []));

/**
 * Commits what pages have pending (rule S1): at once, one flush in flight, what arrives meanwhile goes into the next. Pages
 * take turns, one edit a turn, so that no page starves another. If a flush fails it is tried again page by page, and only
 * the guilty page is told (rule S4).
 */
export class Flusher {
  private ring: FlushTarget[] = [];
  private inFlight: ReadonlySet<FlushTarget> = new Set();
  private isScheduled = false;
  private idlers: (() => void)[] = [];

  constructor(private readonly storage: Pick<PageStorage, "append">) {}

  /** Tells the flusher that a page has something pending. */
  wake(target: FlushTarget): void {
    if (!this.ring.includes(target)) this.ring.push(target);
    if (this.inFlight.size > 0 || this.isScheduled) return;
    this.isScheduled = true;
    // Frames that arrived together are flushed together.
    setImmediate(() => {
      this.isScheduled = false;
      void this.flush();
    });
  }

  /** True while something of this page is on its way. */
  isBusy(target: FlushTarget): boolean {
    return target.pending.length > 0 || this.inFlight.has(target);
  }

  /** Fulfilled once nothing of this page is on its way. */
  async idle(target: FlushTarget): Promise<void> {
    while (this.isBusy(target)) await new Promise<void>((resolve) => this.idlers.push(resolve));
  }

  private take(): Batch[] {
    const batches = new Map<FlushTarget, Batch>();
    let rows = 0;
    let bytes = 0;
    while (this.ring.length > 0) {
      const target = this.ring.shift();
      const item = target?.pending[0];
      if (target === undefined || item === undefined) continue;
      const size = item.is === "edit" ? item.row.update.length : 0;
      if (rows > 0 && (rows >= MOST_ROWS || bytes + size > MOST_BYTES)) {
        this.ring.unshift(target);
        break;
      }
      target.pending.shift();
      let batch = batches.get(target);
      if (batch === undefined) batches.set(target, (batch = { target, items: [] }));
      batch.items.push(item);
      rows += item.is === "edit" ? 1 : 0;
      bytes += size;
      if (target.pending.length > 0) this.ring.push(target);
    }
    return [...batches.values()];
  }

  private async flush(): Promise<void> {
    if (this.inFlight.size > 0) return;
    const batches = this.take();
    if (batches.length === 0) return;
    this.inFlight = new Set(batches.map((b) => b.target));
    const whole = await this.append(batches.flatMap(rowsOf));
    if (whole.is === "stored") {
      let from = 0;
      for (const batch of batches) {
        const count = rowsOf(batch).length;
        this.tell(batch, { is: "stored", seqs: whole.seqs.slice(from, from + count) });
        from += count;
      }
    } else if (batches.length === 1 && batches[0] !== undefined) this.tell(batches[0], whole);
    else for (const batch of batches) this.tell(batch, await this.append(rowsOf(batch)));
    this.inFlight = new Set();
    const idlers = this.idlers;
    this.idlers = [];
    for (const idler of idlers) idler();
    if (this.ring.length > 0) void this.flush();
  }

  private async append(rows: readonly EditRow[]): Promise<Appended | { readonly is: "failed"; readonly error: unknown }> {
    if (rows.length === 0) return { is: "stored", seqs: [] };
    try {
      return await this.storage.append(rows);
    } catch (error) {
      return { is: "failed", error };
    }
  }

  private tell({ target, items }: Batch, outcome: Appended | { readonly is: "failed"; readonly error: unknown }): void {
    try {
      if (outcome.is === "stored") target.committed(items, outcome.seqs);
      else target.failed(items, outcome.is === "refused" ? outcome.rows : [], outcome.is === "failed" ? outcome.error : null);
    } catch (error) {
      console.error("A page could not be told what became of its edits:", error);
      target.failed([], [], error);
    }
  }
}
