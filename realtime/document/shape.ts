import { blockKinds, blockSchema, type Block, type BlockKind } from "@/cells";
import * as Y from "yjs";

/**
 * The shape of a live page (rules D1, D5).
 *
 * ```
 * page    { shape, title, empty? }            root map
 * bodies  { alias: id }                       root map
 * ownBodies { id: body }                      root map; what an id stands for never changes
 * blocks  { key: block }                      root map; a block's key never changes
 *   block { kind, id, place, …plain fields, binned? }
 *         text                                Y.Text, formulas and notes
 *         <list> { entryKey: { place, entry } }   one Y.Map a list of its kind, made with the block
 * ```
 *
 * `place` is a fractional order key. Fields that this release does not know survive untouched.
 */
export const SHAPE_VERSION = 1;

/** A live block. */
export type BlockMap = Y.Map<unknown>;
/** A list of a block: stored entries by their stable key. */
export type EntryMap = Y.Map<unknown>;
/** What stands in the document for one entry of a list. */
export interface StoredEntry {
  readonly place: string;
  readonly entry: Readonly<Record<string, unknown>>;
}

/** Origin of transactions made by the person at this browser; the undo manager follows it and nothing else. */
export const LOCAL = { local: true } as const;

export type ListName = "typed" | "columns" | "assumed" | "amendments" | "setAside" | "correlations" | "leaveOut" | "drawn" | "steps";

/** Lists of each kind of block, all made when the block is. */
export const listsOf: Readonly<Record<BlockKind, readonly ListName[]>> = {
  data: ["typed", "columns", "assumed", "amendments", "setAside", "correlations"],
  formula: [],
  plot: ["drawn"],
  trend: ["leaveOut"],
  budget: ["steps"],
  note: [],
};

/** Most entries a list may hold. */
export const listLimits: Readonly<Record<ListName, number>> = {
  typed: 2000,
  columns: 300,
  assumed: 1000,
  amendments: 20_000,
  setAside: 20_000,
  correlations: 300,
  leaveOut: 20_000,
  drawn: 40,
  steps: 20,
};

/** Lists whose entries say who made them and why (rule D6). */
export const attributedLists: ReadonlySet<ListName> = new Set<ListName>(["amendments", "setAside", "assumed", "leaveOut"]);
/** Lists that stand in the page document even when nothing is in them. */
const requiredLists: ReadonlySet<ListName> = new Set<ListName>(["drawn", "steps"]);

export const hasText = (kind: BlockKind): boolean => kind === "formula" || kind === "note";
export const isRequiredList = (list: ListName): boolean => requiredLists.has(list);
export const isBlockKind = (value: unknown): value is BlockKind => blockKinds.some((kind) => kind === value);

/** The most blocks a page may hold, its bin included. */
export const MOST_BLOCKS = 600;
export const MOST_TEXT = 100_000;
export const MOST_TITLE = 300;

interface FieldSchema {
  safeParse(value: unknown): { success: boolean; error?: { issues: readonly { message: string; path: readonly PropertyKey[] }[] } };
}

const fieldSchemas: ReadonlyMap<string, ReadonlyMap<string, FieldSchema>> = new Map(
  blockSchema.options.map((option) => [option.shape.kind.value, new Map<string, FieldSchema>(Object.entries(option.shape))]),
);

/** Names of the fields a kind of block has in the page document. */
export const fieldNames = (kind: BlockKind): readonly string[] => [...(fieldSchemas.get(kind)?.keys() ?? [])];

export const isListOf = (kind: BlockKind, field: string): field is ListName => listsOf[kind].some((list) => list === field);

/** Whether a plain value has a NUL character in it, in a key or a text: PostgreSQL's JSON keeps none. */
export function holdsNul(value: unknown): boolean {
  if (typeof value === "string") return value.includes("\u0000");
  if (Array.isArray(value)) return value.some(holdsNul);
  return typeof value === "object" && value !== null && Object.entries(value).some(([key, v]) => key.includes("\u0000") || holdsNul(v));
}

/**
 * Why a value cannot stand in a field of a block of this kind, in a sentence; `null` where it can. A field that this
 * release does not know is judged by its size alone, elsewhere.
 */
export function fieldFault(kind: BlockKind, field: string, value: unknown): string | null {
  if (holdsNul(value)) return `The field ${field} of a ${kind} block holds a NUL character, which no page can keep. Take it out.`;
  const schema = fieldSchemas.get(kind)?.get(field);
  if (schema === undefined) return null;
  const parsed = schema.safeParse(value);
  if (parsed.success) return null;
  const issue = parsed.error?.issues[0];
  const place = [field, ...(issue?.path ?? []).map(String)].join(" → ");
  return `The field ${place} of a ${kind} block cannot be set so: ${issue?.message ?? "the value has another form"}.`;
}

/** Why an entry cannot stand in a list; `null` where it can. */
export const entryFault = (kind: BlockKind, list: ListName, entry: unknown): string | null => fieldFault(kind, list, [entry]);

/** A copy of plain values as the document stores them: nothing undefined, no prototypes of others. */
export function plainCopy(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(plainCopy);
  if (typeof value !== "object" || value === null) return value;
  return plainEntry(value);
}

/** {@link plainCopy} of an object. */
export function plainEntry(value: object): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(value)
      .filter(([, v]) => v !== undefined)
      .map(([k, v]) => [k, plainCopy(v)]),
  );
}

export const blocksOf = (doc: Y.Doc): Y.Map<BlockMap> => doc.getMap<BlockMap>("blocks");
export const pageOf = (doc: Y.Doc): Y.Map<unknown> => doc.getMap("page");
export const bodiesOf = (doc: Y.Doc): Y.Map<unknown> => doc.getMap("bodies");
/** The group's own bodies that the page uses, whole, by id. */
export const ownBodiesOf = (doc: Y.Doc): Y.Map<unknown> => doc.getMap("ownBodies");

/**
 * An empty document whose roots are what pages have there. A root that an update brings before anybody asked for it is
 * another object, and turns into a map later: transactions would name a part that pages do not have.
 */
export function emptyDoc(): Y.Doc {
  const doc = new Y.Doc();
  for (const root of [pageOf, blocksOf, bodiesOf, ownBodiesOf]) root(doc);
  return doc;
}

/** Whether a document holds a page already; one that does not is still to be loaded, never to be filled (rule D2). */
export const holdsPage = (doc: Y.Doc): boolean => pageOf(doc).size > 0;

/** The map of one list of a block; `undefined` where the block has none. */
export function listOf(block: BlockMap, list: ListName): EntryMap | undefined {
  const value = block.get(list);
  return value instanceof Y.Map ? value : undefined;
}

/** A stored entry as it should be; `undefined` for anything else. */
export function storedEntry(value: unknown): StoredEntry | undefined {
  if (typeof value !== "object" || value === null || !("place" in value) || !("entry" in value)) return undefined;
  const { place, entry } = value;
  if (typeof place !== "string" || typeof entry !== "object" || entry === null || Array.isArray(entry)) return undefined;
  return { place, entry: entry as Readonly<Record<string, unknown>> };
}

/** Entries of a list in their order, ties by key. */
export function entriesOf(map: EntryMap): readonly { readonly key: string; readonly place: string; readonly entry: StoredEntry["entry"] }[] {
  const entries: { key: string; place: string; entry: StoredEntry["entry"] }[] = [];
  for (const [key, value] of map.entries()) {
    const stored = storedEntry(value);
    if (stored !== undefined) entries.push({ key, ...stored });
  }
  return entries.sort(byPlace);
}

/** Order of two things on a page: by place, ties by key, both compared by code unit so that every machine agrees. */
export function byPlace(a: { readonly place: string; readonly key: string }, b: { readonly place: string; readonly key: string }): number {
  if (a.place !== b.place) return a.place < b.place ? -1 : 1;
  if (a.key === b.key) return 0;
  return a.key < b.key ? -1 : 1;
}

export type { Block, BlockKind };
