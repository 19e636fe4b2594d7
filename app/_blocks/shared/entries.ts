import type { ListName, PageEdits } from "@/realtime/document";

function keyOf(edits: PageEdits, blockKey: string, list: ListName, index: number, entry: object): string | undefined {
  const all = edits.entries(blockKey, list);
  const wanted = JSON.stringify(entry);
  const atPlace = all[index];
  if (atPlace !== undefined && JSON.stringify(atPlace.entry) === wanted) return atPlace.key;
  // Somebody moved or removed an entry since this was drawn: the entry itself says which one is meant.
  return all.find((one) => JSON.stringify(one.entry) === wanted)?.key ?? (all.length > index ? atPlace?.key : undefined);
}

/** Puts a changed entry in the place of the one that was shown; does nothing where that is gone. */
export function changeEntry<T extends object>(edits: PageEdits, blockKey: string, list: ListName, index: number, shown: T, next: T): void {
  const key = keyOf(edits, blockKey, list, index, shown);
  if (key !== undefined) edits.putEntry(blockKey, list, next, key);
}

/** Takes away the entry that was shown at a place of a list. */
export function dropEntry(edits: PageEdits, blockKey: string, list: ListName, index: number, shown: object): void {
  const key = keyOf(edits, blockKey, list, index, shown);
  if (key !== undefined) edits.removeEntry(blockKey, list, key);
}

/** Moves the entry that was shown at a place by one, towards the end or the beginning of its list. */
export function shiftEntry(edits: PageEdits, blockKey: string, list: ListName, index: number, shown: object, by: 1 | -1): void {
  const all = edits.entries(blockKey, list);
  const key = keyOf(edits, blockKey, list, index, shown);
  const at = all.findIndex((one) => one.key === key);
  if (key === undefined || at < 0 || at + by < 0 || at + by >= all.length) return;
  const after = by > 0 ? all[at + 1] : all[at - 2];
  edits.moveEntry(blockKey, list, key, after?.key ?? null);
}
