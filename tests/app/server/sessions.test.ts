import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { hashingAdapter } from "@/app/_server/auth/adapter";
import { checkPassword, hashPassword } from "@/db/passwords";
import { createSession, endAllSessions, endSession, userBySession } from "@/db/queries/sessions";
import { addUser } from "@/db/queries/users";
import { hashToken } from "@/db/tokens";
import type { TestDatabase } from "../../support/database";
import { ask } from "./nextAuth";
import { useDatabase } from "./world";

let db: TestDatabase;
beforeAll(async () => {
  db = await useDatabase();
  vi.stubEnv("NEXTAUTH_SECRET", "secret of the tests");
});
afterAll(() => db.drop());

let count = 0;
async function account(password = "a good password") {
  const email = `account-${++count}@example.org`;
  const user = await addUser(db.db, { name: "Account", email, passwordHash: await hashPassword(password) });
  return { id: user?.id ?? "", email, password };
}

/** Signs in through next-auth itself, as the form does. */
async function signIn(email: string, password: string, place = "192.0.2.1") {
  const csrf = await ask(["csrf"], "GET", {}, new Map(), place);
  const { csrfToken } = csrf.body as { csrfToken: string };
  const answer = await ask(["callback", "credentials"], "POST", { csrfToken, email, password, json: "true" }, csrf.cookies, place);
  return { token: answer.cookies.get("cotectic-session"), status: answer.status, redirect: (answer.body as { url?: string } | undefined)?.url ?? "" };
}

describe("signing in", () => {
  it("makes a session in the database whose secret stands in the cookie alone", async () => {
    const { id, email, password } = await account();
    const { token } = await signIn(email.toUpperCase(), password);
    expect(token).toMatch(/^[A-Za-z0-9_-]{43}$/);
    expect((await userBySession(db.db, hashToken(token ?? "")))?.id).toBe(id);
    const { rows } = await db.pool.query<{ session_token: string }>("select session_token from sessions where user_id = $1", [id]);
    expect(rows.map((row) => row.session_token)).toEqual([hashToken(token ?? "")]);
  });

  it("refuses a wrong password and an unknown address alike", async () => {
    const { email } = await account();
    const wrong = await signIn(email, "not the password");
    const unknown = await signIn("nobody@example.org", "not the password");
    expect([wrong.token, unknown.token]).toEqual([undefined, undefined]);
    expect(wrong.redirect).toBe(unknown.redirect);
    expect(wrong.status).toBe(401);
  });

  it("refuses after ten wrong passwords, the right one too, and says for how long", async () => {
    const { email, password } = await account();
    for (let n = 0; n < 10; n++) await signIn(email, "not the password", `198.51.100.${n}`);
    const { token, redirect } = await signIn(email, password, "198.51.100.99");
    expect(token).toBeUndefined();
    expect(decodeURIComponent(redirect)).toMatch(/tried too often\. Wait 1\d minutes/);
  });

  it("forgets wrong passwords after a right one", async () => {
    const { email, password } = await account();
    for (let n = 0; n < 9; n++) await signIn(email, "not the password", "203.0.113.1");
    expect((await signIn(email, password, "203.0.113.2")).token).toBeDefined();
    await signIn(email, "not the password", "203.0.113.3");
    expect((await signIn(email, password, "203.0.113.2")).token).toBeDefined();
  });
});

describe("a session", () => {
  it("ends at once when it is revoked, alone or with all others", async () => {
    const { id } = await account();
    const [one, two, three] = [await createSession(db.db, id), await createSession(db.db, id), await createSession(db.db, id)];
    await endSession(db.db, hashToken(one.token));
    expect(await userBySession(db.db, hashToken(one.token))).toBeNull();
    expect((await userBySession(db.db, hashToken(two.token)))?.id).toBe(id);
    expect(await endAllSessions(db.db, id)).toBe(2);
    for (const { token } of [two, three]) expect(await userBySession(db.db, hashToken(token))).toBeNull();
  });

  it("runs out", async () => {
    const { id } = await account();
    const { token } = await createSession(db.db, id);
    await db.pool.query("update sessions set expires = now() - interval '1 second' where user_id = $1", [id]);
    expect(await userBySession(db.db, hashToken(token))).toBeNull();
  });

  it("is not opened by what the database stores", async () => {
    const { id } = await account();
    const { token } = await createSession(db.db, id);
    expect(await userBySession(db.db, hashToken(hashToken(token)))).toBeNull();
    expect(await hashingAdapter(db.db).getSessionAndUser?.(hashToken(token))).toBeNull();
    expect((await hashingAdapter(db.db).getSessionAndUser?.(token))?.session.sessionToken).toBe(token);
  });

  it("is made, prolonged and ended by the adapter without its secret being stored", async () => {
    const { id } = await account();
    const adapter = hashingAdapter(db.db);
    const expires = new Date(Date.now() + 60_000);
    await adapter.createSession?.({ sessionToken: "a-secret-of-the-provider", userId: id, expires });
    const later = new Date(Date.now() + 120_000);
    await adapter.updateSession?.({ sessionToken: "a-secret-of-the-provider", expires: later });
    expect((await adapter.getSessionAndUser?.("a-secret-of-the-provider"))?.session.expires).toEqual(later);
    expect((await db.pool.query("select 1 from sessions where session_token = 'a-secret-of-the-provider'")).rowCount).toBe(0);
    await adapter.deleteSession?.("a-secret-of-the-provider");
    expect(await adapter.getSessionAndUser?.("a-secret-of-the-provider")).toBeNull();
  });
});

describe("a password", () => {
  it("is hashed with argon2id, 19 MiB and two passes", async () => {
    const stored = await hashPassword("a good password");
    expect(stored).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
    expect(await checkPassword(stored, "a good password")).toBe(true);
    expect(await checkPassword(stored, "a good passwore")).toBe(false);
    expect(await checkPassword(null, "nobody has this password")).toBe(false);
  });
  it("is the same however its letters are composed", async () => {
    expect(await checkPassword(await hashPassword("pa\u00dfwo\u0308rter"), "pa\u00dfw\u00f6rter")).toBe(true);
  });
});
