"use server";

import { redirect } from "next/navigation";
import { refresh } from "next/cache";
import { z } from "zod";
import { PAGE_FORMAT } from "@/cells";
import { notifyAccess } from "@/db/queries/accessEvents";
import { setArchived } from "@/db/queries/pages";
import { formAction } from "../action";
import { allow } from "../authorise";
import { database } from "../database";
import { createPage, loadPage, retitlePage } from "../documents";
import { idField } from "../fields";
import { Refusal } from "../problem";

const titleField = z.string().trim().max(300, "A title has at most 300 characters");

/** Makes an empty page and opens it. */
export const newPage = formAction(z.object({ groupId: idField, title: titleField.optional() }), async ({ groupId, title }) => {
  const { userId } = await allow("group", groupId, "create page");
  redirect(
    `/pages/${await createPage(groupId, person(userId), { format: PAGE_FORMAT, title: title || "Untitled page", bodies: { CI: "CI_PLJ14", BSE: "BSE_MS95" }, blocks: [] })}`,
  );
});

/** Copies a page, as it is committed at this moment, under a new title. */
export const duplicatePage = formAction(z.object({ pageId: idField }), async ({ pageId }) => {
  const { object, userId } = await allow("page", pageId, "duplicate");
  const { page, reading } = await loadPage(pageId);
  const unreadable = reading.problems.find((problem) => problem.severity === "error");
  if (unreadable) throw new Refusal(422, "Not readable", unreadable.text);
  await createPage(object.groupId, person(userId), { ...page, title: `${page.title}, copy`.slice(0, 300) });
  refresh();
  return { done: "Copied." };
});

/** Gives a page another title from outside it. */
export const renamePage = formAction(z.object({ pageId: idField, title: titleField.min(1, "Give the page a title") }), async ({ pageId, title }) => {
  const { userId } = await allow("page", pageId, "rename");
  await retitlePage(pageId, person(userId), title);
  refresh();
  return { done: "Renamed." };
});

/** Puts a page into the archive, or takes it out. */
export const archivePage = formAction(z.object({ pageId: idField, archived: z.enum(["yes", "no"]) }), async ({ pageId, archived }) => {
  await allow("page", pageId, "archive");
  await setArchived(database(), pageId, archived === "yes");
  await notifyAccess(database(), { pageId });
  refresh();
});

function person(userId: string | null): string {
  if (userId === null) throw new Refusal(403, "Not yours to do", "A guest cannot make pages.");
  return userId;
}
