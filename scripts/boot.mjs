/**
 * Brings a bare machine to where the product can run: packages, PostgreSQL, a private cluster, migrations, demo data, build.
 *
 * Runs as npm's prestart and pretest, before node_modules exists: node's own modules only, plain JavaScript. Every step says
 * what it does, is skipped when there is nothing to do, and fails with one sentence.
 *
 *   node scripts/boot.mjs start|test|dev [--database-only]
 */
import { existsSync, readFileSync } from "node:fs";
import path from "node:path";
import { acquireLock } from "./boot/lock.mjs";
import { ensureBuild } from "./boot/build.mjs";
import { ensureBrowser } from "./boot/browser.mjs";
import { ensureCluster, ensureDatabase } from "./boot/cluster.mjs";
import { ensurePackages } from "./boot/packages.mjs";
import { fail, home, log, root, run, childEnv } from "./boot/shared.mjs";
import { writeBootFile } from "./boot/state.mjs";

const mode = process.argv[2] ?? "start";
if (!["start", "test", "dev"].includes(mode)) fail(`"${mode}" is not a way to boot; use start, test or dev.`);
const databaseOnly = process.argv.includes("--database-only");
const [major] = process.versions.node.split(".").map(Number);
if (major < 20) fail(`Node 20 or newer is needed, this is ${process.version}.`);

process.chdir(root);
loadDotEnv();
const release = await acquireLock(path.join(home(), "boot.lock"));
try {
  await ensurePackages();
  const environment = await databases();
  if (!databaseOnly) {
    if (mode === "test") writeBootFile(mode, { ...environment, ...ensureBrowser() });
    if (mode !== "dev") ensureBuild(environment);
  }
} finally {
  release();
}

/** The databases the product and its tests use: given by the environment, or private ones. */
async function databases() {
  if (process.env.DATABASE_URL && mode !== "test") {
    log("database from DATABASE_URL");
    const environment = { DATABASE_URL: process.env.DATABASE_URL, MIGRATION_DATABASE_URL: process.env.MIGRATION_DATABASE_URL ?? process.env.DATABASE_URL };
    migrate(environment, process.env.COTECTIC_DEMO === "yes");
    return writeBootFile(mode, environment);
  }
  const cluster = await ensureCluster(mode === "test" ? "test" : "start");
  if (mode === "test") {
    const environment = { TEST_ADMIN_URL: cluster.url("postgres", "owner"), CLUSTER_STARTED: String(cluster.started) };
    return writeBootFile(mode, environment);
  }
  await ensureDatabase(cluster, "cotectic");
  const environment = {
    PRIVATE_CLUSTER: "yes",
    DATABASE_URL: cluster.url("cotectic", "application"),
    MIGRATION_DATABASE_URL: cluster.url("cotectic", "owner"),
  };
  migrate(environment, process.env.COTECTIC_DEMO !== "no");
  return writeBootFile(mode, environment);
}

function migrate(environment, demo) {
  run("node", ["--import", "tsx", "db/migrate.ts"], { env: { ...childEnv(), ...environment } }, "The database could not be migrated");
  if (demo) run("node", ["--import", "tsx", "db/seed/seed.ts"], { env: { ...childEnv(), ...environment } }, "The demo data could not be written");
}

/** `.env` in the project's folder, for people who keep their settings there. */
function loadDotEnv() {
  if (!existsSync(".env")) return;
  for (const line of readFileSync(".env", "utf8").split("\n")) {
    const match = /^\s*([A-Z][A-Z0-9_]*)\s*=\s*(.*?)\s*$/.exec(line);
    if (match && process.env[match[1]] === undefined) process.env[match[1]] = match[2].replace(/^(["'])(.*)\1$/, "$2");
  }
}
