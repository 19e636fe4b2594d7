import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { changeRole, groupsOf, membersOf, removeMember } from "@/db/queries/groups";
import { acceptInvitation, addInvitation, findInvitation, openInvitations, withdrawInvitation } from "@/db/queries/invitations";
import { addUser } from "@/db/queries/users";
import { testDatabase, type TestDatabase } from "../support/database";
import { somebody, someGroup } from "./world";

let db: TestDatabase;
beforeAll(async () => void (db = await testDatabase()));
afterAll(() => db.drop());

describe("a group", () => {
  it("always keeps a lead", async () => {
    const { groupId, lead, analyst } = await someGroup(db.db);
    expect(await changeRole(db.db, groupId, lead, "reader")).toBe("last lead");
    expect(await removeMember(db.db, groupId, lead)).toBe("last lead");
    expect(await changeRole(db.db, groupId, analyst, "lead")).toBe("changed");
    expect(await removeMember(db.db, groupId, lead)).toBe("changed");
    expect(await removeMember(db.db, groupId, lead)).toBe("not in the group");
    expect((await membersOf(db.db, groupId)).map((m) => m.role)).toEqual(["lead", "reader"]);
  });

  it("keeps a lead when two leads demote each other at once", async () => {
    const { groupId, lead, analyst } = await someGroup(db.db);
    await changeRole(db.db, groupId, analyst, "lead");
    const both = await Promise.all([changeRole(db.db, groupId, lead, "reader"), changeRole(db.db, groupId, analyst, "reader")]);
    expect(both.sort()).toEqual(["changed", "last lead"]);
  });
});

describe("an address", () => {
  it("has one account, whatever its capitals", async () => {
    expect(await addUser(db.db, { name: "A", email: "Twice@Example.org", passwordHash: "x" })).not.toBeNull();
    expect(await addUser(db.db, { name: "B", email: "twice@example.ORG", passwordHash: "y" })).toBeNull();
  });
});

describe("an invitation", () => {
  const invited = async () => {
    const { groupId, lead } = await someGroup(db.db);
    return { groupId, lead, ...(await addInvitation(db.db, { groupId, email: "New@Example.org", role: "reader", invitedBy: lead })) };
  };

  it("makes one person a member, once", async () => {
    const { id, token, groupId } = await invited();
    expect(await findInvitation(db.db, token)).toMatchObject({ state: "open", email: "new@example.org", role: "reader" });
    const [one, two] = [await somebody(db.db), await somebody(db.db)];
    const accepted = await Promise.all([acceptInvitation(db.db, id, one), acceptInvitation(db.db, id, two)]);
    expect(accepted.sort()).toEqual([false, true]);
    expect((await membersOf(db.db, groupId)).length).toBe(4);
    expect((await findInvitation(db.db, token))?.state).toBe("accepted");
    expect(await openInvitations(db.db, groupId)).toEqual([]);
  });

  it("stays as unknown as its secret", async () => {
    const { token } = await invited();
    expect(await findInvitation(db.db, `${token}x`)).toBeNull();
    expect((await db.pool.query("select 1 from invitations where token_hash = $1", [token])).rowCount).toBe(0);
  });

  it("can be withdrawn, and is replaced by a newer one to the same address", async () => {
    const { groupId, lead, id, token } = await invited();
    const newer = await addInvitation(db.db, { groupId, email: "new@example.org", role: "analyst", invitedBy: lead });
    expect((await findInvitation(db.db, token))?.state).toBe("withdrawn");
    expect(await withdrawInvitation(db.db, groupId, id)).toBe(false);
    expect(await withdrawInvitation(db.db, groupId, newer.id)).toBe(true);
    expect(await acceptInvitation(db.db, newer.id, await somebody(db.db))).toBe(false);
  });

  it("runs out", async () => {
    const { id, token } = await invited();
    await db.pool.query("update invitations set expires_at = now() - interval '1 second' where id = $1", [id]);
    expect((await findInvitation(db.db, token))?.state).toBe("expired");
    const person = await somebody(db.db);
    expect(await acceptInvitation(db.db, id, person)).toBe(false);
    expect(await groupsOf(db.db, person)).toEqual([]);
  });

  it("does not change the role of somebody who is in the group already", async () => {
    const { groupId, lead, id } = await invited();
    expect(await acceptInvitation(db.db, id, lead)).toBe(true);
    expect((await membersOf(db.db, groupId)).find((m) => m.userId === lead)?.role).toBe("lead");
  });
});
