import type * as Y from "yjs";
import { entryKeyFor, naturalKey } from "./entryKeys";
import { EditError, kindOf, refuse, requireBlock } from "./editing";
import { placeAt } from "./orderKeys";
import { attributedLists, entriesOf, entryFault, isListOf, listLimits, listOf, LOCAL, plainEntry, storedEntry, type EntryMap, type ListName } from "./shape";

type Entry = Readonly<Record<string, unknown>>;

/** An entry of a list with its stable key. */
export interface KeyedEntry {
  readonly key: string;
  readonly entry: Entry;
}

/** Edits of a block's lists: amendments, set-asides, assumed σ, columns, typed rows, samples left out, steps, what is drawn, correlations. */
export interface EntryEdits {
  /** Entries of a list in their order, with their keys. */
  entries(key: string, list: ListName): readonly KeyedEntry[];
  /**
   * Puts an entry into a list and returns its key. An entry that has a key by its nature (an amendment its row and column, a
   * typed row its id …) replaces the one of that key. Amendments, set-asides, assumed σ and samples left out get this
   * person as their author, and the present moment.
   *
   * @param entryKey which entry to replace, where its nature does not say
   */
  putEntry(key: string, list: ListName, entry: object, entryKey?: string): string;
  /** Takes an entry out of a list, named by its key or by the entry itself. */
  removeEntry(key: string, list: ListName, entry: string | object): void;
  /** Moves an entry behind another of its list; `null` for the beginning. */
  moveEntry(key: string, list: ListName, entryKey: string, afterEntryKey: string | null): void;
  /** Brings a list to exactly these entries, in this order; those that stay the same are not touched. */
  setEntries(key: string, list: ListName, wanted: readonly object[]): void;
}

/** True where two plain values say the same, whatever the order of their keys. */
export function isSame(a: unknown, b: unknown): boolean {
  if (a === b) return true;
  if (typeof a !== "object" || typeof b !== "object" || a === null || b === null || Array.isArray(a) !== Array.isArray(b)) return false;
  const one = a as Readonly<Record<string, unknown>>;
  const other = b as Readonly<Record<string, unknown>>;
  const keys = Object.keys(one).filter((k) => one[k] !== undefined);
  if (keys.length !== Object.keys(other).filter((k) => other[k] !== undefined).length) return false;
  return keys.every((k) => isSame(one[k], other[k]));
}

/** One text for all plain values that say the same, for looking up one among many. */
export function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(",")}]`;
  if (typeof value !== "object" || value === null) return JSON.stringify(value) ?? "";
  const said = Object.entries(value).filter(([, v]) => v !== undefined);
  return `{${said
    .map(([key, v]) => `${JSON.stringify(key)}:${canonical(v)}`)
    .sort()
    .join(",")}}`;
}

const withoutAuthor = ({ by: _by, at: _at, ...rest }: Entry): Entry => rest;

export function createEntryEdits(doc: Y.Doc, me: { readonly id: string }): EntryEdits {
  function container(key: string, list: ListName): EntryMap {
    const block = requireBlock(doc, key);
    const kind = kindOf(block);
    const map = isListOf(kind, list) ? listOf(block, list) : undefined;
    if (map === undefined) throw new EditError(`A ${kind} block has no list ${list}.`);
    return map;
  }

  const signed = (list: ListName, entry: Entry): Entry => (attributedLists.has(list) ? { ...entry, by: me.id, at: new Date().toISOString() } : entry);

  /** Writes an entry where it belongs; what says the same already is left alone, its author with it. */
  function write(map: EntryMap, list: ListName, entryKey: string, entry: Entry, place: string): void {
    const old = storedEntry(map.get(entryKey));
    const same =
      old !== undefined && isSame(attributedLists.has(list) ? withoutAuthor(old.entry) : old.entry, attributedLists.has(list) ? withoutAuthor(entry) : entry);
    if (same && old.place === place) return;
    map.set(entryKey, { place, entry: same ? old.entry : signed(list, entry) });
  }

  function placeIn(map: EntryMap, afterKey: string | null | undefined, moving: string): string {
    const others = entriesOf(map).filter((e) => e.key !== moving);
    const index = afterKey === undefined ? others.length : afterKey === null ? 0 : others.findIndex((e) => e.key === afterKey) + 1;
    const { place, moved } = placeAt(
      others.map((e) => e.place),
      index,
    );
    for (const { index: n, place: next } of moved) {
      const other = others[n];
      if (other !== undefined) map.set(other.key, { place: next, entry: other.entry });
    }
    return place;
  }

  function keyOf(map: EntryMap, list: ListName, entry: object): string | null {
    const natural = naturalKey(list, plainEntry(entry));
    if (natural !== null && map.has(natural)) return natural;
    return entriesOf(map).find((e) => isSame(e.entry, entry))?.key ?? null;
  }

  return {
    entries: (key, list) => entriesOf(container(key, list)).map(({ key: entryKey, entry }) => ({ key: entryKey, entry })),

    putEntry(key, list, given, entryKey) {
      const map = container(key, list);
      const entry = plainEntry(given);
      refuse(entryFault(kindOf(requireBlock(doc, key)), list, entry));
      const at = entryKey ?? naturalKey(list, entry) ?? entryKeyFor(list, entry, (k) => map.has(k));
      if (!map.has(at) && map.size >= listLimits[list]) throw new EditError(`This list is full: it holds at most ${listLimits[list].toString()} entries.`);
      doc.transact(() => {
        write(map, list, at, entry, storedEntry(map.get(at))?.place ?? placeIn(map, undefined, at));
      }, LOCAL);
      return at;
    },

    removeEntry(key, list, named) {
      const map = container(key, list);
      const at = typeof named === "string" ? named : keyOf(map, list, named);
      if (at !== null && map.has(at)) doc.transact(() => map.delete(at), LOCAL);
    },

    moveEntry(key, list, entryKey, afterEntryKey) {
      const map = container(key, list);
      const stored = storedEntry(map.get(entryKey));
      if (stored === undefined || entryKey === afterEntryKey) return;
      doc.transact(() => map.set(entryKey, { place: placeIn(map, afterEntryKey, entryKey), entry: stored.entry }), LOCAL);
    },

    setEntries(key, list, wanted) {
      const map = container(key, list);
      const kind = kindOf(requireBlock(doc, key));
      const entries = wanted.map(plainEntry);
      for (const entry of entries) refuse(entryFault(kind, list, entry));
      if (entries.length > listLimits[list])
        throw new EditError(`This list holds at most ${listLimits[list].toString()} entries; ${entries.length.toString()} were given.`);
      doc.transact(() => {
        const present = entriesOf(map);
        const used = new Set<string>();
        const keys = entries.map((entry, n) => {
          const natural = naturalKey(list, entry);
          const positional = natural === null ? present[n]?.key : undefined;
          const at = positional ?? entryKeyFor(list, entry, (k) => used.has(k));
          used.add(at);
          return at;
        });
        for (const { key: old } of present) if (!used.has(old)) map.delete(old);
        let last: string | null = null;
        keys.forEach((at, n) => {
          const old = storedEntry(map.get(at));
          const place =
            old !== undefined && (last === null || old.place > last) ? old.place : placeAt(last === null ? [] : [last], last === null ? 0 : 1).place;
          write(map, list, at, entries[n] ?? {}, place);
          last = place;
        });
      }, LOCAL);
    },
  };
}
