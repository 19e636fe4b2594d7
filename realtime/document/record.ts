import * as Y from "yjs";
import { canonical, isSame } from "./entryEdits";
import { newItems, partOf, standingBefore } from "./roles";
import { attributedLists, blocksOf, isBlockKind, listOf, listsOf, storedEntry, type BlockMap, type ListName } from "./shape";

type Entry = Readonly<Record<string, unknown>>;

/** A change of an amendment, a set-aside, an assumed σ or a sample left out, as the append-only record keeps it (rule D6). */
export interface RecordLine {
  readonly blockKey: string;
  readonly list: ListName;
  readonly entryKey: string;
  readonly before: Entry | null;
  readonly after: Entry | null;
}

const entryIn = (item: Y.Item | null): Entry | null => {
  if (!(item?.content instanceof Y.ContentAny)) return null;
  return storedEntry(item.content.arr[item.content.arr.length - 1])?.entry ?? null;
};

/**
 * What a transaction did to the attributed lists. Two concurrent amendments of one value are both here: the loser's
 * entry is still to be seen in the transaction that brought it, and nowhere later.
 */
export function recordOf(transaction: Y.Transaction): readonly RecordLine[] {
  const lines: RecordLine[] = [];
  const written = new Set<string>();
  for (const item of newItems(transaction)) {
    const part = partOf(transaction.doc, item.parent);
    const after = entryIn(item);
    if (part?.is !== "list" || !attributedLists.has(part.list) || item.parentSub === null || after === null) continue;
    written.add(`${part.key}/${part.list}/${item.parentSub}`);
    const before = entryIn(standingBefore(transaction, part.map, item.parentSub));
    // A change of order alone says nothing new.
    if (before === null || !isSame(before, after)) lines.push({ blockKey: part.key, list: part.list, entryKey: item.parentSub, before, after });
  }
  for (const [type, keys] of transaction.changed) {
    const part = partOf(transaction.doc, type);
    if (part?.is !== "list" || !attributedLists.has(part.list)) continue;
    for (const key of keys) {
      if (key === null || part.map.has(key) || written.has(`${part.key}/${part.list}/${key}`)) continue;
      const before = entryIn(standingBefore(transaction, part.map, key));
      if (before !== null) lines.push({ blockKey: part.key, list: part.list, entryKey: key, before, after: null });
    }
  }
  return lines.reverse();
}

/** Names that columns were given in this transaction, back to what they were: only so far may a foreign entry's column differ. */
function renamedColumns(transaction: Y.Transaction, block: BlockMap): ReadonlyMap<unknown, unknown> {
  return new Map([...renamedInRows(transaction, block), ...renamedInColumns(transaction, block)]);
}

function renamedInColumns(transaction: Y.Transaction, block: BlockMap): ReadonlyMap<unknown, unknown> {
  const columns = listOf(block, "columns");
  const names = new Map<unknown, unknown>();
  if (columns === undefined) return names;
  const before = new Map<string, unknown>();
  const nameOf = (entry: Entry): unknown => entry.name ?? entry.header;
  for (const [key, item] of columns._map) {
    const old = standingBefore(transaction, columns, key);
    const stored = old?.content instanceof Y.ContentAny ? storedEntry(old.content.arr[0]) : undefined;
    if (stored !== undefined && (item !== old || item.deleted)) before.set(stored.place, nameOf(stored.entry));
  }
  for (const value of columns.values()) {
    const stored = storedEntry(value);
    if (stored !== undefined && before.has(stored.place)) names.set(nameOf(stored.entry), before.get(stored.place));
  }
  return names;
}

const cellsOf = (entry: Entry | null): Readonly<Record<string, unknown>> =>
  typeof entry?.cells === "object" && entry.cells !== null ? (entry.cells as Readonly<Record<string, unknown>>) : {};

/**
 * A typed table that declares no columns has them from its rows: a row in which a cell changed its name and kept its text renames
 * it. Rows that lost against somebody else's of the same moment count too: what came with them was written under their names.
 */
function renamedInRows(transaction: Y.Transaction, block: BlockMap): ReadonlyMap<unknown, unknown> {
  const names = new Map<unknown, unknown>();
  const typed = listOf(block, "typed");
  if (typed === undefined) return names;
  for (const item of newItems(transaction)) {
    if (item.parent !== typed || item.parentSub === null) continue;
    const [was, is] = [cellsOf(entryIn(standingBefore(transaction, typed, item.parentSub))), cellsOf(entryIn(item))];
    // Two may have given one name to two columns: a cell is known by its text, not by whether its name is new.
    for (const to of Object.keys(is)) {
      if (was[to] === is[to]) continue;
      const [from, another] = Object.keys(was).filter((name) => was[name] === is[to]);
      const isAlone = Object.keys(is).filter((name) => is[name] === is[to]).length === 1;
      if (from !== undefined && another === undefined && isAlone) names.set(to, from);
    }
  }
  return names;
}

/** Every attributed entry that stood on the page before the transaction. */
function* standing(transaction: Y.Transaction, list: ListName): Generator<Entry> {
  for (const block of blocksOf(transaction.doc).values()) {
    if (!(block instanceof Y.Map)) continue;
    const kind: unknown = block.get("kind");
    const map = isBlockKind(kind) && listsOf[kind].includes(list) ? listOf(block, list) : undefined;
    if (map === undefined) continue;
    for (const key of map._map.keys()) {
      const entry = entryIn(standingBefore(transaction, map, key));
      if (entry !== null) yield entry;
    }
  }
}

/** An entry of a transaction whose author is not the sender and which was not on the page before. */
export interface ForeignEntry {
  readonly list: ListName;
  readonly entry: Entry;
}

/**
 * Entries that do not carry the sender's name (rule D6). One that stands on the page already, word for word, may be
 * written again by anybody (a copy of a block, a new order, a renamed column); so may one that is on record, since undo
 * brings back what was taken away; whether it is, the database knows.
 */
export function foreignEntries(transaction: Y.Transaction, sender: string): readonly ForeignEntry[] {
  const foreign: ForeignEntry[] = [];
  const standingIn = new Map<ListName, ReadonlySet<string>>();
  const renamedIn = new Map<string, ReadonlyMap<unknown, unknown>>();
  for (const line of recordOf(transaction)) {
    if (line.after === null || line.after.by === sender) continue;
    const { blockKey, list, after: entry } = line;
    const block = blocksOf(transaction.doc).get(blockKey);
    const names = renamedIn.get(blockKey) ?? (block instanceof Y.Map ? renamedColumns(transaction, block) : new Map<unknown, unknown>());
    renamedIn.set(blockKey, names);
    const there = standingIn.get(list) ?? new Set([...standing(transaction, list)].map(canonical));
    standingIn.set(list, there);
    const versions = names.has(entry.column) ? [entry, { ...entry, column: names.get(entry.column) }] : [entry];
    if (!versions.some((version) => there.has(canonical(version)))) foreign.push({ list, entry });
  }
  return foreign;
}
