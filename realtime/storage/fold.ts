import * as Y from "yjs";

/**
 * Base and log rows as one update. The rows are applied to a document one by one; merging a long flat list of updates is
 * superlinear.
 */
export function fold(base: Uint8Array | null, updates: readonly Uint8Array[]): Uint8Array {
  const doc = new Y.Doc();
  if (base !== null) Y.applyUpdate(doc, base);
  doc.transact(() => {
    for (const update of updates) Y.applyUpdate(doc, update);
  });
  const state = Y.encodeStateAsUpdate(doc);
  doc.destroy();
  return state;
}
