import * as Y from "yjs";
import { blocksOf, bodiesOf, isBlockKind, isListOf, ownBodiesOf, pageOf, type BlockKind, type BlockMap, type EntryMap, type ListName } from "./shape";

/** What a shared type is on the page, by where it stands. */
export type Part =
  | { readonly is: "page"; readonly map: Y.Map<unknown> }
  | { readonly is: "bodies"; readonly map: Y.Map<unknown> }
  | { readonly is: "ownBodies"; readonly map: Y.Map<unknown> }
  | { readonly is: "blocks"; readonly map: Y.Map<BlockMap> }
  | { readonly is: "block"; readonly key: string; readonly map: BlockMap }
  | { readonly is: "list"; readonly key: string; readonly kind: BlockKind; readonly list: ListName; readonly map: EntryMap }
  | { readonly is: "text"; readonly key: string; readonly text: Y.Text };

/** The part a shared type plays; `null` for one that has no place on a page. */
export function partOf(doc: Y.Doc, type: unknown): Part | null {
  if (type === pageOf(doc)) return { is: "page", map: pageOf(doc) };
  if (type === bodiesOf(doc)) return { is: "bodies", map: bodiesOf(doc) };
  if (type === ownBodiesOf(doc)) return { is: "ownBodies", map: ownBodiesOf(doc) };
  if (type === blocksOf(doc)) return { is: "blocks", map: blocksOf(doc) };
  if (!(type instanceof Y.AbstractType)) return null;
  const item = type._item;
  if (item === null || item.parentSub === null) return null;
  if (item.parent === blocksOf(doc)) return type instanceof Y.Map ? { is: "block", key: item.parentSub, map: type } : null;
  const parent = item.parent;
  if (!(parent instanceof Y.Map) || parent._item?.parent !== blocksOf(doc) || parent._item.parentSub === null) return null;
  const kind: unknown = parent.get("kind");
  if (!isBlockKind(kind)) return null;
  const key = parent._item.parentSub;
  if (item.parentSub === "text") return type instanceof Y.Text ? { is: "text", key, text: type } : null;
  return isListOf(kind, item.parentSub) && type instanceof Y.Map ? { is: "list", key, kind, list: item.parentSub, map: type } : null;
}

/** Items that a transaction brought, whether they won their place or not. */
export function* newItems(transaction: Y.Transaction): Generator<Y.Item> {
  for (const [client, after] of transaction.afterState) {
    const before = transaction.beforeState.get(client) ?? 0;
    if (after === before) continue;
    const structs = transaction.doc.store.clients.get(client) ?? [];
    for (let n = structs.length - 1; n >= 0; n--) {
      const struct = structs[n];
      if (struct === undefined || struct.id.clock + struct.length <= before) break;
      if (struct instanceof Y.Item) yield struct;
    }
  }
}

/** The item that stood at a key before the transaction; `null` where none did. */
export function standingBefore(transaction: Y.Transaction, map: Y.Map<unknown>, key: string): Y.Item | null {
  let item = map._map.get(key) ?? null;
  while (item !== null && isNew(transaction, item)) item = item.left;
  if (item === null) return null;
  // Deleted before the transaction: its content was collected, or the delete set does not name it.
  return item.deleted && !Y.isDeleted(transaction.deleteSet, item.id) ? null : item;
}

/** True for something this transaction brought. */
export const isNew = (transaction: Y.Transaction, item: Y.Item): boolean => item.id.clock >= (transaction.beforeState.get(item.id.client) ?? 0);
