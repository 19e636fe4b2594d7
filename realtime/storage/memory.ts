import { isSame } from "../document";
import { fold } from "./fold";
import type { Appended, EditRow, PageStorage, StoredPage } from "./pageStorage";

interface MemoryPage {
  groupId: string;
  epoch: number;
  archived: boolean;
  base: Uint8Array | null;
  log: { seq: bigint; update: Uint8Array }[];
  owners: Map<number, string | null>;
  record: EditRow["record"][number][];
  heading: EditRow["heading"];
}

/** Pages in memory, for tests: the same contract, no disk. */
export class MemoryStorage implements PageStorage {
  private readonly pages = new Map<string, MemoryPage>();
  private readonly editors = new Set<string>();
  private seq = 0n;

  /** Adds a page whose document is `update`. */
  addPage(pageId: string, groupId: string, update: Uint8Array): void {
    this.seq += 1n;
    this.pages.set(pageId, { groupId, epoch: 1, archived: false, base: null, log: [{ seq: this.seq, update }], owners: new Map(), record: [], heading: null });
  }

  /** Gives or takes the right to edit the pages of a group. */
  setEditor(groupId: string, userId: string, may: boolean): void {
    if (may) this.editors.add(`${groupId}/${userId}`);
    else this.editors.delete(`${groupId}/${userId}`);
  }

  recordOf(pageId: string): readonly EditRow["record"][number][] {
    return this.pages.get(pageId)?.record ?? [];
  }

  headingOf(pageId: string): EditRow["heading"] {
    return this.pages.get(pageId)?.heading ?? null;
  }

  load(pageId: string): Promise<StoredPage | null> {
    const page = this.pages.get(pageId);
    if (page === undefined) return Promise.resolve(null);
    const { groupId, epoch, archived, base, log, owners } = page;
    return Promise.resolve({ groupId, epoch, archived, base, updates: log.map((row) => row.update), owners: new Map(owners) });
  }

  append(rows: readonly EditRow[]): Promise<Appended> {
    const refused = rows.flatMap((row, n) => (this.mayWrite(row) ? [] : [n]));
    if (refused.length > 0) return Promise.resolve({ is: "refused", rows: refused });
    const seqs = rows.map((row) => {
      const page = this.pages.get(row.pageId);
      this.seq += 1n;
      page?.log.push({ seq: this.seq, update: row.update });
      page?.record.push(...row.record);
      for (const client of row.clients) page?.owners.set(client, row.userId);
      if (page !== undefined && row.heading !== null) page.heading = row.heading;
      return this.seq;
    });
    return Promise.resolve({ is: "stored", seqs });
  }

  private mayWrite(row: EditRow): boolean {
    const page = this.pages.get(row.pageId);
    if (page === undefined || page.archived || page.epoch !== row.epoch || !this.editors.has(`${page.groupId}/${row.userId}`)) return false;
    return row.clients.every((client) => !page.owners.has(client) || page.owners.get(client) === row.userId);
  }

  fetch(pageId: string, seqs: readonly bigint[]): Promise<readonly Uint8Array[]> {
    return Promise.resolve((this.pages.get(pageId)?.log ?? []).filter((row) => seqs.includes(row.seq)).map((row) => row.update));
  }

  isOnRecord(pageId: string, list: string, entry: Readonly<Record<string, unknown>>): Promise<boolean> {
    const record = this.pages.get(pageId)?.record ?? [];
    return Promise.resolve(record.some((line) => line.list === list && (isSame(line.before, entry) || isSame(line.after, entry))));
  }

  compact(pageId: string): Promise<number> {
    const page = this.pages.get(pageId);
    if (page === undefined || page.log.length === 0) return Promise.resolve(0);
    const covered = page.log.length;
    page.base = fold(
      page.base,
      page.log.map((row) => row.update),
    );
    page.log = [];
    return Promise.resolve(covered);
  }

  close(): Promise<void> {
    return Promise.resolve();
  }
}
