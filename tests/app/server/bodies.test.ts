import { unzipSync } from "fflate";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import * as Y from "yjs";
import { createEngine, ownBodyId, pageSchema, type OwnBody } from "@/cells";
import { bodiesOfGroup } from "@/db/queries/bodies";
import { createEdits, readPage, toPageDocument } from "@/realtime/document";
import { someGroup } from "../../db/world";
import type { TestDatabase } from "../../support/database";
import { nextHeaders, params, request, signInAs, useDatabase } from "./world";

vi.mock("next/headers", () => nextHeaders());
vi.mock("next/cache", () => ({ refresh: () => undefined }));
vi.mock("next/navigation", () => ({ unstable_rethrow: () => undefined }));
const { addBody } = await import("@/app/_server/actions/bodies");
const { createPage, loadDocument } = await import("@/app/_server/documents");
const { GET: listBodies } = await import("@/app/api/pages/[pageId]/bodies/route");
const { POST: postFreeze } = await import("@/app/api/pages/[pageId]/freeze/route");
const { GET: getZip } = await import("@/app/api/snapshots/[snapshotId]/zip/route");

let db: TestDatabase;
let ours: Awaited<ReturnType<typeof someGroup>>;
let theirs: Awaited<ReturnType<typeof someGroup>>;
beforeAll(async () => {
  db = await useDatabase();
  ours = await someGroup(db.db);
  theirs = await someGroup(db.db);
});
afterAll(() => db.drop());

const typed = {
  code: "Mantle",
  after: "0",
  name: "a mantle",
  description: "",
  source: "10.1000/xyz",
  unit: "wt%",
  sigma: "1 sigma",
  table: "MgO\t36.48\t0.5\nSiO2\t42.78",
};
async function add(over: Partial<Record<keyof typeof typed | "memory" | "groupId", string>> = {}, who = ours.analyst) {
  await signInAs(db, who);
  const form = new FormData();
  for (const [name, value] of Object.entries({ groupId: ours.groupId, ...typed, ...over })) form.set(name, value);
  return addBody({}, form);
}
const held = () => bodiesOfGroup(db.db, ours.groupId);

describe("a group's own bodies", () => {
  it("are added by an analyst or a lead, with source, who and when", async () => {
    expect(await add()).toEqual({ done: "Added as OWN_Mantle_1." });
    expect(await add({ code: "Crust", description: "upper", table: "SiO2 66.6 ± 1.2" }, ours.lead)).toEqual({ done: "Added as OWN_Crust_1." });
    const [crust, mantle] = await held();
    expect(crust).toMatchObject({
      code: "Crust",
      version: 1,
      madeBy: "Lead",
      body: { description: "upper", values: [{ species: "SiO2", value: 66.6, sigma: 1.2 }] },
    });
    expect(mantle?.body).toStrictEqual({
      name: "a mantle",
      source: "10.1000/xyz",
      fromMemory: false,
      values: [
        { species: "MgO", unit: "wt%", value: 36.48, sigma: 0.5 },
        { species: "SiO2", unit: "wt%", value: 42.78 },
      ],
    });
    expect(Date.now() - (mantle?.madeAt.getTime() ?? 0)).toBeLessThan(120_000);
  });

  it("are refused to readers, to other groups and to who is not signed in; nothing is kept", async () => {
    const before = await held();
    expect((await add({ code: "Other" }, ours.reader)).problem).toMatch(/Your role in this group is reader/);
    expect((await add({ code: "Other" }, theirs.lead)).problem).toMatch(/no group at this address/);
    await signInAs(db, null);
    const form = new FormData();
    for (const [name, value] of Object.entries({ groupId: ours.groupId, ...typed, code: "Other" })) form.set(name, value);
    expect((await addBody({}, form)).problem).toMatch(/Sign in/);
    expect(await held()).toStrictEqual(before);
  });

  it.each([
    ["no source", { source: " " }, /citation or a DOI, or the words "from memory"/],
    ["a source of signs only", { source: "??? -" }, /citation or a DOI/],
    ["no name", { name: " " }, /Say what the body is/],
    ["a short name with blanks", { code: "my mantle" }, /letters, digits and _ only/],
    ["an empty table", { table: "\n" }, /Paste the composition/],
    ["faulty rows, all listed", { table: "Xx\t1\nMgO\t36\nMg\t22" }, /^Row 1, Xx: .*\nRow 3, Mg: Mg is given in row 2 already/],
    ["a unit of something else", { unit: "mol%" }, /Row 1, MgO: "mol%" is no unit of mass per mass/],
  ])("are refused with %s, and what was typed comes back", async (_, over, says) => {
    const before = await held();
    const answer = await add({ code: "Wrong", ...over });
    expect(answer.problem).toMatch(says);
    expect(answer.values?.["table"]).toBe("table" in over ? over.table : typed.table);
    expect(await held()).toStrictEqual(before);
  });

  it("say that they are from memory, by tick or by their source", async () => {
    await add({ code: "Ticked", memory: "on" });
    await add({ code: "Said", source: "From memory" });
    expect((await held()).filter(({ code }) => code === "Ticked" || code === "Said").map(({ body }) => body.fromMemory)).toEqual([true, true]);
  });

  it("get another version by an edit, never another content; two edits at once make one", async () => {
    expect((await add({ table: "MgO\t1" })).problem).toMatch(/short name of a body of this group already/);
    const both = await Promise.all([add({ after: "1", table: "MgO\t38\nSiO2\t45" }), add({ after: "1", table: "MgO\t39\nSiO2\t45" })]);
    expect(both.filter(({ done }) => done === "Added as OWN_Mantle_2.")).toHaveLength(1);
    expect(both.filter(({ problem }) => /Somebody added version 2 of Mantle meanwhile/.test(problem ?? ""))).toHaveLength(1);
    const versions = (await held()).filter(({ code }) => code === "Mantle");
    expect(versions.map(({ version }) => version)).toEqual([2, 1]);
    expect(versions[1]?.body.values[0]?.value).toBe(36.48);
  });

  it("cannot be changed or deleted by the application, nor changed by the owner", async () => {
    await expect(db.pool.query("update group_bodies set name = 'x'")).rejects.toThrow(/permission denied/);
    await expect(db.pool.query("delete from group_bodies")).rejects.toThrow(/permission denied/);
    const { default: pg } = await import("pg");
    const owner = new pg.Client({ connectionString: db.ownerUrl });
    await owner.connect();
    await expect(owner.query("update group_bodies set name = 'x'")).rejects.toThrow(/never changed; add the next one/);
    await owner.end();
  });

  it("are listed for whoever may put them on a page", async () => {
    const list = async (who: string | null) => {
      await signInAs(db, who);
      return listBodies(request("GET"), params({ pageId: ours.pageId }));
    };
    const { bodies } = (await (await list(ours.analyst)).json()) as { bodies: { id: string; body: OwnBody }[] };
    expect(bodies.map(({ id }) => id)).toEqual(["OWN_Crust_1", "OWN_Mantle_2", "OWN_Mantle_1", "OWN_Said_1", "OWN_Ticked_1"]);
    expect([(await list(ours.reader)).status, (await list(theirs.lead)).status, (await list(null)).status]).toEqual([403, 404, 401]);
  });
});

describe("a page that uses a body of the group's own", () => {
  const onPage = async (code: string, version: number) => {
    const found = (await held()).find((each) => each.code === code && each.version === version);
    if (found === undefined) throw new Error("no such body");
    const id = ownBodyId(code, version);
    const pageId = await createPage(ours.groupId, ours.lead, {
      format: "cotectic-page/1",
      title: `With ${id}`,
      bodies: { M: id },
      ownBodies: { [id]: found.body },
      blocks: [{ id: "f", kind: "formula", text: "ratio = at(MgO / SiO2, M)" }],
    });
    return pageId;
  };
  async function freeze(pageId: string, more: object = {}) {
    await signInAs(db, ours.lead);
    const doc = await loadDocument(pageId);
    const stateVector = Buffer.from(Y.encodeStateVector(doc)).toString("base64");
    const answer = await postFreeze(request("POST", { stateVector, ...more }), params({ pageId }));
    return (await answer.json()) as { snapshotId: string; detail: string; fromMemory?: { body: string; species: string; source: string }[] };
  }
  async function frozenPage(snapshotId: string) {
    const files = unzipSync(new Uint8Array(await (await getZip(request("GET"), params({ snapshotId }))).arrayBuffer()));
    const name = Object.keys(files).find((file) => file.endsWith("/page.json")) ?? "";
    return pageSchema.parse(JSON.parse(new TextDecoder().decode(files[name])));
  }
  const ratioOf = (page: Parameters<ReturnType<typeof createEngine>["evaluate"]>[0]) => {
    const f = createEngine().evaluate(page).blocks.get("f");
    return f?.kind === "formula" ? f.lines[0]?.value[0] : undefined;
  };

  it("is frozen with it, and keeps it when the group edits the body", async () => {
    const pageId = await onPage("Mantle", 1);
    const { snapshotId } = await freeze(pageId);
    const before = await frozenPage(snapshotId);
    expect(await add({ after: "2", table: "MgO\t10\nSiO2\t50" })).toEqual({ done: "Added as OWN_Mantle_3." });
    const after = await frozenPage(snapshotId);
    expect(after).toStrictEqual(before);
    // The page stands alone: an engine that knows nothing of the group gives 36.48/42.78 by mass.
    expect(ratioOf(after)).toBeCloseTo(36.48 / 42.78, 12);
    // The live page too stays with the version it chose, until somebody chooses the new one.
    const doc = await loadDocument(pageId);
    expect(ratioOf(toPageDocument(doc))).toBeCloseTo(36.48 / 42.78, 12);
    const third = (await held()).find(({ code, version }) => code === "Mantle" && version === 3);
    createEdits(doc, { id: ours.lead }).setBodies({ M: "OWN_Mantle_3" }, third ? { OWN_Mantle_3: third.body } : {});
    expect(Object.keys(readPage(doc).ownBodies)).toEqual(["OWN_Mantle_3"]);
    expect(ratioOf(toPageDocument(doc))).toBeCloseTo(0.2, 12);
  });

  it("asks a lead before values from memory are frozen, naming the body", async () => {
    const pageId = await onPage("Said", 1);
    const refused = await freeze(pageId);
    expect(refused.detail).toMatch(/from memory/);
    expect(refused.fromMemory).toMatchObject([
      { body: "OWN_Said_1", species: "MgO", source: "From memory" },
      { body: "OWN_Said_1", species: "SiO2" },
    ]);
    expect((await freeze(pageId, { acceptFromMemory: true })).snapshotId).toMatch(/^[0-9a-f-]{36}$/);
  });
});
