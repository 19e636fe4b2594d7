import * as Y from "yjs";
import { blocksOf, bodiesOf, LOCAL, ownBodiesOf, pageOf } from "./shape";

/**
 * The one undo manager of a page: this person's edits only, those within 500 ms taken together. Editors of shared text
 * add their own origin to it. Undoing the deletion of a block makes new texts, so editors bind by block key.
 */
export function createUndo(doc: Y.Doc): Y.UndoManager {
  return new Y.UndoManager([blocksOf(doc), bodiesOf(doc), ownBodiesOf(doc), pageOf(doc)], { trackedOrigins: new Set([LOCAL]), captureTimeout: 500 });
}
