import { addGroup } from "@/db/queries/groups";
import { addPage } from "@/db/queries/pages";
import { addSnapshot, type NewSnapshot } from "@/db/queries/snapshots";
import { addUser } from "@/db/queries/users";
import { memberships } from "@/db/schema";
import { createHash } from "node:crypto";
import type { Database } from "@/db/client";
import type { GroupRole } from "@/db/access";

let count = 0;

/** A person with an address of their own. */
export async function somebody(db: Database, name = "Somebody"): Promise<string> {
  const user = await addUser(db, { name, email: `person-${++count}@example.org`, passwordHash: "none" });
  if (!user) throw new Error("no user was made");
  return user.id;
}

/** A group with one lead, one analyst and one reader, and one page. */
export async function someGroup(db: Database) {
  const [lead, analyst, reader] = [await somebody(db, "Lead"), await somebody(db, "Analyst"), await somebody(db, "Reader")];
  const groupId = await addGroup(db, "A group", lead);
  await join(db, groupId, analyst, "analyst");
  await join(db, groupId, reader, "reader");
  const pageId = await addPage(db, { groupId, title: "A page", outline: [], by: lead, update: new Uint8Array([0, 0]) });
  return { groupId, pageId, lead, analyst, reader };
}

export async function join(db: Database, groupId: string, userId: string, role: GroupRole): Promise<void> {
  await db.insert(memberships).values({ groupId, userId, role });
}

export const sha = (text: string) => createHash("sha256").update(text).digest("hex");

/** A snapshot with two small files. */
export async function someSnapshot(db: Database, page: { pageId: string; groupId: string; lead: string }, over: Partial<NewSnapshot> = {}) {
  const file = (path: string, text: string) => ({ path, sha256: sha(text), bytes: new TextEncoder().encode(text) });
  return addSnapshot(db, {
    pageId: page.pageId,
    groupId: page.groupId,
    title: "A page",
    hash: sha(`hash ${++count}`),
    format: "test/1",
    engine: "0",
    frozenBy: page.lead,
    note: null,
    about: {},
    files: [file("manifest.json", "{}"), file("page.json", "[]")],
    ...over,
  });
}
