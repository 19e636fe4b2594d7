import * as Y from "yjs";
import { foreignEntries, recordOf, shapeFault, touchesHeading, type ForeignEntry, type RecordLine } from "../document";

/** What applying one update did to a document. */
export interface Applied {
  /** What is new in it, as one update; `null` where the document had it all. */
  readonly update: Uint8Array | null;
  /** First fault of shape, in a sentence. */
  readonly fault: string | null;
  readonly record: readonly RecordLine[];
  readonly foreign: readonly ForeignEntry[];
  readonly touchesHeading: boolean;
}

/**
 * Applies an update and tells what it did: what was new, whether the page is still in shape (rule D3), which amendments
 * changed and who says to have made them (rule D6). The document is changed in any case; a fault means that it must be
 * loaded anew.
 *
 * @param sender the person whose update it is
 */
export function applyAndWatch(doc: Y.Doc, update: Uint8Array, sender: string): Applied {
  const updates: Uint8Array[] = [];
  const record: RecordLine[] = [];
  const foreign: ForeignEntry[] = [];
  let fault: string | null = null;
  let heading = false;
  const onTransaction = (transaction: Y.Transaction): void => {
    fault ??= shapeFault(transaction);
    if (fault !== null) return;
    record.push(...recordOf(transaction));
    foreign.push(...foreignEntries(transaction, sender));
    heading ||= touchesHeading(transaction);
  };
  const onUpdate = (bytes: Uint8Array): void => void updates.push(bytes);
  doc.on("afterTransaction", onTransaction);
  doc.on("update", onUpdate);
  try {
    Y.applyUpdate(doc, update, sender);
  } catch {
    fault ??= "The server could not apply an edit of this page. Reload the page.";
  } finally {
    doc.off("afterTransaction", onTransaction);
    doc.off("update", onUpdate);
  }
  return { update: updates.length > 1 ? Y.mergeUpdates(updates) : (updates[0] ?? null), fault, record, foreign, touchesHeading: heading };
}
