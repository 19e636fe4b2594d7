import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import { cookieNames } from "@/db/credentials";
import { addInvitation, openInvitations } from "@/db/queries/invitations";
import { groupsOf, membersOf } from "@/db/queries/groups";
import { pagesOf } from "@/db/queries/pages";
import { findUserByEmail } from "@/db/queries/users";
import { someGroup, somebody } from "../../db/world";
import type { TestDatabase } from "../../support/database";
import { browser, nextHeaders, signInAs, useDatabase } from "./world";

class Redirected extends Error {
  constructor(readonly to: string) {
    super(`redirected to ${to}`);
  }
}
const mails: { to: string; text: string }[] = [];
vi.mock("next/headers", () => nextHeaders());
vi.mock("next/cache", () => ({ refresh: () => undefined }));
vi.mock("next/navigation", () => ({
  redirect: (to: string) => {
    throw new Redirected(to);
  },
  unstable_rethrow: (error: unknown) => {
    if (error instanceof Redirected) throw error;
  },
}));
vi.mock("@/app/_server/mail", async (original) => ({
  ...(await original<object>()),
  sendMail: async (mail: { to: string; text: string }) => {
    if (mail.to.startsWith("unreachable")) throw new Error("no such mailbox");
    mails.push(mail);
  },
}));
const people = await import("@/app/_server/actions/people");
const pages = await import("@/app/_server/actions/pages");
const { signUp, signUpInvited } = await import("@/app/_server/actions/signUp");
const account = await import("@/app/_server/actions/account");

let db: TestDatabase;
beforeAll(async () => void (db = await useDatabase()));
beforeEach(() => {
  browser.cookies.clear();
  vi.spyOn(console, "error").mockImplementation(() => undefined);
});
afterAll(() => db.drop());

interface Answer {
  problem?: string;
  done?: string;
  values?: Record<string, string>;
}
type Action = (before: object, form: FormData) => Promise<Answer>;
/** Sends a form; a redirect is told as where it leads. */
async function send(action: Action, fields: Record<string, string>): Promise<Answer & { to?: string }> {
  const form = new FormData();
  for (const [name, value] of Object.entries(fields)) form.set(name, value);
  try {
    return await action({}, form);
  } catch (error) {
    if (error instanceof Redirected) return { to: error.to };
    throw error;
  }
}
const isSignedIn = () => browser.cookies.has(cookieNames(false).session);
const person = { name: "Ada", email: "Ada@Example.org", password: "a long password", group: "Ada's group" };

describe("signing up", () => {
  it("makes an account, a group with oneself as lead, and a session", async () => {
    const { to } = await send(signUp, person);
    const user = await findUserByEmail(db.db, "ada@example.org");
    expect(await groupsOf(db.db, user?.id ?? "")).toMatchObject([{ id: to?.split("/").at(-1), name: "Ada's group", role: "lead" }]);
    expect(isSignedIn()).toBe(true);
  });

  it("refuses an address that has an account, keeps what was typed but the password, and makes no second group", async () => {
    const { problem, values } = await send(signUp, { ...person, email: "ADA@example.org", group: "Another" });
    expect(problem).toMatch(/an account with this e-mail already/);
    expect(values).toEqual({ name: "Ada", email: "ADA@example.org", group: "Another" });
    expect((await db.pool.query("select 1 from groups where name = 'Another'")).rowCount).toBe(0);
    expect(isSignedIn()).toBe(false);
  });

  it.each([
    [{ name: " " }, /called/],
    [{ email: "not an address" }, /no[t]? an e-mail address/],
    [{ password: "short" }, /at least 10 characters/],
    [{ group: "" }, /name/],
    [{ group: "x".repeat(121) }, /120 characters/],
  ])("refuses %j in a sentence", async (wrong, sentence) => {
    expect((await send(signUp, { ...person, email: "other@example.org", ...wrong })).problem).toMatch(sentence);
    expect(await findUserByEmail(db.db, "other@example.org")).toBeNull();
  });
});

describe("inviting", () => {
  it("mails a link that makes an account and joins, once", async () => {
    const { groupId, lead } = await someGroup(db.db);
    await signInAs(db, lead);
    expect((await send(people.invite, { groupId, email: "Guest@Example.org", role: "analyst" })).done).toBe("Invited guest@example.org.");
    const token = /\/invite\/(\S+)/.exec(mails.at(-1)?.text ?? "")?.[1] ?? "";
    browser.cookies.clear();
    expect((await send(signUpInvited, { name: "Guest", password: "a long password", token })).to).toBe(`/groups/${groupId}`);
    expect(await findUserByEmail(db.db, "guest@example.org")).toMatchObject({ name: "Guest", emailVerified: expect.any(Date) });
    expect((await membersOf(db.db, groupId)).find((m) => m.email === "guest@example.org")?.role).toBe("analyst");
    expect((await send(signUpInvited, { name: "Again", password: "a long password", token })).problem).toMatch(/not open any more/);
  });

  it("lets somebody who has an account join with a button", async () => {
    const { groupId, lead } = await someGroup(db.db);
    const { token } = await addInvitation(db.db, { groupId, email: "x@example.org", role: "reader", invitedBy: lead });
    expect((await send(people.accept, { token })).problem).toMatch(/not signed in/);
    const one = await somebody(db.db);
    await signInAs(db, one);
    expect((await send(people.accept, { token })).to).toBe(`/groups/${groupId}`);
    expect((await groupsOf(db.db, one)).map((g) => g.role)).toEqual(["reader"]);
  });

  it("leaves no invitation behind when the mail cannot be sent", async () => {
    const { groupId, lead } = await someGroup(db.db);
    await signInAs(db, lead);
    expect((await send(people.invite, { groupId, email: "unreachable@example.org", role: "reader" })).problem).toBeDefined();
    expect(await openInvitations(db.db, groupId)).toEqual([]);
  });
});

describe("what only a lead may do", () => {
  it("is refused to analysts, readers, strangers and whoever is not signed in, and changes nothing", async () => {
    const { groupId, analyst, reader, lead } = await someGroup(db.db);
    for (const [who, sentence] of [
      [analyst, /Your role in this group is analyst/],
      [reader, /Your role in this group is reader/],
      [await somebody(db.db), /There is no group/],
      [null, /Sign in/],
    ] as const) {
      await signInAs(db, who);
      expect((await send(people.invite, { groupId, email: "y@example.org", role: "lead" })).problem).toMatch(sentence);
      expect((await send(people.changeRole, { groupId, userId: reader, role: "lead" })).problem).toMatch(sentence);
      expect((await send(people.removePerson, { groupId, userId: lead })).problem).toMatch(sentence);
      expect((await send(people.renameGroup, { groupId, name: "Mine now" })).problem).toMatch(sentence);
    }
    expect((await membersOf(db.db, groupId)).map((m) => m.role)).toEqual(["lead", "analyst", "reader"]);
    expect(await openInvitations(db.db, groupId)).toEqual([]);
  });

  it("is told to sockets when it changes somebody's access", async () => {
    const { groupId, lead, reader } = await someGroup(db.db);
    await signInAs(db, lead);
    const listener = await db.pool.connect();
    const heard: string[] = [];
    listener.on("notification", (message) => heard.push(message.payload ?? ""));
    await listener.query("listen access");
    await send(people.changeRole, { groupId, userId: reader, role: "analyst" });
    await send(people.removePerson, { groupId, userId: reader });
    await listener.query("select 1");
    expect(heard.map((payload) => JSON.parse(payload) as unknown)).toEqual([
      { groupId, userId: reader },
      { groupId, userId: reader },
    ]);
    listener.release(true);
  });
});

describe("pages", () => {
  it("are made, copied, archived and taken out by those who edit, and by nobody else", async () => {
    const { groupId, analyst, reader } = await someGroup(db.db);
    await signInAs(db, analyst);
    const { to } = await send(pages.newPage, { groupId, title: "Mine" });
    const pageId = to?.split("/").at(-1) ?? "";
    expect((await send(pages.duplicatePage, { pageId })).done).toBe("Copied.");
    expect((await send(pages.renamePage, { pageId, title: " Ours " })).done).toBe("Renamed.");
    await send(pages.archivePage, { pageId, archived: "yes" });
    expect((await send(pages.renamePage, { pageId, title: "Too late" })).problem).toMatch(/archive/);
    expect((await pagesOf(db.db, groupId)).map((p) => p.title)).toEqual(["A page", "Mine, copy"]);
    // The list and the document agree: a copy takes its title from the document.
    expect((await pagesOf(db.db, groupId, true)).map((p) => p.title)).toEqual(["Ours"]);
    expect((await send(pages.duplicatePage, { pageId })).done).toBe("Copied.");
    expect((await pagesOf(db.db, groupId)).map((p) => p.title)).toContain("Ours, copy");
    await signInAs(db, reader);
    expect((await send(pages.newPage, { groupId })).problem).toMatch(/reader/);
    expect((await send(pages.duplicatePage, { pageId })).problem).toMatch(/reader/);
    expect((await send(pages.renamePage, { pageId, title: "Mine" })).problem).toMatch(/reader/);
    expect((await send(pages.archivePage, { pageId, archived: "no" })).problem).toMatch(/reader/);
    await signInAs(db, analyst);
    await send(pages.archivePage, { pageId, archived: "no" });
    expect((await pagesOf(db.db, groupId)).length).toBe(4);
  });
});

describe("an account", () => {
  it("is signed out everywhere by its owner", async () => {
    const one = await somebody(db.db);
    await signInAs(db, one);
    await signInAs(db, one);
    expect((await send(account.signOutEverywhere, {})).to).toBe("/sign-in?signedOut=everywhere");
    expect((await db.pool.query("select 1 from sessions where user_id = $1", [one])).rowCount).toBe(0);
    expect(isSignedIn()).toBe(false);
  });

  it("is signed out on every other device when its password changes, and the old password is needed", async () => {
    await send(signUp, { ...person, email: "changes@example.org" });
    const user = await findUserByEmail(db.db, "changes@example.org");
    await signInAs(db, user?.id ?? "");
    const sessions = async () => (await db.pool.query("select 1 from sessions where user_id = $1", [user?.id])).rowCount;
    expect(await sessions()).toBe(2);
    expect((await send(account.changePassword, { present: "wrong", password: "another long one" })).problem).toMatch(/not that/);
    expect(await sessions()).toBe(2);
    expect((await send(account.changePassword, { present: person.password, password: "another long one" })).done).toMatch(/Every other device/);
    expect(await sessions()).toBe(1);
  });
});
