import "server-only";
import * as Y from "yjs";
import type { PageDocument } from "@/cells";
import { createEdits, encodeNewPage, headingOf, readPage, toPageDocument } from "@/realtime/document";
import { PAGES_CHANNEL, type PageNotice } from "@/realtime/pageNotices";
import { sql } from "drizzle-orm";
import { addEdit, addPage, committedPage, type CommittedPage } from "@/db/queries/pages";
import { database } from "./database";
import { Refusal } from "./problem";

/** Makes a page of a page document, filled once, here. */
export async function createPage(groupId: string, by: string, page: PageDocument): Promise<string> {
  const update = encodeNewPage(page);
  const doc = new Y.Doc();
  Y.applyUpdate(doc, update);
  const { outline } = headingOf(doc);
  doc.destroy();
  return addPage(database(), { groupId, by, title: page.title, outline: [...outline], update });
}

/** Gives a page another title, as an edit of its document: whoever has the page open sees it change. @throws Refusal 404, 409 */
export async function retitlePage(pageId: string, by: string, title: string): Promise<void> {
  const committed = await requirePage(pageId);
  const doc = documentOf(committed);
  const before = Y.encodeStateVector(doc);
  createEdits(doc, { id: by }).setTitle(title);
  const update = Y.encodeStateAsUpdate(doc, before);
  const { clientID: clientId } = doc;
  doc.destroy();
  const seq = await addEdit(database(), { pageId, epoch: committed.epoch, by, title, clientId, update });
  if (seq === null) throw new Refusal(409, "Changed meanwhile", "This page was archived or set back a moment ago. Reload and look at it again.");
  const notice: PageNotice = { pageId, kind: "edits", seqs: [String(seq)] };
  await database().execute(sql`select pg_notify(${PAGES_CHANNEL}, ${JSON.stringify(notice)})`);
}

/** A page's committed document, as the database has it at this moment. @throws Refusal 404 */
export async function loadDocument(pageId: string): Promise<Y.Doc> {
  return documentOf(await requirePage(pageId));
}

async function requirePage(pageId: string): Promise<CommittedPage> {
  const committed = await committedPage(database(), pageId);
  if (!committed) throw new Refusal(404, "No such page", "This page does not exist.");
  return committed;
}

function documentOf({ updates }: CommittedPage): Y.Doc {
  const doc = new Y.Doc();
  doc.transact(() => {
    for (const update of updates) Y.applyUpdate(doc, update);
  });
  return doc;
}

/** The page document of a page as committed, with the problems its blocks have. */
export async function loadPage(pageId: string) {
  const doc = await loadDocument(pageId);
  const reading = readPage(doc);
  const page = toPageDocument(doc);
  doc.destroy();
  return { page, reading };
}
