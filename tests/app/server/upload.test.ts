import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import type { TestDatabase } from "../../support/database";
import { someGroup, somebody, sha } from "../../db/world";
import { nextHeaders, params, request, signInAs, useDatabase } from "./world";

vi.mock("next/headers", () => nextHeaders());
const { POST } = await import("@/app/api/pages/[pageId]/sources/route");
const { GET } = await import("@/app/api/pages/[pageId]/sources/[sha256]/route");

let db: TestDatabase;
let page: Awaited<ReturnType<typeof someGroup>>;
beforeAll(async () => {
  db = await useDatabase();
  page = await someGroup(db.db);
});
beforeEach(() => signInAs(db, page.analyst));
afterAll(() => db.drop());

const upload = (body: BodyInit, name = "table.csv") =>
  POST(request("POST", body, { "x-file-name": encodeURIComponent(name) }), params({ pageId: page.pageId }));
const said = async (answer: Response) => `${answer.status} ${((await answer.json()) as { detail: string }).detail}`;
const sources = async () => (await db.pool.query("select 1 from sources")).rowCount;

describe("a table that is uploaded", () => {
  const text = "Sample,SiO2 (wt%),MgO (wt%)\nA-1,45.0,38.1\nA-2,44.2,39.0\n";

  it("is kept byte for byte under its hash, once, and given back to those who may read the page", async () => {
    const answer = await upload(text, "Probe Übersicht.csv");
    expect(answer.status).toBe(201);
    expect(await answer.json()).toEqual({ sha256: sha(text), name: "Probe Übersicht.csv", size: text.length, rows: 2 });
    expect((await upload(text, "again.csv")).status).toBe(201);
    expect(await sources()).toBe(1);
    await signInAs(db, page.reader);
    const got = await GET(request("GET"), params({ pageId: page.pageId, sha256: sha(text) }));
    expect(await got.text()).toBe(text);
    expect(got.headers.get("content-disposition")).toMatch(/^attachment/);
    expect(got.headers.get("cache-control")).toMatch(/private.*immutable/);
  });

  it("keeps only the last part of a path for a name", async () => {
    expect(await (await upload("Sample,MgO\nx,1\n", "C:\\data\\../x.csv")).json()).toMatchObject({ name: "x.csv" });
  });
});

describe("what is no table is refused, and nothing is kept", () => {
  const cases: readonly [what: string, body: () => BodyInit, answer: RegExp][] = [
    ["an empty file", () => "", /^422 .*empty/],
    ["white space", () => "  \n \n", /^422 ./],
    ["headers without rows", () => "Sample,SiO2,MgO\n", /^422 .*(rows|samples)/],
    ["a picture", () => new Uint8Array([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13, 0, 255, 254, 1]), /^422 ./],
    ["zeros", () => new Uint8Array(4096), /^422 ./],
    ["more than 50 MiB", () => new Uint8Array(50 * 1024 * 1024 + 1), /^413 .*50 MiB/],
  ];
  it.each(cases)("%s", async (_what, body, answer) => {
    const before = await sources();
    expect(await said(await upload(body()))).toMatch(answer);
    expect(await sources()).toBe(before);
  });

  it("a body that never ends, without a declared length", async () => {
    let sent = 0;
    const endless = new ReadableStream<Uint8Array>({
      pull: (controller) => {
        sent++;
        controller.enqueue(new Uint8Array(1024 * 1024));
      },
    });
    const asked = new Request("http://test.example/x", {
      method: "POST",
      body: endless,
      duplex: "half",
      headers: { origin: "http://test.example", "x-file-name": "endless.csv" },
    } as RequestInit);
    expect(await said(await POST(asked, params({ pageId: page.pageId })))).toMatch(/^413/);
    expect(sent).toBeLessThan(60);
  });

  it("an upload without a name", async () => {
    expect(await said(await POST(request("POST", "a,b\n1,2\n"), params({ pageId: page.pageId })))).toMatch(/^400 .*x-file-name/);
  });

  it("a group that is full", async () => {
    const other = await someGroup(db.db);
    await db.pool.query("insert into contents (sha256, size, bytes) values ($1, 1, 'q') on conflict do nothing", [sha("q")]);
    await db.pool.query("insert into sources (group_id, sha256, name, media_type, size) values ($1, $2, 'big', 'text/csv', 2147483640)", [
      other.groupId,
      sha("q"),
    ]);
    await signInAs(db, other.lead);
    const answer = await POST(request("POST", "Sample,MgO\nfull,1\n", { "x-file-name": "full.csv" }), params({ pageId: other.pageId }));
    expect(await said(answer)).toMatch(/^413 .*2048 MiB/);
  });
});

describe("who may upload and download", () => {
  it("is no reader, no stranger, nobody signed out, and no page of another origin", async () => {
    await signInAs(db, page.reader);
    expect(await said(await upload("Sample,MgO\na,1\n"))).toMatch(/^403 .*reader/);
    await signInAs(db, await somebody(db.db));
    expect(await said(await upload("Sample,MgO\na,1\n"))).toMatch(/^404 /);
    await signInAs(db, null);
    expect(await said(await upload("Sample,MgO\na,1\n"))).toMatch(/^401 /);
    await signInAs(db, page.lead);
    const foreign = request("POST", "a,b\n1,2\n", { origin: "http://elsewhere.example", "x-file-name": "t.csv" });
    expect(await said(await POST(foreign, params({ pageId: page.pageId })))).toMatch(/^403 .*elsewhere/);
  });

  it("gives the sources of one group to no other", async () => {
    const text = "Sample,MgO\nsecret,1\n";
    await upload(text);
    const other = await someGroup(db.db);
    await signInAs(db, other.lead);
    expect((await GET(request("GET"), params({ pageId: other.pageId, sha256: sha(text) }))).status).toBe(404);
    expect((await GET(request("GET"), params({ pageId: page.pageId, sha256: sha(text) }))).status).toBe(404);
  });
});
