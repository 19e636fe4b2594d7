import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { addUser } from "@/db/queries/users";
import { userBySession } from "@/db/queries/sessions";
import { hashToken } from "@/db/tokens";
import type { TestDatabase } from "../../support/database";
import { startIssuer } from "./issuer";
import { ask } from "./nextAuth";
import { useDatabase } from "./world";

let db: TestDatabase;
let issuer: Awaited<ReturnType<typeof startIssuer>>;
beforeAll(async () => {
  db = await useDatabase();
  issuer = await startIssuer({ sub: "0000-0002-1825-0097", given_name: "Josiah", family_name: "Carberry" });
  vi.stubEnv("NEXTAUTH_SECRET", "secret of the tests");
  vi.stubEnv("ORCID_CLIENT_ID", "client");
  vi.stubEnv("ORCID_CLIENT_SECRET", "client secret");
  vi.stubEnv("ORCID_ISSUER", issuer.url);
});
afterAll(async () => {
  issuer.stop();
  await db.drop();
});

/** Through the issuer and back, as a browser goes; `change` may tamper on the way. */
async function throughIssuer(change: (query: Record<string, string>, cookies: Map<string, string>) => void = () => undefined) {
  const csrf = await ask(["csrf"], "GET", {}, new Map(), "192.0.2.9");
  const { csrfToken } = csrf.body as { csrfToken: string };
  const leaving = await ask(["signin", "orcid"], "POST", { csrfToken, json: "true" }, csrf.cookies, "192.0.2.9");
  const asked = new URL((leaving.body as { url: string }).url).searchParams;
  const query = { code: issuer.agree(asked), state: asked.get("state") ?? "" };
  const cookies = new Map([...csrf.cookies, ...leaving.cookies]);
  change(query, cookies);
  return { asked, answer: await ask(["callback", "orcid"], "GET", {}, cookies, "192.0.2.9", query) };
}
const sessionOf = (cookies: Map<string, string>) => userBySession(db.db, hashToken(cookies.get("cotectic-session") ?? ""));

describe("signing in with an ORCID iD", () => {
  it("makes an account without an e-mail and a session that is stored as its hash", async () => {
    const { asked, answer } = await throughIssuer();
    expect([asked.get("code_challenge_method"), asked.get("scope")]).toEqual(["S256", "openid"]);
    expect(asked.get("nonce")).toBeTruthy();
    expect(await sessionOf(answer.cookies)).toMatchObject({ name: "Josiah Carberry", email: null });
    expect((await db.pool.query("select 1 from sessions where session_token = $1", [answer.cookies.get("cotectic-session")])).rowCount).toBe(0);
  });

  it("finds the same account the next time, and joins no account by a name or an address", async () => {
    await addUser(db.db, { name: "Josiah Carberry", email: "josiah@example.org", passwordHash: "x" });
    const ids = [await sessionOf((await throughIssuer()).answer.cookies), await sessionOf((await throughIssuer()).answer.cookies)].map((user) => user?.id);
    expect(ids[0]).toBe(ids[1]);
    expect((await db.pool.query("select count(*)::int as n from users")).rows[0].n).toBe(2);
  });

  it("refuses an answer whose state, nonce or verifier is not the one this browser was given", async () => {
    vi.spyOn(console, "error").mockImplementation(() => undefined);
    const without = (name: string) => (_query: Record<string, string>, cookies: Map<string, string>) => void cookies.delete(name);
    for (const tamper of [
      (query: Record<string, string>) => void (query.state = "another"),
      without("next-auth.state"),
      without("next-auth.nonce"),
      without("next-auth.pkce.code_verifier"),
    ]) {
      const { answer } = await throughIssuer(tamper);
      expect(answer.cookies.get("cotectic-session")).toBeUndefined();
      expect(answer.location).toMatch(/\/error\?error=OAuthCallback$/);
    }
  });
});
