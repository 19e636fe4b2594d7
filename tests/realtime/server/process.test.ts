import { spawnSync } from "node:child_process";
import path from "node:path";
import pg from "pg";
import { afterAll, beforeAll, expect, test, vi } from "vitest";
import { ConfigError, readConfig, usualTimes } from "@/realtime/config";
import { startRealtime } from "@/realtime/realtime";
import { ORIGIN, stand, type Stand } from "../support/live";
import { nodeClient } from "../support/nodeClient";
import { serverProcess, type ServerProcess } from "../support/processes";
import { RawSocket } from "../support/rawSocket";

let s: Stand;
let server: ServerProcess;
beforeAll(async () => {
  s = await stand();
  server = await serverProcess(s.database.url);
});
afterAll(async () => {
  await server.kill();
  await s.drop();
});

async function asOwner(text: string): Promise<void> {
  const client = new pg.Client({ connectionString: s.database.ownerUrl });
  await client.connect();
  await client.query(text).finally(() => client.end());
}

test("S6 the server itself folds a page with 500 rows behind it, and what was typed meanwhile is there", async () => {
  const pageId = await s.newPage();
  await s.query(`insert into page_updates (page_id, epoch, user_id, "update") select $1, 1, $2, '\\x0000' from generate_series(1, 499)`, [pageId, s.lead]);
  const one = await RawSocket.synced({ port: server.port, pageId, cookie: await s.cookieOf(s.lead) });
  await one.stored(one.type("remark", " First."));
  for (let n = 0; n < 20; n++) one.type("remark", ".");
  await vi.waitFor(async () => expect(await s.query("select 1 from page_states where page_id = $1", [pageId])).toHaveLength(1), { timeout: 20_000 });
  await one.stored(one.type("remark", " Last."));
  const two = await RawSocket.synced({ port: server.port, pageId, cookie: await s.cookieOf(s.reader) });
  expect(two.textOf("remark")).toBe(`A note. First.${".".repeat(20)} Last.`);
  const [{ count } = { count: "" }] = await s.query<{ count: string }>("select count(*) from page_updates where page_id = $1", [pageId]);
  expect(Number(count)).toBeLessThan(50);
  await Promise.all([one.close(), two.close()]);
});

test("S4 when the database ends every connection, edits arrive after it is back", async () => {
  const pageId = await s.newPage();
  const client = nodeClient({ port: server.port, pageId, cookie: await s.cookieOf(s.lead), user: { id: s.lead, name: "Lead" } });
  await client.until(() => client.save.kind === "saved");
  for (let n = 0; n < 6; n++) {
    client.type("remark", `<${n.toString()}>`);
    await asOwner(`select pg_terminate_backend(pid) from pg_stat_activity where datname = '${s.database.name}' and pid <> pg_backend_pid()`);
  }
  await client.until(() => client.save.kind === "saved", 20_000);
  const two = await RawSocket.synced({ port: server.port, pageId, cookie: await s.cookieOf(s.reader) });
  expect(two.textOf("remark")).toBe("A note.<0><1><2><3><4><5>");
  expect(server.child.exitCode).toBeNull();
  client.close();
  await two.close();
});

test("A3 after its listening connection was lost the server hears of changes again", async () => {
  const cookie = await s.cookieOf(s.analyst);
  const one = await RawSocket.synced({ port: server.port, pageId: s.pageId, cookie });
  await asOwner(`select pg_terminate_backend(pid) from pg_stat_activity where datname = '${s.database.name}' and query ilike 'listen%'`);
  await s.query("update memberships set role = 'reader' where user_id = $1", [s.analyst]);
  // Nobody tells it: it looks again because it may have missed something.
  expect((await one.closed).code).toBe(4405);
  await s.query("update memberships set role = 'analyst' where user_id = $1", [s.analyst]);
});

test("a server that is asked to end stores what is on its way and tells everybody to come back", async () => {
  const ending = await serverProcess(s.database.url);
  const pageId = await s.newPage();
  const one = await RawSocket.synced({ port: ending.port, pageId, cookie: await s.cookieOf(s.lead) });
  one.type("remark", " Last words.");
  const number = one.sent;
  await new Promise((resolve) => setTimeout(resolve, 30));
  expect(await ending.stop()).toBe(0);
  expect((await one.closed).code).toBe(4500);
  expect(one.storedUpTo).toBe(number);
});

test("S3 a database that would call an edit saved before it is on the disk is refused", async () => {
  await asOwner(`alter role cotectic_test in database ${s.database.name} set synchronous_commit = off`);
  const start = startRealtime({ databaseUrl: s.database.url, host: "127.0.0.1", port: 0, origins: [ORIGIN], secure: false, times: usualTimes });
  await expect(start).rejects.toThrow(/synchronous_commit/);
  await asOwner(`alter role cotectic_test in database ${s.database.name} reset synchronous_commit`);
});

test("settings that cannot be are named in a sentence", () => {
  const good = { DATABASE_URL: "postgres://x", APP_ORIGIN: "https://a.example/, http://localhost:3000" };
  expect(readConfig(good)).toMatchObject({ origins: ["https://a.example", "http://localhost:3000"], port: 3001, secure: false });
  expect(readConfig({ ...good, NEXTAUTH_URL: "https://a.example" }).secure).toBe(true);
  for (const [over, sentence] of [
    [{ DATABASE_URL: "" }, /DATABASE_URL is not set/],
    [{ REALTIME_PORT: "abc" }, /which is no port/],
    [{ APP_ORIGIN: "" }, /APP_ORIGIN is not set/],
    [{ APP_ORIGIN: "nonsense" }, /which is no address/],
  ] as const) {
    expect(() => readConfig({ ...good, ...over })).toThrow(sentence);
    expect(() => readConfig({ ...good, ...over })).toThrow(ConfigError);
  }
});

test("a process that cannot start says why and ends with 1", () => {
  const run = spawnSync(process.execPath, ["--import", "tsx", "realtime/server.ts"], {
    cwd: path.resolve(import.meta.dirname, "../../.."),
    env: { PATH: process.env.PATH, DATABASE_URL: s.database.url, APP_ORIGIN: ORIGIN, REALTIME_PORT: server.port.toString() } as unknown as NodeJS.ProcessEnv,
    encoding: "utf8",
    timeout: 60_000,
  });
  expect([run.status, run.stderr]).toStrictEqual([1, expect.stringMatching(/Port \d+ is taken by another program/)]);
});
