import { execFileSync, spawn, type ChildProcess } from "node:child_process";
import { existsSync, readFileSync, rmSync, mkdirSync, createWriteStream } from "node:fs";
import { createServer } from "node:net";
import path from "node:path";
import type { TestProject } from "vitest/node";
import { testDatabase } from "./database";

const root = path.resolve(import.meta.dirname, "../..");

declare module "vitest" {
  interface ProvidedContext {
    url: string;
    databaseUrl: string;
    ownerUrl: string;
    realtimePort: number;
    webLog: string;
  }
}

/** The whole product on free ports over a fresh database with the demo data: once for all browser tests. */
export default async function startProduct(project: TestProject): Promise<() => Promise<void>> {
  if (!existsSync(path.join(root, ".next/BUILD_ID"))) throw new Error("nothing is built: run `node scripts/boot.mjs test` first");
  const database = await testDatabase();
  const [port, realtimePort, smtp, http] = await Promise.all([freePort(), freePort(), freePort(), freePort()]);
  const url = `http://localhost:${port}`;
  const env: NodeJS.ProcessEnv = {
    ...ownEnvironment(),
    NODE_ENV: "production",
    DATABASE_URL: database.url,
    NEXTAUTH_SECRET: "secret-of-the-tests",
    NEXTAUTH_URL: url,
    AUTH_TRUST_HOST: "true",
    PORT: String(port),
    REALTIME_PORT: String(realtimePort),
    REALTIME_HOST: "127.0.0.1",
    APP_ORIGIN: `${url},http://127.0.0.1:${port}`,
    MAILBOX_SMTP_PORT: String(smtp),
    MAILBOX_HTTP_PORT: String(http),
    SMTP_URL: `smtp://127.0.0.1:${smtp}`,
    MAILBOX_URL: `http://127.0.0.1:${http}`,
    NEXT_TELEMETRY_DISABLED: "1",
  };
  execFileSync(process.execPath, ["--import", "tsx", "db/seed/seed.ts"], {
    cwd: root,
    env: { ...env, MIGRATION_DATABASE_URL: database.ownerUrl },
    stdio: ["ignore", "ignore", "inherit"],
  });
  const logs = path.join(root, ".data/logs");
  rmSync(logs, { recursive: true, force: true });
  mkdirSync(logs, { recursive: true });
  const children = [
    start("realtime", ["--import", "tsx", "realtime/server.ts"], env, logs),
    start("web", ["node_modules/next/dist/bin/next", "start", "-H", "127.0.0.1", "-p", String(port)], env, logs),
    start("mailbox", ["scripts/mailbox.mjs"], env, logs),
  ];
  await answering(`http://127.0.0.1:${port}/api/health`, logs);
  await answering(`http://127.0.0.1:${realtimePort}/health`, logs);
  project.provide("url", url);
  project.provide("databaseUrl", database.url);
  project.provide("ownerUrl", database.ownerUrl);
  project.provide("realtimePort", realtimePort);
  project.provide("webLog", path.join(logs, "web.log"));
  return async () => {
    await Promise.all(children.map(end));
    await database.drop();
  };
}

function start(name: string, args: string[], env: NodeJS.ProcessEnv, logs: string): ChildProcess {
  const log = createWriteStream(path.join(logs, `${name}.log`));
  const child = spawn(process.execPath, args, { cwd: root, env, stdio: ["ignore", "pipe", "pipe"] });
  child.stdout.pipe(log);
  child.stderr.pipe(log);
  return child;
}

function end(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null) return Promise.resolve();
  return new Promise((resolve) => {
    child.once("exit", () => resolve());
    child.kill("SIGTERM");
    setTimeout(() => child.kill("SIGKILL"), 5000).unref();
  });
}

async function answering(url: string, logs: string): Promise<void> {
  for (let tries = 0; tries < 300; tries++) {
    if (
      await fetch(url).then(
        (r) => r.ok,
        () => false,
      )
    )
      return;
    await new Promise((resolve) => setTimeout(resolve, 200));
  }
  const said = ["web", "realtime"].map((name) => readFileSync(path.join(logs, `${name}.log`), "utf8").slice(-2000)).join("\n");
  throw new Error(`nothing answers on ${url} after a minute:\n${said}`);
}

/** What the tests were started with, without what makes a process one of the test runner's. */
function ownEnvironment(): Record<string, string | undefined> {
  return Object.fromEntries(Object.entries(process.env).filter(([name]) => !name.startsWith("VITEST")));
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer()
      .once("error", reject)
      .listen(0, "127.0.0.1", () => {
        const address = probe.address();
        const port = typeof address === "object" && address ? address.port : 0;
        probe.close(() => resolve(port));
      });
  });
}
