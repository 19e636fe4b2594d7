import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import { encodeNewPage } from "@/realtime/document";
import { addPage } from "@/db/queries/pages";
import { someGroup, someSnapshot } from "../../db/world";
import type { TestDatabase } from "../../support/database";
import { browser, nextHeaders, OURS, params, request, signInAs, useDatabase } from "./world";

vi.mock("next/headers", () => nextHeaders());
const { POST: makeLink, GET: listLinks } = await import("@/app/api/pages/[pageId]/links/route");
const { DELETE: withdraw } = await import("@/app/api/pages/[pageId]/links/[linkId]/route");
const { POST: exchange } = await import("@/app/api/reading/route");
const { GET: ended } = await import("@/app/read/[token]/ended/route");
const { GET: getFile } = await import("@/app/api/snapshots/[snapshotId]/files/[...path]/route");
const { POST: freeze } = await import("@/app/api/pages/[pageId]/freeze/route");

let db: TestDatabase;
let group: Awaited<ReturnType<typeof someGroup>>;
let pageId: string;
let snapshotId: string;
beforeAll(async () => {
  db = await useDatabase();
  group = await someGroup(db.db);
  pageId = await addPage(db.db, {
    groupId: group.groupId,
    title: "Live",
    outline: [],
    by: group.lead,
    update: encodeNewPage({ format: "cotectic-page/1", title: "Live", blocks: [] }),
  });
  snapshotId = (await someSnapshot(db.db, { ...group, pageId })).id;
});
beforeEach(() => signInAs(db, group.lead));
afterAll(() => db.drop());

const make = (body: object, on = pageId) => makeLink(request("POST", body), params({ pageId: on }));
async function link(body: object = { kind: "snapshot", snapshotId, days: 30 }) {
  const made = (await (await make(body)).json()) as { id: string; url: string };
  return { id: made.id, token: made.url.split("/").at(-1) ?? "", url: made.url };
}
function press(token: string) {
  const form = new FormData();
  form.set("token", token);
  return exchange(request("POST", form), params({}));
}
const readSnapshot = async () => (await getFile(request("GET"), params({ snapshotId, path: ["page.json"] }))).status;

describe("a reading link", () => {
  it("is made by a lead and opens the snapshot in a browser without an account", async () => {
    const { token, url } = await link();
    expect(url).toBe(`${OURS}/read/${token}`);
    await signInAs(db, null);
    expect(await readSnapshot()).toBe(401);
    const answer = await press(token);
    expect([answer.status, answer.headers.get("location")]).toEqual([303, `/snapshots/${snapshotId}`]);
    expect(browser.cookies.get("cotectic-reading")).not.toContain(token);
    expect(await readSnapshot()).toBe(200);
  });

  it("lets nothing be changed", async () => {
    const { token } = await link({ kind: "page", days: 1 });
    await signInAs(db, null);
    expect((await press(token)).headers.get("location")).toBe(`/pages/${pageId}`);
    expect((await freeze(request("POST", { stateVector: "AA==" }), params({ pageId }))).status).toBe(403);
    expect((await make({ kind: "page", days: 1 })).status).toBe(403);
    expect((await listLinks(request("GET"), params({ pageId }))).status).toBe(403);
    expect(await readSnapshot()).toBe(401);
  });

  it("is over once withdrawn, in the browser that had opened it too, and says so with 410", async () => {
    const { id, token } = await link();
    await signInAs(db, null);
    await press(token);
    const reading = browser.cookies.get("cotectic-reading") ?? "";
    await signInAs(db, group.lead);
    expect((await withdraw(request("DELETE"), params({ pageId, linkId: id }))).status).toBe(200);
    expect((await withdraw(request("DELETE"), params({ pageId, linkId: id }))).status).toBe(409);
    await signInAs(db, null);
    browser.cookies.set("cotectic-reading", reading);
    expect(await readSnapshot()).toBe(401);
    expect((await press(token)).headers.get("location")).toBe(`/read/${token}/ended`);
    const said = await ended(request("GET"), params({ token }));
    expect([said.status, said.headers.get("referrer-policy")]).toEqual([410, "no-referrer"]);
    expect(await said.text()).toMatch(/was withdrawn/);
  });

  it("is over once it has run out, and says so with 410", async () => {
    const { id, token } = await link();
    await db.pool.query("update reading_links set expires_at = now() - interval '1 minute' where id = $1", [id]);
    await signInAs(db, null);
    expect((await press(token)).headers.get("location")).toBe(`/read/${token}/ended`);
    const said = await ended(request("GET"), params({ token }));
    expect([said.status, await said.text()]).toEqual([410, expect.stringMatching(/has run out/)]);
  });

  it("is told to sockets when it is withdrawn", async () => {
    const { id } = await link();
    const listener = await db.pool.connect();
    const heard = new Promise<string>((resolve) => listener.on("notification", (message) => resolve(message.payload ?? "")));
    await listener.query("listen access");
    await withdraw(request("DELETE"), params({ pageId, linkId: id }));
    expect(JSON.parse(await heard)).toEqual({ linkId: id });
    listener.release(true);
  });

  it("keeps several links open in one browser", async () => {
    const [one, two] = [await link(), await link({ kind: "page", days: 1 })];
    await signInAs(db, null);
    await press(one.token);
    await press(two.token);
    expect(await readSnapshot()).toBe(200);
    expect(browser.cookies.get("cotectic-reading")?.split(".")).toHaveLength(2);
  });
});

describe("making a reading link is refused", () => {
  it.each([
    [{ kind: "snapshot", days: 1 }, 400],
    [{ kind: "page", snapshotId: "00000000-0000-4000-8000-000000000000", days: 1 }, 400],
    [{ kind: "snapshot", snapshotId: "00000000-0000-4000-8000-000000000000", days: 1 }, 404],
    [{ kind: "page", days: 0 }, 400],
    [{ kind: "page", days: 100_000 }, 400],
    [{ kind: "page", days: 1, forEver: true }, 400],
    [{}, 400],
  ])("for %j", async (body, status) => expect((await make(body)).status).toBe(status));

  it("for a snapshot of another page, to an analyst, and from another place", async () => {
    expect((await make({ kind: "snapshot", snapshotId, days: 1 }, group.pageId)).status).toBe(404);
    await signInAs(db, group.analyst);
    expect((await make({ kind: "page", days: 1 })).status).toBe(403);
    await signInAs(db, group.lead);
    expect((await makeLink(request("POST", { kind: "page", days: 1 }, { origin: "http://elsewhere.example" }), params({ pageId }))).status).toBe(403);
  });
});
