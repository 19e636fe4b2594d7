import { handleSchema, MOST_OWN_BODIES, ownBodyIdSchema, ownBodySchema } from "@/cells";
import * as Y from "yjs";
import { isSame } from "./entryEdits";
import { isOrderKey } from "./orderKeys";
import { isNew, newItems, partOf, standingBefore, type Part } from "./roles";
import {
  blocksOf,
  entryFault,
  fieldFault,
  fieldNames,
  hasText,
  holdsNul,
  isBlockKind,
  isListOf,
  listLimits,
  listsOf,
  MOST_BLOCKS,
  MOST_TEXT,
  MOST_TITLE,
  storedEntry,
  type BlockMap,
} from "./shape";

/** Largest value of a field that this release does not know; it is kept for the release that does. */
const MOST_UNKNOWN = 65_536;
const MOST_DEPTH = 30;
const MOST_BODIES = 200;
const MOST_KEY = 600;
const rootNames: ReadonlySet<string> = new Set(["page", "blocks", "bodies", "ownBodies"]);
const blockKey = /^[A-Za-z0-9]{1,40}$/;

type Fault = string | null;
const first = <T>(things: Iterable<T>, faultOf: (thing: T) => Fault): Fault => {
  for (const thing of things) {
    const fault = faultOf(thing);
    if (fault !== null) return fault;
  }
  return null;
};

/** Whether plain values lie in one another deeper than any page needs; whoever walks over them could not come back. */
function isTooDeep(value: unknown, left = MOST_DEPTH): boolean {
  if (typeof value !== "object" || value === null) return false;
  return left === 0 || Object.values(value).some((inner) => isTooDeep(inner, left - 1));
}

/** A value of no known field: plain JSON of bounded size and depth. */
function unknownFault(field: string, value: unknown): Fault {
  try {
    if (isTooDeep(value)) return `The field ${field.slice(0, 40)} holds values inside values, more than ${MOST_DEPTH.toString()} deep.`;
    const text = JSON.stringify(value) as string | undefined;
    if (text !== undefined && text.length <= MOST_UNKNOWN && field.length <= 40) return null;
  } catch {
    // Not JSON: said below.
  }
  return `The field ${field.slice(0, 40)} holds something that a page cannot keep.`;
}

/** What may stand where: letters in texts, plain values and the containers of D1 in maps, nothing else anywhere. */
function itemFault(doc: Y.Doc, item: Y.Item): Fault {
  const { content, parent, parentSub } = item;
  if (content instanceof Y.ContentDeleted) return null;
  if (parent instanceof Y.Text)
    return content instanceof Y.ContentString && parentSub === null ? null : "A text of this page holds letters only; this edit brought something else.";
  if (!(parent instanceof Y.AbstractType) || parentSub === null || holdsNul(parentSub)) return "This edit puts something where a page has no place for it.";
  if (content instanceof Y.ContentAny) {
    if (content.arr.length !== 1) return "This edit puts several values where one belongs.";
    return holdsNul(content.arr[0]) ? "This edit holds a NUL character, which no page can keep." : null;
  }
  if (content instanceof Y.ContentType) {
    // What lies in something that is gone by now plays no part any more.
    return item.deleted || parent._item?.deleted === true || partOf(doc, content.type) !== null
      ? null
      : `A block has no container called ${parentSub.slice(0, 40)}.`;
  }
  return "This edit brought a kind of content that pages do not have.";
}

function namesFault(value: unknown): Fault {
  const fine = Array.isArray(value) && value.length <= 20 && value.every((v) => typeof v === "string" && v.length <= 40);
  return fine ? null : "The list of empty lists is damaged.";
}

function pageFault(map: Y.Map<unknown>, field: string): Fault {
  const value = map.get(field);
  if (field === "shape") return "Only the server changes the shape of a page.";
  if (field === "title")
    return typeof value === "string" && value.length <= MOST_TITLE ? null : `The title of a page is a text of at most ${MOST_TITLE.toString()} characters.`;
  if (field === "empty") return value === undefined ? null : namesFault(value);
  return value === undefined ? null : unknownFault(field, value);
}

function bodyFault(map: Y.Map<unknown>, alias: string): Fault {
  if (!map.has(alias)) return null;
  const body = map.get(alias);
  if (map.size > MOST_BODIES) return `A page has at most ${MOST_BODIES.toString()} names for bodies.`;
  return handleSchema.safeParse(alias).success && typeof body === "string" && body.length <= 80
    ? null
    : "A name for a body is a handle, and stands for a short text.";
}

/** An own body comes whole and right, and what its id stands for never changes: another version has another id. */
function ownBodyFault(transaction: Y.Transaction, map: Y.Map<unknown>, id: string): Fault {
  if (!map.has(id)) return null;
  const body = map.get(id);
  if (map.size > MOST_OWN_BODIES) return `A page has at most ${MOST_OWN_BODIES.toString()} own bodies.`;
  if (!ownBodyIdSchema.safeParse(id).success) return "The id of an own body is damaged.";
  const read = ownBodySchema.safeParse(body);
  if (!read.success) return `The body ${id} cannot be taken: ${read.error.issues[0]?.message ?? "it has another form"}.`;
  const before = standingBefore(transaction, map, id)?.content;
  return before instanceof Y.ContentAny && !isSame(before.arr[0], body)
    ? `The body ${id} is on this page already with other values. Give yours another id.`
    : null;
}

function binnedFault(value: unknown): Fault {
  const fine = typeof value === "object" && value !== null && Object.keys(value).length === 2 && "by" in value && "at" in value;
  return fine && String(value.by).length <= 80 && String(value.at).length <= 40 ? null : "What says who laid a block into the bin is damaged.";
}

function blockFieldFault(block: BlockMap, field: string): Fault {
  const kind = block.get("kind");
  if (!isBlockKind(kind)) return "A block says which kind it is, and this one names no kind there is.";
  const value = block.get(field);
  if (isListOf(kind, field)) return value instanceof Y.Map ? null : `The list ${field} of a ${kind} block was replaced by something else.`;
  if (field === "text" && hasText(kind)) return value instanceof Y.Text ? null : `The text of a ${kind} block was replaced by something else.`;
  if (value instanceof Y.AbstractType) return `A ${kind} block has no container called ${field.slice(0, 40)}.`;
  if (field === "place") return isOrderKey(value) ? null : "A block's place on the page is damaged.";
  if (value === undefined) return field === "kind" || field === "id" ? `A block cannot be without its ${field}.` : null;
  if (field === "binned") return binnedFault(value);
  if (field === "empty") return namesFault(value);
  return fieldNames(kind).includes(field) ? fieldFault(kind, field, value) : unknownFault(field, value);
}

/** A block that is new on the page: everything in it, and every container of its kind (D1). */
function wholeBlockFault(key: string, block: unknown): Fault {
  if (!blockKey.test(key)) return "A block's key is damaged.";
  if (!(block instanceof Y.Map)) return "Something that is no block was put among the blocks.";
  const map: BlockMap = block;
  const kind = map.get("kind");
  if (!isBlockKind(kind)) return "A block says which kind it is, and this one names no kind there is.";
  const needed = ["kind", "id", "place", ...listsOf[kind], ...(hasText(kind) ? ["text"] : [])];
  return first(new Set([...needed, ...map.keys()]), (field) => blockFieldFault(map, field));
}

function changedFault(transaction: Y.Transaction, part: Part, keys: ReadonlySet<string | null>): Fault {
  if (part.is === "text")
    return part.text.length <= MOST_TEXT
      ? null
      : `A text has at most ${MOST_TEXT.toLocaleString("en")} characters; this edit makes it ${part.text.length.toLocaleString("en")}.`;
  return first(keys, (key) => {
    if (key === null) return "This edit puts something where a page has no place for it.";
    switch (part.is) {
      case "page":
        return pageFault(part.map, key);
      case "bodies":
        return bodyFault(part.map, key);
      case "ownBodies":
        return ownBodyFault(transaction, part.map, key);
      case "blocks":
        if (part.map.size > MOST_BLOCKS) return `A page has at most ${MOST_BLOCKS.toString()} blocks, its bin included.`;
        return part.map.has(key) ? wholeBlockFault(key, part.map.get(key)) : null;
      case "block":
        if (key === "kind" && part.map._item !== null && !isNew(transaction, part.map._item)) return "The kind of a block never changes.";
        return blockFieldFault(part.map, key);
      case "list":
        return entryMapFault(part, key);
    }
  });
}

function entryMapFault(part: Part & { is: "list" }, key: string): Fault {
  if (!part.map.has(key)) return null;
  if (key.length > MOST_KEY) return `A key in the list ${part.list} is too long.`;
  if (part.map.size > listLimits[part.list]) return `The list ${part.list} holds at most ${listLimits[part.list].toLocaleString("en")} entries.`;
  const stored = storedEntry(part.map.get(key));
  if (stored === undefined || !isOrderKey(stored.place)) return `An entry of the list ${part.list} is damaged.`;
  return entryFault(part.kind, part.list, stored.entry);
}

/**
 * Whether a transaction left the page in shape (rule D3): which types stand where, which keys, how large. Looks at what
 * the transaction brought and touched, never at the whole page.
 *
 * Faults of reference (a dangling handle, a cycle, two equal handles) are not this function's business: two good edits
 * can merge into them.
 *
 * @returns the first fault, in a sentence for the person who made the edit; `null` where there is none
 */
export function shapeFault(transaction: Y.Transaction): string | null {
  const { doc } = transaction;
  for (const name of doc.share.keys()) if (!rootNames.has(name)) return "This edit adds a part that pages do not have.";
  const fault = first(newItems(transaction), (item) => itemFault(doc, item));
  if (fault !== null) return fault;
  for (const [type, keys] of transaction.changed) {
    if (type._item?.deleted === true) continue;
    const part = partOf(doc, type);
    // A container inside a block that is gone by now has no part to play, and nobody reads it.
    if (part === null && isGone(doc, type)) continue;
    const found = part === null ? "This edit changes a part that pages do not have." : changedFault(transaction, part, keys);
    if (found !== null) return found;
  }
  return null;
}

function isGone(doc: Y.Doc, type: unknown): boolean {
  let at: unknown = type;
  while (at instanceof Y.AbstractType && at !== blocksOf(doc)) {
    if (at._item === null) return false;
    if (at._item.deleted) return true;
    at = at._item.parent;
  }
  return false;
}
