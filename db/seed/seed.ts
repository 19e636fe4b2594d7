import { eq } from "drizzle-orm";
import { pathToFileURL } from "node:url";
import * as Y from "yjs";
import { createEngine } from "@/cells";
import { encodeNewPage, headingOf } from "@/realtime/document";
import { connect, type Database } from "../client";
import { hashPassword } from "../passwords";
import { addPage } from "../queries/pages";
import { addSource } from "../queries/sources";
import { addUser, findUserByEmail } from "../queries/users";
import { groups, memberships, pages } from "../schema";
import { demoGroup, demoPassword, demoPeople } from "./people";
import { pageIdOf, workedPages, type WorkedPage } from "./workedPage";

/**
 * Writes the demo group: three people, and the worked pages of `examples/` as live pages. What is there already stays as
 * people left it; repeating it changes nothing.
 */
export async function seedDemo(db: Database): Promise<void> {
  const ids: string[] = [];
  const there = await db.select({ id: groups.id }).from(groups).where(eq(groups.id, demoGroup.id));
  for (const { name, email } of demoPeople) {
    const known = await findUserByEmail(db, email);
    const user = known ?? (await addUser(db, { name, email, passwordHash: await hashPassword(demoPassword), emailVerified: new Date() }));
    if (!user) throw new Error(`${email} could not be made`);
    ids.push(user.id);
  }
  if (there.length === 0) {
    await db.transaction(async (tx) => {
      await tx.insert(groups).values({ ...demoGroup, demo: true });
      await tx.insert(memberships).values(demoPeople.map(({ role }, n) => ({ groupId: demoGroup.id, userId: ids[n] ?? "", role })));
    });
  }
  const [lead] = ids;
  if (lead) for (const worked of workedPages()) await seedPage(db, worked, lead);
}

async function seedPage(db: Database, worked: WorkedPage, by: string): Promise<void> {
  const id = pageIdOf(worked.folder);
  if ((await db.select({ id: pages.id }).from(pages).where(eq(pages.id, id))).length > 0) return;
  const engine = createEngine();
  for (const { sha256, name, bytes } of worked.sources) {
    const rows = engine.propose(bytes, name).rows.length;
    await addSource(db, { groupId: demoGroup.id, sha256, name, mediaType: "text/csv", bytes, rows, by }, Number.MAX_SAFE_INTEGER);
  }
  const update = encodeNewPage(worked.page);
  const doc = new Y.Doc();
  Y.applyUpdate(doc, update);
  const { title, outline } = headingOf(doc);
  await addPage(db, { id, groupId: demoGroup.id, title, outline: [...outline], by, update });
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  const url = process.env.DATABASE_URL;
  if (!url) {
    console.error("DATABASE_URL is not set; see .env.example.");
    process.exit(2);
  }
  const connection = connect(url, 2);
  await seedDemo(connection.db);
  await connection.end();
}
