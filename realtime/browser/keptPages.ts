/**
 * What this browser keeps of pages: one IndexedDB database for each page, epoch and user (rule S4), and beside it in
 * localStorage, so that it can be read at once, how many edits in it no receipt has covered and whether it was set aside.
 *
 * ```
 * cotectic/kept/<name>           "1"
 * cotectic/unsent/<name>/<tab>   number of edits, one entry a tab
 * cotectic/aside/<name>          sentence that says why it must never merge by itself (rule A6)
 * name = page/<page>/<epoch>/<user>/<generation>, and the database's name after "cotectic/"
 * ```
 */
const ROOT = "cotectic";
const KEPT = `${ROOT}/kept/`;
const UNSENT = `${ROOT}/unsent/`;
const ASIDE = `${ROOT}/aside/`;

export interface KeptPage {
  /** Name in the lists here. */
  readonly name: string;
  readonly pageId: string;
  readonly epoch: number;
  readonly userId: string;
  readonly generation: number;
}

export const databaseName = ({ name }: Pick<KeptPage, "name">): string => `${ROOT}/${name}`;

function store(): Storage | null {
  try {
    return typeof localStorage === "undefined" ? null : localStorage;
  } catch {
    // The person's browser keeps nothing for this site.
    return null;
  }
}

function write(key: string, value: string | null): void {
  try {
    if (value === null) store()?.removeItem(key);
    else store()?.setItem(key, value);
  } catch {
    // Full: the edits themselves are in IndexedDB; only the count is not.
  }
}

function keysUnder(prefix: string): string[] {
  const all = store();
  if (all === null) return [];
  return Array.from({ length: all.length }, (_, n) => all.key(n) ?? "").filter((key) => key.startsWith(prefix));
}

function parse(name: string): KeptPage | null {
  const [kind, pageId, epoch, userId, generation] = name.split("/");
  if (kind !== "page" || pageId === undefined || userId === undefined || generation === undefined) return null;
  return { name, pageId, epoch: Number(epoch), userId, generation: Number(generation) };
}

/** Everything this browser keeps. */
export function keptPages(): readonly KeptPage[] {
  return keysUnder(KEPT).flatMap((key) => parse(key.slice(KEPT.length)) ?? []);
}

/** The database in which this stay keeps the page: the first of its page, epoch and user that was not set aside. */
export function keepPage(pageId: string, epoch: number, userId: string): KeptPage {
  for (let generation = 0; ; generation++) {
    const name = `page/${pageId}/${epoch.toString()}/${userId}/${generation.toString()}`;
    if (store()?.getItem(ASIDE + name) != null) continue;
    write(KEPT + name, "1");
    return { name, pageId, epoch, userId, generation };
  }
}

const unsentKeys = (kept: KeptPage): string[] => keysUnder(`${UNSENT}${kept.name}/`);
const countAt = (key: string): number => Number(store()?.getItem(key) ?? 0) || 0;

/** Edits in a kept page that no receipt has covered. */
export function unsentIn(kept: KeptPage): number {
  return unsentKeys(kept).reduce((sum, key) => sum + countAt(key), 0);
}

/** Counts of other stays that this one has taken over; they are taken away once it has sent everything. */
export const unsentMarks = (kept: KeptPage): readonly string[] => unsentKeys(kept).filter((key) => countAt(key) > 0);
export const clearMarks = (keys: readonly string[]): void => keys.forEach((key) => write(key, null));

export function markUnsent(kept: KeptPage, tab: string, count: number): void {
  write(`${UNSENT}${kept.name}/${tab}`, count === 0 ? null : count.toString());
}

/** Why a kept page was set aside; `null` for one that was not. */
export const whyAside = (kept: KeptPage): string | null => store()?.getItem(ASIDE + kept.name) ?? null;

/** From now on this is a draft: it never merges by itself. */
export const setAside = (kept: KeptPage, why: string): void => write(ASIDE + kept.name, why);

/** Deletes a kept page for good. */
export async function forget(kept: KeptPage): Promise<void> {
  for (const key of [KEPT + kept.name, ASIDE + kept.name, ...unsentKeys(kept)]) write(key, null);
  if (typeof indexedDB === "undefined") return;
  await new Promise<void>((resolve) => {
    const request = indexedDB.deleteDatabase(databaseName(kept));
    // Another tab that has it open closes it when asked; the browser deletes it then.
    request.onsuccess = request.onerror = request.onblocked = () => resolve();
  });
}

/** Edits in this browser that no receipt has covered, of one user or of all. */
export function unsentEdits(userId?: string): number {
  return keptPages().reduce((sum, kept) => (userId === undefined || kept.userId === userId ? sum + unsentIn(kept) : sum), 0);
}

/** Whether signing out would lose edits. */
export const hasUnsentEdits = (userId?: string): boolean => unsentEdits(userId) > 0;

/** Deletes everything this browser keeps of pages, for signing out. */
export async function purgeUnsentEdits(userId?: string): Promise<void> {
  await Promise.all(keptPages().flatMap((kept) => (userId === undefined || kept.userId === userId ? [forget(kept)] : [])));
}
