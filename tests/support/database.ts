import { execFileSync } from "node:child_process";
import { createHash, randomBytes } from "node:crypto";
import { existsSync, readFileSync, readdirSync } from "node:fs";
import path from "node:path";
import pg from "pg";
import { connect, type Connection } from "@/db/client";

const root = path.resolve(import.meta.dirname, "../..");

export interface TestDatabase extends Connection {
  /** As the application's role: no right to change what is frozen. */
  readonly url: string;
  /** As the owner, for migrations and for looking behind the application's back. */
  readonly ownerUrl: string;
  readonly name: string;
  /** Closes the pool and drops the database. */
  drop(): Promise<void>;
}

/** A fresh, migrated database on the private cluster. Copied from a template made once for each state of the migrations. */
export async function testDatabase(): Promise<TestDatabase> {
  const admin = adminUrl();
  const template = await ensureTemplate(admin);
  const name = `t_${randomBytes(6).toString("hex")}`;
  await query(admin, `create database ${name} template ${template}`);
  const ownerUrl = withDatabase(admin, name);
  const url = applicationUrl(admin, name);
  const connection = connect(url, 8);
  return {
    ...connection,
    url,
    ownerUrl,
    name,
    drop: async () => {
      await connection.end();
      await query(admin, `drop database if exists ${name} with (force)`);
    },
  };
}

/** Password of the application's role in tests, on a cluster that listens on loopback only. */
const applicationPassword = "test-application";

function adminUrl(): string {
  const file = path.join(root, ".data/test.json");
  if (!existsSync(file)) throw new Error("no test cluster: run `node scripts/boot.mjs test --database-only` first");
  const { TEST_ADMIN_URL } = JSON.parse(readFileSync(file, "utf8")) as { TEST_ADMIN_URL: string };
  return TEST_ADMIN_URL;
}

function withDatabase(url: string, name: string): string {
  const changed = new URL(url);
  changed.pathname = `/${name}`;
  return changed.href;
}

function applicationUrl(url: string, name: string): string {
  const changed = new URL(withDatabase(url, name));
  changed.username = "cotectic_test";
  changed.password = applicationPassword;
  return changed.href;
}

let made: Promise<string> | undefined;

function ensureTemplate(admin: string): Promise<string> {
  made ??= makeTemplate(admin);
  return made;
}

async function makeTemplate(admin: string): Promise<string> {
  const version = migrationsHash();
  const name = `template_${version}`;
  const client = new pg.Client({ connectionString: admin });
  await client.connect();
  try {
    // Several test processes come here at once; one makes it, the others wait.
    await client.query("select pg_advisory_lock(726413)");
    const role = await client.query("select 1 from pg_roles where rolname = 'cotectic_test'");
    if (role.rowCount === 0) await client.query(`create role cotectic_test login password '${applicationPassword}'`);
    const there = await client.query("select 1 from pg_database where datname = $1", [name]);
    if (there.rowCount === 0) {
      await client.query(`drop database if exists ${name}_making with (force)`);
      await client.query(`create database ${name}_making`);
      execFileSync(process.execPath, ["--import", "tsx", "db/migrate.ts"], {
        cwd: root,
        env: { ...process.env, MIGRATION_DATABASE_URL: withDatabase(admin, `${name}_making`), DATABASE_URL: applicationUrl(admin, `${name}_making`) },
        stdio: ["ignore", "pipe", "pipe"],
      });
      await client.query(`alter database ${name}_making rename to ${name}`);
    }
  } finally {
    await client.end();
  }
  return name;
}

function migrationsHash(): string {
  const hash = createHash("sha256");
  const migrations = readdirSync(path.join(root, "db/migrations")).filter((file) => file.endsWith(".sql"));
  for (const file of [...migrations.sort().map((name) => `db/migrations/${name}`), "db/migrate.ts", "db/grants.ts"]) {
    if (existsSync(path.join(root, file))) hash.update(readFileSync(path.join(root, file)));
  }
  return hash.digest("hex").slice(0, 12);
}

async function query(url: string, text: string): Promise<void> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    await client.query(text);
  } finally {
    await client.end();
  }
}
