import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { checkPassword } from "@/db/passwords";
import { membersOf } from "@/db/queries/groups";
import { pagesOf } from "@/db/queries/pages";
import { findUserByEmail } from "@/db/queries/users";
import { demoGroup, demoPassword, demoPeople } from "@/db/seed/people";
import { seedDemo } from "@/db/seed/seed";
import { workedPages } from "@/db/seed/workedPage";
import { testDatabase, type TestDatabase } from "../support/database";

let db: TestDatabase;
beforeAll(async () => void (db = await testDatabase()));
afterAll(() => db.drop());

const state = async () => {
  const { rows } = await db.pool.query(
    "select (select count(*) from users) as users, (select count(*) from memberships) as memberships, (select count(*) from pages) as pages, (select count(*) from page_updates) as updates, (select count(*) from sources) as sources",
  );
  return rows[0] as Record<string, string>;
};

describe("the demo group", () => {
  it("has a lead, an analyst and a reader who can sign in, and a live page for each worked page", async () => {
    await seedDemo(db.db);
    expect((await membersOf(db.db, demoGroup.id)).map((m) => m.role)).toEqual(["lead", "analyst", "reader"]);
    for (const { email } of demoPeople) expect(await checkPassword((await findUserByEmail(db.db, email))?.passwordHash ?? null, demoPassword)).toBe(true);
    const pages = await pagesOf(db.db, demoGroup.id);
    expect(pages.map((page) => page.title)).toEqual(workedPages().map(({ page }) => page.title));
    expect(pages.map((page) => page.outline.length)).toEqual(workedPages().map(({ page }) => page.blocks.length));
  });

  it("is written once: seeding again changes nothing and brings back nobody", async () => {
    const reader = await findUserByEmail(db.db, demoPeople[2]?.email ?? "");
    await db.pool.query("delete from memberships where user_id = $1", [reader?.id]);
    const before = await state();
    await seedDemo(db.db);
    expect(await state()).toEqual(before);
  });
});
