import type { PageDocument } from "@/cells";
import { IndexeddbPersistence } from "y-indexeddb";
import * as Y from "yjs";
import { toPageDocument } from "../document";
import { databaseName, forget, keptPages, setAside, unsentIn, whyAside, type KeptPage } from "./keptPages";

/** Work that was never stored and never will be by itself (rules A6, D5): to download or to discard. */
export interface Draft {
  /** How many edits in it were not stored. */
  readonly edits: number;
  /** Why it was set aside, in a sentence. */
  readonly why: string;
  /** The page as this person had it. */
  readonly document: PageDocument;
  /** Deletes it for good. */
  discard(): Promise<void>;
}

const ROLE = "You made these edits offline, and may only read this page now.";
const EPOCH = "You made these edits before the page was set back to an earlier moment.";

async function readKept(kept: KeptPage): Promise<PageDocument> {
  const doc = new Y.Doc();
  const persistence = new IndexeddbPersistence(databaseName(kept), doc);
  await persistence.whenSynced;
  const document = toPageDocument(doc);
  await persistence.destroy();
  doc.destroy();
  return document;
}

/**
 * Sets aside what this browser keeps of a page and must not merge: of an older epoch, refused, or made by somebody who may
 * only read now. What holds nothing unsent is deleted.
 *
 * @param current the database this stay works in; `null` for somebody who may only read, who keeps nothing
 */
export function setAsideOthers(pageId: string, userId: string, current: KeptPage | null): readonly KeptPage[] {
  const aside: KeptPage[] = [];
  for (const kept of keptPages()) {
    if (kept.pageId !== pageId || kept.userId !== userId || kept.name === current?.name) continue;
    if (whyAside(kept) === null && unsentIn(kept) === 0) {
      void forget(kept);
      continue;
    }
    if (whyAside(kept) === null) setAside(kept, current === null ? ROLE : EPOCH);
    aside.push(kept);
  }
  return aside;
}

/** Reads what was set aside. */
export function readDrafts(aside: readonly KeptPage[]): Promise<readonly Draft[]> {
  return Promise.all(
    aside.map(async (kept) => ({
      edits: unsentIn(kept),
      why: whyAside(kept) ?? ROLE,
      document: await readKept(kept),
      discard: () => forget(kept),
    })),
  );
}
