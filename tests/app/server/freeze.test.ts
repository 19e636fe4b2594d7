import { unzipSync } from "fflate";
import { createHash } from "node:crypto";
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import * as Y from "yjs";
import type { PageDocument } from "@/cells";
import { addPage } from "@/db/queries/pages";
import { addSource } from "@/db/queries/sources";
import { encodeNewPage } from "@/realtime/document";
import { sha, someGroup } from "../../db/world";
import type { TestDatabase } from "../../support/database";
import { nextHeaders, params, request, signInAs, useDatabase } from "./world";

vi.mock("next/headers", () => nextHeaders());
const { POST } = await import("@/app/api/pages/[pageId]/freeze/route");
const { GET: getZip } = await import("@/app/api/snapshots/[snapshotId]/zip/route");
const { GET: getFile } = await import("@/app/api/snapshots/[snapshotId]/files/[...path]/route");

const csv = "Sample,SiO2 (wt%),1s SiO2,MgO (wt%),1s MgO\nA-1,45.0,0.2,38.1,0.3\nA-2,44.2,0.2,39.0,0.3\nA-3,<0.5,,39.0,0.3\n";
const quantity = (header: string, species: string) => ({ header, name: species, role: "quantity", species, unit: "wt%" }) as const;
const sigma = (header: string, of: string) => ({ header, role: "uncertainty", of, as: "1 sigma" }) as const;
const document = (title = "Frozen"): PageDocument => ({
  format: "cotectic-page/1",
  title,
  blocks: [
    {
      id: "t",
      kind: "data",
      source: { file: "table.csv", sha256: sha(csv) },
      columns: [
        { header: "Sample", role: "sample" },
        quantity("SiO2 (wt%)", "SiO2"),
        sigma("1s SiO2", "SiO2"),
        quantity("MgO (wt%)", "MgO"),
        sigma("1s MgO", "MgO"),
      ],
    },
    { id: "f", kind: "formula", data: "t", text: "mg_si = Mg / Si" },
  ],
});

let db: TestDatabase;
let group: Awaited<ReturnType<typeof someGroup>>;
beforeAll(async () => {
  db = await useDatabase();
  group = await someGroup(db.db);
  await addSource(
    db.db,
    { groupId: group.groupId, sha256: sha(csv), name: "table.csv", mediaType: "text/csv", bytes: new TextEncoder().encode(csv), rows: 3, by: null },
    1e9,
  );
});
beforeEach(() => signInAs(db, group.lead));
afterAll(() => db.drop());

async function page(content: PageDocument): Promise<{ pageId: string; stateVector: string }> {
  const update = encodeNewPage(content);
  const pageId = await addPage(db.db, { groupId: group.groupId, title: content.title, outline: [], by: group.lead, update });
  return { pageId, stateVector: Buffer.from(Y.encodeStateVectorFromUpdate(update)).toString("base64") };
}
interface Frozen {
  snapshotId: string;
  number: number;
  hash: string;
  detail: string;
  fromMemory?: { body: string; species: string }[];
}
async function freeze(of: { pageId: string; stateVector: string }, more: object = {}): Promise<{ status: number } & Frozen> {
  const answer = await POST(request("POST", { stateVector: of.stateVector, ...more }), params({ pageId: of.pageId }));
  return { status: answer.status, ...((await answer.json()) as Frozen) };
}
const zipOf = async (snapshotId: string) => new Uint8Array(await (await getZip(request("GET"), params({ snapshotId }))).arrayBuffer());
const text = (bytes: Uint8Array | undefined) => new TextDecoder().decode(bytes);
const digest = (bytes: Uint8Array | undefined) =>
  createHash("sha256")
    .update(bytes ?? "")
    .digest("hex");

describe("freezing a page", () => {
  it("gives the same hash for the same content, on another page, at another time, under another number", async () => {
    const [one, two] = [await page(document()), await page(document())];
    const frozen = [await freeze(one, { note: "first" }), await freeze(one, { note: "second" }), await freeze(two)];
    expect(frozen.map((f) => f.status)).toEqual([201, 201, 201]);
    expect(frozen.map((f) => f.number)).toEqual([1, 2, 1]);
    expect(new Set(frozen.map((f) => f.hash)).size).toBe(1);
  });

  it("gives another hash for another content", async () => {
    expect((await freeze(await page(document("One")))).hash).not.toBe((await freeze(await page(document("Two")))).hash);
  });

  it("makes a bundle in which every file is what the manifest says, and the manifest is what the hash says", async () => {
    const { snapshotId, hash } = await freeze(await page(document()));
    const unpacked = unzipSync(await zipOf(snapshotId));
    const [folder] = Object.keys(unpacked)[0]?.split("/") ?? [];
    const file = (path: string) => unpacked[`${folder}/${path}`];
    expect(digest(file("manifest.json"))).toBe(hash);
    const manifest = JSON.parse(text(file("manifest.json"))) as { files: { path: string; bytes: number; sha256: string }[] };
    for (const { path, bytes, sha256 } of manifest.files) expect([path, file(path)?.length, digest(file(path))]).toEqual([path, bytes, sha256]);
    const listed = manifest.files.map((f) => f.path);
    expect(listed).toEqual([...listed].sort());
    expect(Object.keys(unpacked).map((path) => path.slice((folder ?? "").length + 1))).toEqual([...listed, "manifest.json", "snapshot.json"].sort());
    expect(listed).toEqual(expect.arrayContaining(["page.json", `sources/${sha(csv)}.csv`, "results/index.json", "bodies.csv", "atomic-weights.csv"]));
    expect(text(file(`sources/${sha(csv)}.csv`))).toBe(csv);
  });

  it("stores results as doubles and states, with no number where there is none", async () => {
    const { snapshotId } = await freeze(await page(document()));
    const unpacked = unzipSync(await zipOf(snapshotId));
    const folder = Object.keys(unpacked)[0]?.split("/")[0] ?? "";
    const index = JSON.parse(text(unpacked[`${folder}/results/index.json`])) as { blocks: { f: { lines: { value: { f64: string; state: string } }[] } } };
    const { f64, state } = index.blocks.f.lines[0]?.value ?? { f64: "", state: "" };
    const bytes = unpacked[`${folder}/${f64}`] ?? new Uint8Array();
    const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
    const values = [0, 8, 16].map((at) => view.getFloat64(at, true));
    // Mg/Si by mass of 38.1 wt% MgO and 45.0 wt% SiO2, with atomic weights Mg 24.305, Si 28.085, O 15.999 (CIAAW 2021).
    expect(values[0]).toBeCloseTo((38.1 * (24.305 / (24.305 + 15.999))) / (45 * (28.085 / (28.085 + 2 * 15.999))), 6);
    expect(Object.is(values[2], 0)).toBe(true);
    expect([...(unpacked[`${folder}/${state}`] ?? [])]).toEqual([0, 0, 1]);
  });

  it("gives the same zip, byte for byte, each time", async () => {
    const { snapshotId } = await freeze(await page(document()));
    expect(digest(await zipOf(snapshotId))).toBe(digest(await zipOf(snapshotId)));
  });

  it("names the hash before, outside the hash", async () => {
    const of = await page(document());
    const [first, second] = [await freeze(of), await freeze(of)];
    const about = async (id: string) =>
      (await getFile(request("GET"), params({ snapshotId: id, path: ["snapshot.json"] }))).json() as Promise<Record<string, unknown>>;
    expect(await about(first.snapshotId)).toMatchObject({ number: 1, previousHash: null, hash: first.hash, frozenBy: group.lead });
    expect(await about(second.snapshotId)).toMatchObject({ number: 2, previousHash: first.hash });
    expect((await getFile(request("GET"), params({ snapshotId: first.snapshotId, path: ["no", "such.file"] }))).status).toBe(404);
  });
});

describe("freezing is refused", () => {
  const snapshots = async () => (await db.pool.query("select 1 from snapshots")).rowCount;

  it("to everybody but a lead", async () => {
    const of = await page(document());
    for (const [who, status] of [
      [group.analyst, 403],
      [group.reader, 403],
      [null, 401],
    ] as const) {
      await signInAs(db, who);
      expect((await freeze(of)).status).toBe(status);
    }
  });

  it("while edits that the person sees have not been committed", async () => {
    const of = await page(document());
    const ahead = new Y.Doc();
    ahead.getMap("blocks").set("x", 1);
    const before = await snapshots();
    expect(await freeze({ ...of, stateVector: Buffer.from(Y.encodeStateVector(ahead)).toString("base64") })).toMatchObject({
      status: 409,
      detail: expect.stringMatching(/Saved/),
    });
    expect(await snapshots()).toBe(before);
  });

  it("while values from memory have not been taken knowingly; then they stand in the snapshot", async () => {
    const content = document();
    const of = await page({ ...content, bodies: { CI: "CI_LPG09" }, blocks: [...content.blocks, { id: "c", kind: "formula", text: "ci = at(Mg / Si, CI)" }] });
    const before = await snapshots();
    const refused = await freeze(of);
    expect(refused).toMatchObject({ status: 409, detail: expect.stringMatching(/from memory/) });
    expect(refused.fromMemory?.map((v) => `${v.body} ${v.species}`)).toEqual(expect.arrayContaining(["CI_LPG09 Mg", "CI_LPG09 Si"]));
    expect(refused.fromMemory?.map((v) => v.species)).not.toContain("Na");
    // A person who can be asked gets the same list as an answer.
    expect(await freeze(of, { asks: true })).toEqual({ status: 200, detail: refused.detail, fromMemory: refused.fromMemory });
    expect(await snapshots()).toBe(before);
    const taken = await freeze(of, { acceptFromMemory: true });
    expect(taken.status).toBe(201);
    const { rows } = await db.pool.query("select about from snapshots where id = $1", [taken.snapshotId]);
    expect(rows[0].about.fromMemory).toEqual(refused.fromMemory);
  });

  it("of a page with nothing on it, with a source that is not there, and with a request that is no request", async () => {
    expect((await freeze(await page({ format: "cotectic-page/1", title: "Empty", blocks: [] }))).detail).toMatch(/no blocks/);
    const missing = await page({
      format: "cotectic-page/1",
      title: "Missing",
      blocks: [{ id: "t", kind: "data", source: { file: "gone.csv", sha256: sha("gone") } }],
    });
    expect(await freeze(missing)).toMatchObject({ status: 422, detail: expect.stringMatching(/gone\.csv/) });
    const of = await page(document());
    expect((await freeze({ ...of, stateVector: "!!" })).status).toBe(400);
    expect((await freeze({ ...of, stateVector: "////" })).status).toBe(400);
    expect((await freeze(of, { unknown: 1 })).status).toBe(400);
  });

  it("of an archived page", async () => {
    const of = await page(document());
    await db.pool.query("update pages set archived_at = now() where id = $1", [of.pageId]);
    expect(await freeze(of)).toMatchObject({ status: 403, detail: expect.stringMatching(/archived/) });
  });
});
