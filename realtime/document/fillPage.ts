import type { Block, PageDocument } from "@/cells";
import * as Y from "yjs";
import { entryKeyFor, freshKey } from "./entryKeys";
import { firstOrderKeys } from "./orderKeys";
import {
  blocksOf,
  bodiesOf,
  hasText,
  isListOf,
  listsOf,
  ownBodiesOf,
  pageOf,
  plainCopy,
  plainEntry,
  SHAPE_VERSION,
  type BlockMap,
  type ListName,
} from "./shape";

/** A record of anything, for walking over a block's fields by name. */
export const fieldsOf = (block: Block): Readonly<Record<string, unknown>> => ({ ...block });

/** Puts entries into an empty list, in order. */
function fillList(map: Y.Map<unknown>, list: ListName, entries: readonly Readonly<Record<string, unknown>>[]): void {
  const places = firstOrderKeys(entries.length);
  // The map may not be part of a document yet, where it cannot be asked what it holds.
  const taken = new Set<string>();
  entries.forEach((entry, n) => {
    const key = entryKeyFor(list, entry, (k) => taken.has(k));
    taken.add(key);
    map.set(key, { place: places[n] ?? "a0", entry: plainEntry(entry) });
  });
}

/**
 * Makes a live block with all its containers at once (rule D1): two people who each made a missing container would lose
 * one of the two.
 */
export function createBlock(block: Block, place: string): BlockMap {
  const map: BlockMap = new Y.Map();
  const fields = fieldsOf(block);
  const empty: string[] = [];
  for (const [field, value] of Object.entries(fields)) {
    if (value === undefined || isListOf(block.kind, field) || (field === "text" && hasText(block.kind))) continue;
    map.set(field, plainCopy(value));
  }
  map.set("place", place);
  if (hasText(block.kind)) map.set("text", new Y.Text(typeof fields.text === "string" ? fields.text : ""));
  for (const list of listsOf[block.kind]) {
    const container = new Y.Map<unknown>();
    const entries = fields[list];
    if (Array.isArray(entries)) {
      fillList(container, list, entries);
      if (entries.length === 0) empty.push(list);
    }
    map.set(list, container);
  }
  // A list written as `[]` is written back as `[]`.
  if (empty.length > 0) map.set("empty", empty);
  return map;
}

/**
 * Fills a new, empty document with a page (rule D2). Done once, on the server; a browser that believes a page empty never
 * fills it.
 *
 * @throws Error where the document already holds blocks
 */
export function fillPage(doc: Y.Doc, page: PageDocument): void {
  if (blocksOf(doc).size > 0 || pageOf(doc).size > 0) throw new Error("This page is filled already; a page is filled once.");
  const places = firstOrderKeys(page.blocks.length);
  doc.transact(() => {
    pageOf(doc).set("shape", SHAPE_VERSION);
    pageOf(doc).set("title", page.title);
    for (const [alias, body] of Object.entries(page.bodies ?? {})) bodiesOf(doc).set(alias, body);
    for (const [id, body] of Object.entries(page.ownBodies ?? {})) ownBodiesOf(doc).set(id, plainCopy(body));
    const empty = (["bodies", "ownBodies"] as const).filter((field) => page[field] !== undefined && Object.keys(page[field]).length === 0);
    if (empty.length > 0) pageOf(doc).set("empty", empty);
    page.blocks.forEach((block, n) => blocksOf(doc).set(freshKey(), createBlock(block, places[n] ?? "a0")));
  });
}

/** The first update of a new page, as the server stores it. */
export function encodeNewPage(page: PageDocument): Uint8Array {
  const doc = new Y.Doc();
  fillPage(doc, page);
  const update = Y.encodeStateAsUpdate(doc);
  doc.destroy();
  return update;
}
