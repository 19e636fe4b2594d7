import { describe, expect, it } from "vitest";
import { may, rules, type Objects, type Role, type Subject } from "@/db/access";

const group = "g1";
const objects = {
  group: { kind: "group", id: group },
  page: { kind: "page", id: "p1", groupId: group, archived: false },
  snapshot: { kind: "snapshot", id: "s1", pageId: "p1", groupId: group },
} as const satisfies Objects;

/** The table as product and issue say it, written a second time by hand: lead, analyst, reader, guest, nobody. */
const expected: Record<string, Record<string, string>> = {
  group: { see: "lar--", rename: "l----", invite: "l----", "change role": "l----", "remove person": "l----", "create page": "la---", "add body": "la---" },
  page: {
    read: "larg-",
    "read source": "larg-",
    edit: "la---",
    "upload source": "la---",
    rename: "la---",
    duplicate: "la---",
    archive: "la---",
    remark: "lar--",
    freeze: "l----",
    share: "l----",
  },
  snapshot: { read: "larg-", download: "larg-", share: "l----" },
};
const roles: readonly Role[] = ["lead", "analyst", "reader", "guest", "nobody"];
const kinds = ["group", "page", "snapshot"] as const;

function subject(role: Role, kind: (typeof kinds)[number]): Subject {
  if (role === "nobody") return { role };
  if (role === "guest") return { role, linkId: "l1", opens: { kind: kind === "snapshot" ? "snapshot" : "page", id: objects[kind].id }, until: new Date() };
  return { role, userId: "u1", groupId: group };
}

/** The rules are typed by kind; the tests walk over all of them. */
const asks = (who: Subject, action: string, object: Objects[keyof Objects]) =>
  (may as (s: Subject, a: string, o: Objects[keyof Objects]) => boolean)(who, action, object);

describe("who may do what", () => {
  it("has exactly the actions of the table", () => {
    for (const kind of kinds) expect(Object.keys(rules[kind]).sort()).toEqual(Object.keys(expected[kind] ?? {}).sort());
  });

  for (const kind of kinds) {
    for (const [action, allowed] of Object.entries(expected[kind] ?? {})) {
      for (const [n, role] of roles.entries()) {
        it(`${role} ${allowed[n] === "-" ? "may not" : "may"} ${action} on a ${kind}`, () => {
          expect(asks(subject(role, kind), action, objects[kind])).toBe(allowed[n] !== "-");
        });
      }
    }
  }

  it("gives a member of another group nothing", () => {
    for (const kind of kinds) {
      for (const action of Object.keys(rules[kind]))
        for (const role of ["lead", "analyst", "reader"] as const) expect(asks({ role, userId: "u", groupId: "g2" }, action, objects[kind])).toBe(false);
    }
  });

  it("opens to a guest the one thing the link names and nothing else", () => {
    const guest = (kind: "page" | "snapshot", id: string): Subject => ({ role: "guest", linkId: "l", opens: { kind, id }, until: new Date() });
    expect(may(guest("page", "p1"), "read", objects.page)).toBe(true);
    expect(may(guest("page", "p2"), "read", objects.page)).toBe(false);
    expect(may(guest("page", "p1"), "read", objects.snapshot)).toBe(false);
    expect(may(guest("snapshot", "s1"), "read", objects.page)).toBe(false);
    expect(may(guest("snapshot", "p1"), "read", objects.page)).toBe(false);
  });

  it("lets an archived page be read, copied, shared and taken out of the archive, and nothing more", () => {
    const archived = { ...objects.page, archived: true };
    const lead: Subject = { role: "lead", userId: "u", groupId: group };
    const allowed = Object.keys(rules.page).filter((action) => asks(lead, action, archived));
    expect(allowed.sort()).toEqual(["archive", "duplicate", "read", "read source", "remark", "share"]);
  });

  it("knows no action by an inherited name", () => {
    expect(asks({ role: "lead", userId: "u", groupId: group }, "toString", objects.group)).toBe(false);
    expect(asks({ role: "lead", userId: "u", groupId: group }, "constructor", objects.page)).toBe(false);
  });
});
