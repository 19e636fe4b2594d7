import { MOST_OWN_BODIES, ownBodyIdSchema, ownBodySchema, type Block, type OwnBody } from "@/cells";
import * as Y from "yjs";
import { canonical, createEntryEdits, isSame, type EntryEdits } from "./entryEdits";
import { EditError, kindOf, refuse, requireBlock } from "./editing";
import { editText } from "./editText";
import { freshKey } from "./entryKeys";
import { createBlock, fieldsOf } from "./fillPage";
import { placeAt } from "./orderKeys";
import { freeHandle } from "./pageBlock";
import { readPage } from "./readPage";
import { renameColumn, renameHandle } from "./rename";
import {
  attributedLists,
  blocksOf,
  bodiesOf,
  entriesOf,
  fieldFault,
  hasText,
  isListOf,
  listOf,
  listsOf,
  LOCAL,
  MOST_TITLE,
  ownBodiesOf,
  pageOf,
  plainCopy,
  plainEntry,
  type BlockMap,
  type ListName,
} from "./shape";

/** Everything a person can do to a page. Each call is one transaction of the document, and one step of undo. */
export interface PageEdits extends EntryEdits {
  /**
   * Puts a block on the page and returns its key.
   *
   * @param afterKey the block it stands after; `null` for the top of the page
   */
  addBlock(block: Block, afterKey: string | null): string;
  /** Lays a block into the page's bin, from where it comes back whole. */
  binBlock(key: string): void;
  restoreBlock(key: string): void;
  moveBlock(key: string, afterKey: string | null): void;
  setWidth(key: string, width: 4 | 6 | 8 | 12): void;
  setTitle(title: string): void;
  /**
   * Says which compilations the page's names of bodies mean.
   *
   * @param copies own bodies of the group that the page does not carry yet, by id. Those that nothing on the page names any more
   *   are taken off it.
   */
  setBodies(bodies: Readonly<Record<string, string>>, copies?: Readonly<Record<string, OwnBody>>): void;
  /** Sets a field of a block; `undefined` takes it away. A list is brought to the given entries, a text to the given text. */
  setField(key: string, field: string, value: unknown): void;
  /** The shared text of a formula or a note. */
  text(key: string): Y.Text;
  /** Gives a block a new handle and rewrites every use of the old one (rule D4). */
  renameHandle(key: string, handle: string): void;
  /** Gives a column of a table a new name and rewrites every use of the old one. */
  renameColumn(key: string, from: string, to: string): void;
  /** A copy of a block, right behind it, with a handle of its own. Returns the copy's key. */
  duplicateBlock(key: string): string;
}

/**
 * Amendments, set-asides and the like say who made them. Those that stand on this page already stay their author's; whatever
 * else a block brings, from a file or from another page, is this person's word from now on (rule D6).
 */
function attributed(doc: Y.Doc, block: Block, me: string): Block {
  const at = new Date().toISOString();
  const fields: Record<string, unknown> = { ...fieldsOf(block) };
  for (const list of listsOf[block.kind]) {
    const entries = fields[list];
    if (!attributedLists.has(list) || !Array.isArray(entries) || entries.length === 0) continue;
    const here = new Set([...blocksOf(doc).values()].flatMap((other) => (other instanceof Y.Map ? entriesHere(other, list) : [])));
    fields[list] = entries.map((entry: object) => (here.has(canonical(plainEntry(entry))) ? entry : { ...entry, by: me, at }));
  }
  return fields as Block;
}

/** Why an own body cannot be copied onto the page; `null` where it can. */
function copyFault(own: Y.Map<unknown>, id: string, body: OwnBody): string | null {
  const read = ownBodySchema.safeParse(body);
  if (!ownBodyIdSchema.safeParse(id).success || !read.success)
    return `The body ${id} cannot be taken: ${read.error?.issues[0]?.message ?? "its id is damaged"}.`;
  return own.has(id) && !isSame(own.get(id), plainCopy(body)) ? `The body ${id} is on this page already with other values. Nothing was changed.` : null;
}

function entriesHere(block: BlockMap, list: ListName): string[] {
  const map = listOf(block, list);
  return map === undefined ? [] : entriesOf(map).map(({ entry }) => canonical(entry));
}

const contents = ["source", "stack", "join"];

/**
 * The edits of one person to one page.
 *
 * @param me the person; amendments and the like carry this id as their author
 */
export function createEdits(doc: Y.Doc, me: { readonly id: string }): PageEdits {
  const change = <T>(make: () => T): T => doc.transact(make, LOCAL);
  const onPage = () => readPage(doc).blocks;

  const handleTaken = (handle: string): boolean => [...blocksOf(doc).values()].some((b) => b instanceof Y.Map && b.get("id") === handle);

  /** Order key behind a block, with room made where neighbours stand on one key. */
  function placeBehind(afterKey: string | null, moving: string | null): string {
    const others = onPage().filter((b) => b.key !== moving);
    const index = afterKey === null ? 0 : others.findIndex((b) => b.key === afterKey) + 1;
    if (afterKey !== null && index === 0)
      return placeAt(
        others.map((b) => b.order),
        others.length,
      ).place;
    const { place, moved } = placeAt(
      others.map((b) => b.order),
      index,
    );
    for (const { index: n, place: next } of moved) {
      const key = others[n]?.key;
      if (key !== undefined) requireBlock(doc, key).set("place", next);
    }
    return place;
  }

  function put(block: Block, afterKey: string | null): string {
    const key = freshKey();
    const id = freeHandle(block.id, handleTaken);
    for (const [field, value] of Object.entries(fieldsOf(block))) if (value !== undefined) refuse(fieldFault(block.kind, field, value));
    change(() => blocksOf(doc).set(key, createBlock({ ...attributed(doc, block, me.id), id }, placeBehind(afterKey, null))));
    return key;
  }

  function setField(key: string, field: string, value: unknown): void {
    const block = requireBlock(doc, key);
    const kind = kindOf(block);
    if (field === "kind" || field === "place" || field === "binned") throw new EditError(`The field ${field} of a block cannot be set.`);
    if (field === "id") {
      renameHandle(doc, key, String(value));
      return;
    }
    if (value !== undefined) refuse(fieldFault(kind, field, value));
    change(() => {
      if (isListOf(kind, field)) entries.setEntries(key, field, Array.isArray(value) ? value : []);
      else if (field === "text" && hasText(kind)) editText(text(key), typeof value === "string" ? value : "");
      else if (value === undefined) block.delete(field);
      else {
        block.set(field, plainCopy(value));
        // A table has one content: the new one takes the old one's place.
        if (kind === "data" && contents.includes(field)) for (const other of contents) if (other !== field && block.has(other)) block.delete(other);
      }
    });
  }

  function text(key: string): Y.Text {
    const found = requireBlock(doc, key).get("text");
    if (!(found instanceof Y.Text)) throw new EditError("This block has no text of its own.");
    return found;
  }

  const entries = createEntryEdits(doc, me);

  return {
    ...entries,
    addBlock: put,
    binBlock: (key) => {
      const block = requireBlock(doc, key);
      change(() => block.set("binned", { by: me.id, at: new Date().toISOString() }));
    },
    restoreBlock: (key) => {
      const block = requireBlock(doc, key);
      change(() => block.delete("binned"));
    },
    moveBlock: (key, afterKey) => {
      const block = requireBlock(doc, key);
      if (key !== afterKey) change(() => block.set("place", placeBehind(afterKey, key)));
    },
    setWidth: (key, width) => {
      setField(key, "width", width === 12 ? undefined : width);
    },
    setTitle: (title) => {
      if (title.length > MOST_TITLE) throw new EditError(`A title has at most ${MOST_TITLE.toString()} characters; this one has ${title.length.toString()}.`);
      change(() => pageOf(doc).set("title", title));
    },
    setBodies: (bodies, copies = {}) => {
      const map = bodiesOf(doc);
      const own = ownBodiesOf(doc);
      for (const [id, body] of Object.entries(copies)) refuse(copyFault(own, id, body));
      const { blocks, bin } = readPage(doc);
      const said = JSON.stringify([Object.values(bodies), [...blocks, ...bin].map(({ block }) => block)]);
      const kept = new Set([...own.keys(), ...Object.keys(copies)].filter((id) => said.includes(id)));
      if (kept.size > MOST_OWN_BODIES) throw new EditError(`A page carries at most ${MOST_OWN_BODIES.toString()} bodies of the group's own.`);
      change(() => {
        for (const id of [...own.keys()]) if (!kept.has(id)) own.delete(id);
        for (const [id, body] of Object.entries(copies)) if (kept.has(id) && !own.has(id)) own.set(id, plainCopy(body));
        for (const alias of [...map.keys()]) if (!(alias in bodies)) map.delete(alias);
        for (const [alias, body] of Object.entries(bodies)) if (map.get(alias) !== body) map.set(alias, body);
      });
    },
    setField,
    text,
    renameHandle: (key, handle) => {
      renameHandle(doc, key, handle);
    },
    renameColumn: (key, from, to) => {
      renameColumn(doc, key, from, to);
    },
    duplicateBlock: (key) => {
      const original = onPage().find((b) => b.key === key);
      if (original === undefined) throw new EditError("This block is no longer on the page, or cannot be read. Nothing was copied.");
      const { formerly: _, ...copy } = original.block;
      return put(copy as Block, key);
    },
  };
}
