import "server-only";
import * as Y from "yjs";
import type { PageDocument } from "@/cells";
import { encodeNewPage, headingOf, readPage, toPageDocument } from "@/realtime/document";
import { addPage, committedPage } from "@/db/queries/pages";
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

/** A page's committed document, as the database has it at this moment. @throws Refusal 404 */
export async function loadDocument(pageId: string): Promise<Y.Doc> {
  const committed = await committedPage(database(), pageId);
  if (!committed) throw new Refusal(404, "No such page", "This page does not exist.");
  const doc = new Y.Doc();
  doc.transact(() => {
    for (const update of committed.updates) Y.applyUpdate(doc, update);
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
