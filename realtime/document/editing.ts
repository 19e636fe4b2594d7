import * as Y from "yjs";
import { blocksOf, isBlockKind, type BlockKind, type BlockMap } from "./shape";

/** Thrown where an edit cannot be made; the sentence is for the person. Nothing was changed. */
export class EditError extends Error {
  override readonly name = "EditError";
}

/** The block of that key. @throws EditError where it is not on the page */
export function requireBlock(doc: Y.Doc, key: string): BlockMap {
  const block = blocksOf(doc).get(key);
  if (!(block instanceof Y.Map)) throw new EditError("This block is no longer on the page: somebody removed it. Nothing was changed.");
  return block;
}

/** The kind of a live block. @throws EditError for one this version does not know */
export function kindOf(block: BlockMap): BlockKind {
  const kind = block.get("kind");
  if (!isBlockKind(kind)) throw new EditError("This block is of a kind that this version does not know. Reload the page to get the present version.");
  return kind;
}

/** @throws EditError with the fault, where there is one */
export function refuse(fault: string | null): void {
  if (fault !== null) throw new EditError(fault);
}
