import { execFile } from "node:child_process";
import { randomBytes } from "node:crypto";
import path from "node:path";
import { promisify } from "node:util";
import pg from "pg";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { testDatabase, type TestDatabase } from "../support/database";

const root = path.resolve(import.meta.dirname, "../..");
const run = (env: Record<string, string>) =>
  promisify(execFile)(process.execPath, ["--import", "tsx", "db/migrate.ts"], { cwd: root, env: { ...process.env, ...env } });

/** An empty database beside the given one, and what connects to it as owner and as a role that does not exist yet. */
let given: TestDatabase;
let owner: string;
let application: string;
const name = `t_${randomBytes(6).toString("hex")}`;
const role = `${name}_application`;
async function asOwner(database: string, ...statements: string[]): Promise<void> {
  const client = new pg.Client({ connectionString: given.ownerUrl.replace(`/${given.name}`, `/${database}`) });
  await client.connect();
  for (const statement of statements) await client.query(statement);
  await client.end();
}
beforeAll(async () => {
  given = await testDatabase();
  await asOwner(given.name, `create database ${name}`);
  owner = given.ownerUrl.replace(`/${given.name}`, `/${name}`);
  const url = new URL(owner);
  url.username = role;
  url.password = "a password with 'quotes'";
  application = url.href;
});
afterAll(async () => {
  await asOwner(given.name, `drop database ${name} with (force)`, `drop role if exists "${role}"`);
  await given.drop();
});

describe("migrating", () => {
  it("makes the schema and the application's role, from two processes at once, and again", async () => {
    const env = { MIGRATION_DATABASE_URL: owner, DATABASE_URL: application };
    await Promise.all([run(env), run(env)]);
    await run(env);
    const client = new pg.Client({ connectionString: application });
    await client.connect();
    expect((await client.query("select count(*)::int as n from groups")).rows[0].n).toBe(0);
    await expect(client.query("truncate snapshots")).rejects.toThrow(/permission denied/);
    await expect(client.query("create table mine (a int)")).rejects.toThrow(/permission denied/);
    await client.end();
  });

  it("says in one sentence what is missing", async () => {
    await expect(run({ DATABASE_URL: "" })).rejects.toMatchObject({ code: 2, stderr: expect.stringMatching(/^DATABASE_URL is not set\..*\n$/) });
  });
});
